"""The tables of group contributions and the counting of their groups."""

import csv
import hashlib
import tomllib
from pathlib import Path
from typing import get_args

import pytest
from rdkit import Chem

from groups.pure import group_tables
from groups.pure.group_tables import TableName, group_table

TABLES = Path(group_tables.__file__).parent / "tables"

# fmt: off
REACHING = (
    "C#N", "NC#N", "NC=O", "OC=O", "c1ccc2nsnc2c1", "Nc1ccncc1", "c1cc[nH]c1", "Clc1cccs1",
    "Ic1cccs1", "Brc1ccsc1", "O=[N+]([O-])c1cccs1", "N#Cc1ccsc1", "C1=CC1", "O=C1CCCN1",
    "C1CC12CC2", "C1CN1", "C1=NNCC1", "C1CO1", "O=C1OCCO1", "C1CS1", "C=C", "C=C1CCC1",
    "C=C=C", "C=CCl", "C=CF", "C=O", "CBr", "CC#C", "CC(C)=NN=C(C)C", "CC(C)=O", "CC(C)(C)Cl",
    "CC(C)(C)N", "CC(C)(C)O", "CC(C)Cl", "CC(C)O", "Cc1ccccc1F", "Cc1ccccc1O", "Cc1ccccc1S",
    "Cc1ccco1", "CC1CCCC1=O", "CC=NO", "CCO", "CCOC(=S)S", "CCl", "CF", "CI", "CN",
    "CN(C)C=O", "CN(C)N", "CN(C)N=O", "CN1CCCC1", "CN1CCCC1=O", "CN=NC", "CNC=O", "CO",
    "COC=O", "CON", "CON=O", "COO", "CS", "CS(C)(=O)=O", "CS(C)=O", "CSC", "C[N+](=O)[O-]",
    "N=C(c1ccccc1)c1ccccc1", "ClC(Cl)Cl", "FC(Cl)Cl", "FC(F)Cl", "FC(F)F", "FCF", "C=C(F)F",
    "CC(Cl)Cl", "CC(F)Cl", "CC#CC", "CC(C)=C(C)C", "CC(=O)OC", "CC(C)(C)F", "CC(C)N",
    "CC(C)NC(C)C", "CC(C)[N+](=O)[O-]", "CC(C)c1ccccc1", "Cc1ccccc1Cl", "Cc1ccccc1N",
    "Cc1ccccc1[N+](=O)[O-]", "CC=C(C)C", "CC=C=C", "CC=CCO", "CC=O", "CCC#N", "CCC(=O)CC",
    "CCCl", "CCN", "CCN(CC)C=O", "CCNCC", "CCOCC", "CCS", "CCSCC", "CC[N+](=O)[O-]", "CN(C)C",
    "CNC", "CNc1ccccc1", "COC", "COCCO", "Cc1ccccc1CO", "Cc1ccncc1C", "Cc1ccncc1", "Cc1cccs1",
    "Cc1ccc(C)s1", "OCC1CCCO1", "CC(=O)N", "C=C=O", "ClC(F)(F)F", "FC(F)(F)Cl", "CC(C)(F)F",
    "CC(Cl)(Cl)Cl", "CC(Cl)(Cl)F", "CC(F)(F)F", "CCOC(=O)CC", "COC(=O)c1ccccc1",
    "CC(=O)N(C)C", "CC(C)OC", "CC=CC", "c1ccc2ccccc2c1", "CC1CC1", "Nc1ccccc1", "CC(F)F",
    "OC1CCCCC1", "CC(C)CF", "C=C(C)C", "C=CO", "CONC", "CCN", "CC(C)OC", "CN(CC)CC",
    "CCN(CC)CC", "CC(C)NCC", "CC(C)OC(C)C", "CCN1CCCC1", "C1CN1CCO",
)
# fmt: on


@pytest.mark.parametrize("name", get_args(TableName))
def test_every_group_takes_part_in_some_molecule(name: TableName) -> None:
    table = group_table(name)
    seen: set[int] = set()
    for smiles in REACHING:
        seen.update(table.count(Chem.MolFromSmiles(smiles)) or {})
    assert seen == {row.number for row in table.rows}


def named_counts(name: TableName, smiles: str) -> dict[str, int]:
    counts = group_table(name).count(Chem.MolFromSmiles(smiles))
    assert counts is not None
    names = {row.number: row.name for row in group_table(name).rows}
    return {names[number]: n for number, n in counts.items()}


def test_joback_groups_of_2_ethylphenol_are_those_of_the_textbook() -> None:
    # Poling, Prausnitz, O'Connell, 5th ed. (2001), example 2-1, from memory.
    assert named_counts("joback", "CCc1ccccc1O") == {
        "-CH3": 1,
        "-CH2- of a chain": 1,
        "=CH- of a ring": 4,
        "=C< of a ring": 2,
        "-OH of a phenol": 1,
    }


def test_a_larger_group_goes_before_what_it_contains() -> None:
    assert named_counts("stein_brown", "CC(=O)O") == {"-CH3": 1, "-C(O)OH": 1}
    assert named_counts("stein_brown", "CC(=O)NC") == {"-CH3": 2, "-C(O)NH-": 1}
    assert named_counts("constantinou_gani", "CCCC(=O)OCC") == {
        "CH3": 2,
        "CH2": 2,
        "CH2COO": 1,
    }


def test_the_count_does_not_depend_on_how_the_smiles_is_written() -> None:
    for name in get_args(TableName):
        one = group_table(name).count(Chem.MolFromSmiles("Cc1ccccc1O"))
        two = group_table(name).count(Chem.MolFromSmiles("OC1=C(C)C=CC=C1"))
        assert one == two


def test_an_atom_without_a_group_leaves_no_count() -> None:
    for name in get_args(TableName):
        assert group_table(name).count(Chem.MolFromSmiles("C[Si](C)(C)C")) is None


def test_a_missing_contribution_is_no_zero() -> None:
    table = group_table("joback")
    counts = table.count(Chem.MolFromSmiles("N=C(C)C"))
    assert counts is not None
    assert table.total(counts, "Tb_K") is not None
    assert table.total(counts, "Tc") is None


@pytest.mark.parametrize("path", sorted(TABLES.glob("*.csv")), ids=lambda p: p.stem)
def test_every_table_stands_beside_a_true_record(path: Path) -> None:
    record = tomllib.loads(path.with_suffix(".toml").read_text(encoding="utf-8"))
    data = path.read_bytes()
    assert record["sha256"] == hashlib.sha256(data).hexdigest()
    assert record["rows"] == len(list(csv.DictReader(data.decode().splitlines())))
    assert {"title", "source", "units", "range", "notes"} <= record.keys()
