"""Structures that several tests of this folder draw on."""

import pytest
from chemicals.identifiers import ChemicalMetadataDB


@pytest.fixture(scope="session")
def listed_smiles() -> list[str]:
    """SMILES of the short identifier list, about 5,000 well-known substances, salts among them."""
    database = ChemicalMetadataDB(main_db=None)  # its own, which no look-up makes longer
    return sorted({entry.smiles for entry in database.CAS_index.values()})
