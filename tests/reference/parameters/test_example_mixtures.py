"""The committed absurd mixtures are those that the tables predict today."""

from groups.parameters.example_mixtures import read_absurd_mixtures
from tests.reference.parameters import measure_example_mixtures


def test_the_list_of_absurd_mixtures_is_current() -> None:
    found = {(row.method, row.i, row.j) for row in measure_example_mixtures.find_absurd()}
    committed = {(row.method, row.i, row.j) for row in read_absurd_mixtures()}
    assert found == committed, "run measure_example_mixtures.py --write, then the audit --write"
