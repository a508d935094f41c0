"""Evidence as it is quoted, and the data files with their records."""

import hashlib
import tomllib
from pathlib import Path

import pytest

import groups.confidence.calibration as calibration
from groups.confidence.calibration import evidence
from groups.confidence.calibration.evidence import cross_pairs
from groups.parameters import table

FOLDER = Path(calibration.__path__[0])
TABLES = ("evidence", "descriptors", "prototypes", "scale", "quantiles", "correlation")


def main_number(method: str, name: str) -> int:
    groups = table(method)
    return int(groups.main_numbers[groups.main_names.index(name)])


def test_pairs_join_different_groups_of_either_molecule():
    assert cross_pairs([5, 1], [1, 9]) == {(1, 5), (5, 9), (1, 9)}


def test_evidence_does_not_depend_on_the_order_of_the_molecules():
    assert evidence("unifac-dortmund", [1, 5], [7]) == evidence("unifac-dortmund", [7], [1, 5])


def test_a_pair_with_measurements_quotes_them():
    method = "unifac-dortmund"
    found = evidence(method, [main_number(method, "OH")], [main_number(method, "CH2")])
    assert len(found) == 1
    one = found[0]
    assert one.measurements >= one.systems > 100
    assert one.mean_absolute_error_ln_gamma is not None
    assert f"based on {one.measurements} measurements in {one.systems} systems" in one.message
    assert "typical error" in one.message


def test_a_pair_without_measurements_says_so():
    method = "unifac-dortmund"
    numbers = [int(number) for number in table(method).main_numbers]
    every = evidence(method, numbers, numbers)
    bare = [one for one in every if one.measurements == 0]
    assert bare
    assert bare[0].mean_absolute_error_ln_gamma is None
    assert bare[0].message.startswith("no measurement in the open set contains")
    # the least evidence first: that is what a reader has to know
    assert [one.measurements for one in every] == sorted(one.measurements for one in every)


@pytest.mark.parametrize("name", TABLES)
def test_each_table_has_the_record_of_its_content(name):
    record = tomllib.loads((FOLDER / f"{name}.toml").read_text(encoding="utf-8"))[name]
    content = (FOLDER / record["file"]).read_bytes()
    assert hashlib.sha256(content).hexdigest() == record["sha256"]
    assert "10.1016" in record["data"] or "118727" in record["data"]


@pytest.mark.parametrize("file", sorted(FOLDER.glob("*.csv")), ids=lambda file: file.name)
def test_no_table_is_without_a_record(file):
    assert file.stem in TABLES
