"""Each CSV stands beside a record that tells where it is from and what was changed."""

import tomllib
from importlib.resources import files
from pathlib import Path

import pytest
from rdkit import Chem

from groups.parameters import METHODS, read_record, table
from groups.parameters.csv_file import read_rows

TABLES = Path(str(files("groups.parameters") / "tables"))
WRITTEN_BY_COMMANDS = {"suspects.csv", "open_data.csv", "example_mixtures.csv"}


def test_every_file_of_the_folder_belongs_to_a_record() -> None:
    recorded = {file.name for method in METHODS for file in read_record(method).files.values()}
    present = {path.name for path in TABLES.glob("*.csv")}
    assert present == recorded | WRITTEN_BY_COMMANDS
    assert {path.stem for path in TABLES.glob("*.toml")} == set(METHODS)


def test_every_file_that_a_command_writes_has_its_record() -> None:
    records = tomllib.loads((TABLES.parent / "derived_tables.toml").read_text(encoding="utf-8"))
    assert {record["file"] for record in records.values()} == WRITTEN_BY_COMMANDS
    for record in records.values():
        assert record["what"] and record["made_by"] and record["data"] and record["licence"]


@pytest.mark.parametrize("method", METHODS)
def test_a_record_names_sources_range_and_checksums(method: str) -> None:
    record = read_record(method)
    assert record.sources
    for source in record.sources:
        assert source.doi.startswith("10.") and source.citation and source.contributes
    assert "memory" in record.temperature_range_source
    for file in record.files.values():
        assert len(read_rows(file)) == file.rows


@pytest.mark.parametrize("method", METHODS)
def test_a_correction_gives_its_reason_and_stands_in_the_table(method: str) -> None:
    record = read_record(method)
    for correction in record.corrections:
        assert correction.reason and correction.second_source
        assert correction.transcribed != correction.corrected
        rows = read_rows(record.files[correction.file])
        keys = {"subgroups": ("number",), "interactions": ("i", "j")}[correction.file]
        found = [r for r in rows if ",".join(r[key] for key in keys) == correction.key]
        assert [row[correction.column] for row in found] == [correction.corrected]


@pytest.mark.parametrize("method", METHODS)
def test_blank_is_never_written_as_a_word(method: str) -> None:
    for file in read_record(method).files.values():
        for row in read_rows(file):
            assert not {"nan", "none", "null", "-"} & {text.lower() for text in row.values()}


@pytest.mark.parametrize("method", METHODS)
def test_every_example_is_one_readable_molecule(method: str) -> None:
    published = table(method)
    for smiles, name in zip(published.example_smiles, published.example_names, strict=True):
        assert "." not in smiles
        molecule = Chem.MolFromSmiles(smiles)
        assert molecule is not None
        assert (Chem.GetFormalCharge(molecule) != 0) == name.endswith(" ion")


@pytest.mark.parametrize("method", ["unifac", "psrk", "unifac-lle"])
def test_a_group_of_one_table_has_the_size_of_its_namesake(method: str) -> None:
    """The tables that build on Bondi's volumes share R and Q, except as their records say."""
    ours, original = table(method), table("unifac")
    of_original = dict(zip(original.subgroup_names, range(len(original.R)), strict=True))
    for k, name in enumerate(ours.subgroup_names):
        if name in of_original:
            there = of_original[name]
            assert (ours.R[k], ours.Q[k]) == (original.R[there], original.Q[there]), name
