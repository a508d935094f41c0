"""Each data file of the folder beside its record."""

import csv
import hashlib
import tomllib
from importlib.resources import files

import pytest
from rdkit import Chem

from groups.structure.common_names import normal_form, readable_name
from groups.structure.molecule import molecule_from_smiles

FILES = ("names", "ambiguous_names", "functional_groups")


@pytest.mark.parametrize("name", FILES)
def test_a_table_is_the_one_that_its_record_describes(name: str) -> None:
    folder = files("groups.structure")
    content = (folder / f"{name}.csv").read_bytes()
    record = tomllib.loads((folder / f"{name}.toml").read_text(encoding="utf-8"))
    assert hashlib.sha256(content).hexdigest() == record["sha256"]
    assert len(rows(name)) == record["rows"]
    assert record["source"]
    assert record["licence"]


def rows(name: str) -> list[dict[str, str]]:
    text = (files("groups.structure") / f"{name}.csv").read_text(encoding="utf-8")
    return list(csv.DictReader(text.splitlines()))


def test_no_name_stands_for_two_molecules() -> None:
    owner: dict[str, str] = {}
    for row in rows("names"):
        smiles = molecule_from_smiles(row["smiles"]).canonical_smiles
        for name in (row["name"], *row["also"].split(";")):
            if name:
                assert owner.setdefault(normal_form(name), smiles) == smiles
    assert owner.keys().isdisjoint(row["name"] for row in rows("ambiguous_names"))


def test_other_names_are_written_in_the_form_in_which_they_are_looked_up() -> None:
    for row in rows("names"):
        assert row["also"] == normal_form(row["also"])
    for row in rows("ambiguous_names"):
        assert row["name"] == normal_form(row["name"])


def test_functional_group_names_are_unique_and_patterns_valid() -> None:
    names = [row["name"] for row in rows("functional_groups")]
    assert len(names) == len(set(names)) >= 40
    for row in rows("functional_groups"):
        assert Chem.MolFromSmarts(row["smarts"]) is not None
        assert {row["polar"], row["place_told"]} <= {"true", "false"}


@pytest.mark.parametrize(
    ("common", "systematic", "stereo", "shown"),
    [
        ("n,n-diethylacetamide", "", False, "N,N-diethylacetamide"),
        ("n-methylformamide", "", False, "N-methylformamide"),
        ("n-butylamine", "", False, "n-butylamine"),  # normal butyl, not a nitrogen locant
        ("cis-2-pentene", "", False, "2-pentene"),
        ("cis-2-pentene", "", True, "cis-2-pentene"),
        ("(-)-menthol", "", False, "menthol"),
        ("(2R,3S)-2,3-butanediol", "", False, "2,3-butanediol"),
        ("(2-ethylhexyl) acetate", "", False, "(2-ethylhexyl) acetate"),
        ("s-trioxane", "", False, "s-trioxane"),  # symmetrical, not sinister
        ("1h-indene, octahydro-", "Octahydroindene", False, "octahydroindene"),
        ("1,3,5-Trioxane", "", False, "1,3,5-trioxane"),
        ("decane", "", False, "decane"),
        ("dlimonene", "", False, "dlimonene"),
    ],
)
def test_database_names_are_made_readable(
    common: str, systematic: str, stereo: bool, shown: str
) -> None:
    assert readable_name(common, systematic, stereo=stereo) == shown
