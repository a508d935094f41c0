"""Handbook liquid splits, consolute points, ternary azeotropes and tie lines against predictions.

The tolerances are the errors of the published tables, as `tests/bench/measure_phase_behaviour.py`
prints them, rounded up; the program itself is exact to ten figures and is tested so elsewhere. What
a table is known to be poor at is listed and must stay so: a change there is a change of the table
or of the program.
"""

import csv
import tomllib
from pathlib import Path

import numpy as np
import pytest

from tests.bench.measure_phase_behaviour import (
    Comparison,
    consolutes,
    solubilities,
    ternary_azeotropes,
    tie_lines,
)

FOLDER = Path(__file__).parent
#: ln of the ratio of solubilities, per table: the mean, and the worst of those not listed.
MEAN_LN, WORST_LN = {"unifac-lle": 0.5, "unifac-dortmund": 0.65}, 1.6
POOR = {
    ("unifac-lle", "hexane"): "group contributions give alkanes in water at twenty times too much",
    ("unifac-dortmund", "hexane"): "the same, seventy times; and water in hexane at sixteen times",
}
#: K; the mean of the Dortmund table, and the worst of those not listed.
MEAN_K, WORST_K = 30.0, 30.0
CONSOLUTE_POOR = {
    "1-butanol/water (upper)": "the gap of the table closes 75 K too high",
    "triethylamine/water (lower)": "the table finds no lower point",
}


@pytest.mark.parametrize("method", ["unifac-lle", "unifac-dortmund"])
def test_mutual_solubilities_with_water(method):
    found = list(solubilities(method))
    assert len(found) == 22
    assert np.mean([abs(each.deviation) for each in found]) < MEAN_LN[method]
    for each in found:
        poor = abs(each.deviation) > WORST_LN
        assert poor <= ((method, each.label) in POOR), each
    assert {each.label for each in found if abs(each.deviation) > WORST_LN} == {
        label for known, label in POOR if known == method
    }


def test_consolute_temperatures():
    found = list(consolutes("unifac-dortmund"))
    assert len(found) == 7
    for each in found:
        near = each.predicted is not None and abs(each.deviation) < WORST_K
        assert near != (each.label in CONSOLUTE_POOR), each
    assert np.nanmean([abs(each.deviation) for each in found]) < MEAN_K


@pytest.mark.parametrize("method", ["unifac", "unifac-dortmund"])
def test_ternary_azeotropes(method):
    for each in ternary_azeotropes(method):
        # 0.045 and 1 K: three times what compilations differ by among themselves.
        assert abs(each.deviation) < (1.0 if each.kind.endswith("K") else 0.045), each


def test_the_tie_lines_of_an_extraction_example():
    found = list(tie_lines("unifac"))
    assert len(found) == 7
    # Within a factor of 1.7 although the acid is dimerised in the ether, which no table knows.
    assert max(abs(each.deviation) for each in found) < 0.55


def test_a_state_that_is_not_found_counts_as_no_number():
    assert np.isnan(Comparison("kind", "label", None, 1.0, "nobody").deviation)


@pytest.mark.parametrize(
    "name", ["mutual_solubilities", "consolute_points", "ternary_azeotropes", "tie_lines"]
)
def test_every_table_stands_beside_its_record(name):
    record = tomllib.loads((FOLDER / f"{name}.toml").read_text("utf-8"))
    with (FOLDER / f"{name}.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    assert len(rows) == record["rows"]
    assert all(row["source"] for row in rows)
    assert record["source"] and record["units"] and record["uncertainty"]
