"""CSV: quoting, blanks, and cells that a spreadsheet must not run."""

import csv
import io

import pytest

from api.tables import csv_text


def test_texts_with_commas_and_quotes_are_quoted():
    text = csv_text(["a", "b"], [['x,"y"', 1.5]])
    assert list(csv.reader(io.StringIO(text))) == [["a", "b"], ['x,"y"', "1.5"]]


def test_missing_values_are_blank_and_lines_end_as_rfc_4180_has_it():
    assert csv_text(["a", "b"], [[None, True]]) == "a,b\r\n,true\r\n"


@pytest.mark.parametrize("start", ["=", "+", "-", "@", "\t", "\r"])
def test_texts_that_a_spreadsheet_would_run_are_disarmed(start):
    [_, [cell]] = list(csv.reader(io.StringIO(csv_text(["a"], [[start + "1"]]), newline="")))
    assert cell == "'" + start + "1"


def test_numbers_below_zero_stay_numbers():
    assert csv_text(["a"], [[-1.5]]) == "a\r\n-1.5\r\n"
