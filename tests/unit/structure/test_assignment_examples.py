"""Published examples, and molecules remembered from the tables, come out as they stand there."""

import csv
import tomllib
from collections import Counter
from pathlib import Path

import pytest

from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles
from groups.structure.patterns import SAME_GROUPS, pattern_set

REFERENCE = Path(__file__).parents[2] / "reference" / "assignments"


def rows(name: str) -> list[dict[str, str]]:
    with (REFERENCE / f"{name}.csv").open(encoding="utf-8") as lines:
        return list(csv.DictReader(lines))


def counts(groups: str) -> dict[int, int]:
    pairs = (pair.split(":") for pair in groups.replace(";", " ").split())
    return {int(number): int(count) for number, count in pairs}


EXAMPLES = [
    pytest.param(row["method"], row["smiles"], counts(row["groups"]), id=f"{name}-{index}")
    for name in ("remembered", "published_examples")
    for index, row in enumerate(rows(name), start=2)
]


@pytest.mark.parametrize(("method", "smiles", "expected"), EXAMPLES)
def test_a_molecule_has_the_groups_of_its_published_assignment(
    method: str, smiles: str, expected: dict[int, int]
) -> None:
    found = assign(molecule_from_smiles(smiles), method)
    assert found.complete == bool(expected)
    if expected:
        assert found.counts == expected


def test_every_subgroup_of_every_method_has_an_example() -> None:
    shown = {(p.values[0], number) for p in EXAMPLES for number in p.values[2]}
    methods = {p.values[0] for p in EXAMPLES}
    assert methods.isdisjoint(SAME_GROUPS)
    for method in methods:
        assert {(method, number) for number in pattern_set(method).numbers} <= shown


def test_the_record_of_the_remembered_examples_counts_them() -> None:
    record = tomllib.loads((REFERENCE / "remembered.toml").read_text("utf-8"))
    assert record["rows"] == dict(Counter(row["method"] for row in rows("remembered")))
