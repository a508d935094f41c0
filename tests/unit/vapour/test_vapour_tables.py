"""The data files of real vapours agree with their records."""

import csv
import hashlib
import tomllib
from pathlib import Path

from rdkit import Chem

from groups.vapour import association

TABLE = Path(association.__file__).parent / "tables" / "dimerisation.csv"


def test_the_table_of_dimers_is_the_one_that_its_record_describes():
    record = tomllib.loads(TABLE.with_suffix(".toml").read_text("utf-8"))
    assert hashlib.sha256(TABLE.read_bytes()).hexdigest() == record["sha256"]
    rows = list(csv.DictReader(TABLE.read_text("utf-8").splitlines()))
    assert len(rows) == record["rows"]


def test_every_acid_of_the_table_is_keyed_by_canonical_smiles():
    rows = csv.DictReader(TABLE.read_text("utf-8").splitlines())
    assert all(Chem.CanonSmiles(row["smiles"]) == row["smiles"] for row in rows)
