"""The tables hold the numbers that the publications print."""

import csv
import tomllib
from pathlib import Path

import pytest

from groups.parameters import table

HERE = Path(__file__).parent
with (HERE / "published_values.csv").open(encoding="utf-8", newline="") as file:
    ROWS = list(csv.DictReader(file))


def test_the_record_counts_the_published_values() -> None:
    record = tomllib.loads((HERE / "published_values.toml").read_text(encoding="utf-8"))
    assert record["rows"] == len(ROWS)


@pytest.mark.parametrize(
    "row", ROWS, ids=lambda r: f"{r['method']} {r['quantity']} {r['i']} {r['j']}"
)
def test_the_table_holds_the_published_value(row: dict[str, str]) -> None:
    published = table(row["method"])
    if row["quantity"] in "RQ":
        found = getattr(published, row["quantity"])[published.subgroup_index(int(row["i"]))]
    else:
        at = published.main_index(int(row["i"])), published.main_index(int(row["j"]))
        found = getattr(published, row["quantity"])[at]
    difference = abs(found - float(row["value"]))
    assert difference <= float(row["tolerance"]) + 1e-9, row["source"]  # 1e-9: binary rounding
