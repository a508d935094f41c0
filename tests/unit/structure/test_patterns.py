"""The patterns are sound data: each is read in full, and each subgroup has one."""

import csv
import hashlib
import re
import tomllib
from collections.abc import Iterator
from importlib.resources import files
from pathlib import Path

import pytest

from groups.errors import DataError, UnknownMethodError
from groups.parameters import table
from groups.structure import patterns
from groups.structure.patterns import ASSIGNED_METHODS, fragments, pattern_set

REFERENCE = Path(__file__).parents[2] / "reference" / "assignments"
OWN_TABLES = [m for m in ASSIGNED_METHODS if m not in patterns.SAME_GROUPS]
# R and Q of CFH leave hydrogen out, so one subgroup stands for CHF and CH2F.
SEVERAL_FORMULAS = {("unifac-nist", 143)}


def record(name: str) -> dict[str, object]:
    folder = files("groups.structure") / "patterns"
    return tomllib.loads((folder / f"{name}.toml").read_text("utf-8"))


@pytest.mark.parametrize("name", ["fragments", *OWN_TABLES])
def test_a_table_is_the_one_that_its_record_describes(name: str) -> None:
    content = (files("groups.structure") / "patterns" / f"{name}.csv").read_bytes()
    described = record(name)
    assert hashlib.sha256(content).hexdigest() == described["sha256"]
    assert len(content.splitlines()) - 1 == described["rows"]
    assert described["source"]
    assert described["licence"]


@pytest.mark.parametrize("method", OWN_TABLES)
def test_every_subgroup_has_a_pattern_or_a_reason_for_having_none(method: str) -> None:
    with_pattern = set(pattern_set(method).numbers)
    without = set(record(method)["without_pattern"])  # type: ignore[call-overload]
    assert with_pattern.isdisjoint(without)
    assert with_pattern | without == set(table(method).subgroup_numbers.tolist())
    assert bool(without) == bool(record(method)["without_pattern_reason"])


@pytest.mark.parametrize("method", sorted(patterns.SAME_GROUPS))
def test_a_completed_table_has_the_subgroups_of_the_table_it_completes(method: str) -> None:
    assert set(pattern_set(method).numbers) <= set(table(method).subgroup_numbers.tolist())


def test_every_fragment_is_used() -> None:
    used = {p.fragment.key for method in OWN_TABLES for p in pattern_set(method).patterns}
    assert used == set(fragments())


@pytest.mark.parametrize("method", OWN_TABLES)
def test_all_fragments_of_one_subgroup_hold_the_same_atoms(method: str) -> None:
    formulas: dict[int, set[tuple[tuple[str, float], ...]]] = {}
    for pattern in pattern_set(method).patterns:
        held = tuple(sorted(pattern.fragment.formula().items()))
        formulas.setdefault(pattern.number, set()).add(held)
    several = {(method, number) for number, found in formulas.items() if len(found) > 1}
    assert several <= SEVERAL_FORMULAS


def labels() -> Iterator[tuple[str, int, str]]:
    with (REFERENCE / "subgroup_formulas.csv").open(encoding="utf-8") as lines:
        for row in csv.DictReader(lines):
            yield row["method"], int(row["number"]), row["formula"]


@pytest.mark.parametrize(("method", "number", "formula"), list(labels()))
def test_a_pattern_holds_the_atoms_of_the_printed_label(
    method: str, number: int, formula: str
) -> None:
    expected: dict[str, float] = {}
    for symbol, count in re.findall(r"([A-Z][a-z]?)([\d.]*)", formula):
        expected[symbol] = expected.get(symbol, 0.0) + float(count or 1)
    for pattern in pattern_set(method).patterns:
        if pattern.number == number:
            assert pattern.fragment.formula() == expected


def test_the_record_of_the_labels_counts_them() -> None:
    stated = tomllib.loads((REFERENCE / "subgroup_formulas.toml").read_text("utf-8"))
    assert stated["rows"] == len(list(labels()))


@pytest.mark.parametrize(
    ("smarts", "reason"),
    [
        ("[C;H3]", "must state element, bonds and hydrogens"),
        ("[C;X4]", "must state element, bonds and hydrogens"),
        ("[*;X4;H1]", "must state element, bonds and hydrogens"),
        ("[C;X4;H3]-C", "no SMARTS with every atom in brackets"),
        ("[C;X4;H3](", "no SMARTS with every atom in brackets"),
    ],
)
def test_a_fragment_that_leaves_an_atom_open_is_refused(smarts: str, reason: str) -> None:
    with pytest.raises(DataError, match=reason):
        patterns._fragment({"fragment": "wrong", "smarts": smarts, "halves": ""})


def test_a_method_without_table_is_refused() -> None:
    with pytest.raises(UnknownMethodError):
        pattern_set("ideal")
