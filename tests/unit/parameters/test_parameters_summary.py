"""A summary counts what a table covers."""

import pytest

from groups.parameters import METHODS, method_summary, read_record, table


@pytest.mark.parametrize("method", METHODS)
def test_pairs_with_and_without_parameters_make_up_all_pairs(method: str) -> None:
    summary = method_summary(method)
    n = summary.n_main_groups
    both = summary.n_pairs_with_parameters + summary.n_pairs_without_parameters
    assert both == n * (n - 1) // 2
    assert summary.suspects == table(method).suspects


@pytest.mark.parametrize("method", ["unifac", "unifac-lle", "unifac-lyngby", "psrk"])
def test_the_pairs_are_those_of_the_file(method: str) -> None:
    """In these tables each pair has two directed rows and each main group has a subgroup."""
    rows = read_record(method).files["interactions"].rows
    assert method_summary(method).n_pairs_with_parameters == rows // 2


def test_main_groups_without_subgroup_are_not_counted() -> None:
    published, summary = table("unifac-dortmund"), method_summary("unifac-dortmund")
    assert {50, 77, 85} <= set(published.main_numbers.tolist())
    assert summary.n_main_groups == len(published.main_numbers) - 3


def test_a_completed_table_has_every_pair_and_says_which_are_filled_in() -> None:
    fitted, whole = method_summary("unifac"), method_summary("unifac-2.0")
    assert whole.n_pairs_without_parameters == 0
    assert whole.n_pairs_completed == fitted.n_pairs_without_parameters
    assert fitted.n_pairs_completed == 0
