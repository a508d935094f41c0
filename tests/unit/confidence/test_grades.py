"""How reasons become a grade."""

from itertools import permutations

import pytest

from groups.confidence import GRADES, Reason, graded, worst_grade


def test_no_reason_leaves_the_highest_grade():
    assert graded([]).grade == "high"
    assert graded([]).reasons == ()


def test_no_interval_and_no_evidence_is_invented():
    assert graded([Reason("a", "b", "c", "low")]).interval_90 is None
    assert graded([Reason("a", "b", "c", "low")]).evidence == ()


@pytest.mark.parametrize("order", list(permutations(GRADES)))
def test_the_grade_does_not_depend_on_the_order_of_reasons(order):
    reasons = [Reason(cap, "message", "subject", cap) for cap in order]
    assert graded(reasons).grade == "none"
    assert [reason.cap for reason in graded(reasons).reasons] == ["none", "low", "moderate", "high"]


def test_a_reason_given_twice_is_told_once():
    reason = Reason("a", "b", "c", "low")
    assert graded([reason, reason]).reasons == (reason,)


def test_reasons_of_one_grade_keep_their_order():
    reasons = [Reason(code, "b", "c", "low") for code in "dacb"]
    assert [reason.code for reason in graded(reasons).reasons] == list("dacb")


@pytest.mark.parametrize(
    ("grades", "worst"),
    [((), "high"), (("moderate", "high"), "moderate"), (("low", "none", "high"), "none")],
)
def test_the_worst_grade_is_the_least_trusting(grades, worst):
    assert worst_grade(grades) == worst
