"""What to measure: order, honesty of the expected width, refusals."""

import numpy as np
import pytest

from groups.errors import InvalidInputError, PredictionError
from groups.prediction import Component, measurement_plan, ranking_plan
from groups.prediction.answers import PlannedMeasurement
from groups.prediction.greedy_plan import Question, Trial, greedy_plan, linear_question
from groups.structure.molecule import molecule_from_smiles
from tests.unit.prediction.mixtures import ONE_ATM, mixture

UNMEASURED = "COC(=O)CCOC(C)C"  # methyl 3-isopropoxypropanoate: no published vapour pressure
KEYS = ("CCCCCC", "c1ccccc1")
SOLVENTS = ("CN1CCCC1=O", "CN(C)C=O", "O=S1(=O)CCCC1")
RANDOM = np.random.default_rng(5).standard_normal


def molecules(smiles):
    return [molecule_from_smiles(one) for one in smiles]


def trial(values, noise, what="one"):
    return Trial(PlannedMeasurement("gamma_infinity", what, (0,), 300.0, None), values, noise)


def widths(plan):
    now = plan.interval[1] - plan.interval[0]
    return [now, *(one.expected_width for one in plan.measurements)]


PLANS = {
    "azeotrope at P": lambda: measurement_plan(
        mixture("CCO", "O"), "azeotrope", pressure_kPa=ONE_ATM
    ),
    "azeotrope at T": lambda: measurement_plan(
        mixture("CC(C)=O", "CO"), "azeotrope", temperature_K=330.0
    ),
    "relative volatility": lambda: measurement_plan(
        mixture("CC(C)O", UNMEASURED),
        "relative_volatility",
        mole_fractions=[0.01, 0.99],
        pressure_kPa=15.0,
    ),
    "of three": lambda: measurement_plan(
        mixture("CCO", "O", "CC(C)=O"),
        "relative_volatility",
        mole_fractions=[0.2, 0.3, 0.5],
        temperature_K=330.0,
    ),
    "ranking": lambda: ranking_plan(molecules(KEYS), molecules(SOLVENTS), 330.0),
}


@pytest.mark.parametrize("name", PLANS)
def test_every_measurement_shrinks_the_doubt_and_none_is_named_twice(name):
    plan = PLANS[name]()
    found = widths(plan)
    assert 1 <= len(plan.measurements) <= 4
    # The last brings something over the one that brought something before it; between them one
    # may stand that only helps the next, so the whole row ends lower than it began.
    assert found[-1] == min(found) < 0.8 * found[0]
    assert np.diff(found).max() < 0.02 * found[0]
    assert len({one.what for one in plan.measurements}) == len(plan.measurements)
    assert PLANS[name]() == plan  # seeded


def test_one_linear_measurement_leaves_what_theory_says():
    truth = RANDOM(20_000)
    plan = greedy_plan(linear_question("q", truth), [trial(truth, 0.5)])
    # Normal error and noise: variance left 0.25 / 1.25; two quantiles of 20,000 draws: 2 %.
    expected = 2.0 * 1.6449 * np.sqrt(0.25 / 1.25)
    assert plan.measurements[0].expected_width == pytest.approx(expected, rel=0.03)


def test_the_better_measurement_comes_first_and_a_useless_one_not_at_all():
    truth, other = RANDOM(5000), RANDOM(5000)
    trials = [trial(other, 0.1, "useless"), trial(truth, 0.5, "poor"), trial(truth, 0.1, "good")]
    plan = greedy_plan(linear_question("q", truth), trials)
    assert plan.measurements[0].what == "good"
    assert "useless" not in [one.what for one in plan.measurements]


def test_two_measurements_that_help_only_together_are_both_named():
    # The question is a difference of two numbers of which each measurement holds a common, large
    # part: neither alone tells anything.
    common, difference = 50.0 * RANDOM(5000), RANDOM(5000)
    trials = [trial(common + difference, 0.05, "sum"), trial(common, 0.05, "common")]
    plan = greedy_plan(linear_question("q", difference), trials)
    assert {one.what for one in plan.measurements} == {"sum", "common"}
    # What is left: the scatter of both, 0.05 * sqrt(2).
    assert plan.measurements[-1].expected_width == pytest.approx(2 * 1.645 * 0.0707, rel=0.05)


def test_nothing_to_measure_where_nothing_is_in_doubt():
    certain = np.full(400, 1.5)
    plan = greedy_plan(linear_question("q", certain), [trial(RANDOM(400), 0.1)])
    assert plan.measurements == () and plan.interval == (1.5, 1.5)


def test_a_curved_question_is_asked_anew_of_the_conditioned_draws():
    # q = exp(u), u measured with scatter s: by simulation, truth by truth, in closed form.
    u, s = RANDOM(4000), 0.3
    plan = greedy_plan(Question("q", u[:, None], lambda d: np.exp(d[:, 0])), [trial(u, s)])
    gain, left = 1.0 / (1.0 + s**2), np.sqrt(s**2 / (1.0 + s**2))
    read = u + s * np.random.default_rng(9).standard_normal(len(u))
    ends = np.exp(gain * read + 1.6449 * left * np.array([[-1.0], [1.0]]))
    # The mean over 40 evenly spread truths of a lognormal width: the tail beyond is a few per cent.
    assert plan.measurements[0].expected_width == pytest.approx(
        np.mean(ends[1] - ends[0]), rel=0.45
    )


def test_the_vapour_pressure_of_an_unmeasured_component_is_to_be_measured():
    # At almost pure product the doubt is that of its vapour pressure, 25 %, and its partner's
    # activity: the boiling point stands among the first two and shrinks the doubt most per step.
    plan = PLANS["relative volatility"]()
    assert "boiling_point" in [one.kind for one in plan.measurements[:2]]
    at_equal = measurement_plan(
        mixture("COC(=O)CC", UNMEASURED),
        "relative_volatility",
        mole_fractions=[0.5, 0.5],
        pressure_kPa=15.0,
    )
    first = at_equal.measurements[0]  # two esters: all but ideal, so only its Psat is in doubt
    assert (first.kind, first.components) == ("boiling_point", (1,))


def test_a_ranking_is_settled_in_its_two_leading_solvents():
    plan = PLANS["ranking"]()
    assert "sulfolane" in plan.question and "2-pyrrolidone" in plan.question
    assert {one.components[1] for one in plan.measurements} <= {0, 2}
    assert all(one.kind == "gamma_infinity" for one in plan.measurements)


def test_a_solvent_outside_every_table_does_not_spoil_the_ranking():
    with_borane = [*SOLVENTS, "CCB(CC)CC"]
    plan = ranking_plan(molecules(KEYS), molecules(with_borane), 330.0)
    assert {one.components[1] for one in plan.measurements} <= {0, 2}
    assert np.isfinite(widths(plan)).all()


def test_fewer_than_two_solvents_that_can_be_ranked_are_refused():
    with pytest.raises(PredictionError):
        ranking_plan(molecules(KEYS), molecules(["CCO", "CCB(CC)CC"]), 330.0)


@pytest.mark.parametrize(
    ("smiles", "question", "given"),
    [
        (("CCO", "O"), "relative_volatility", {"temperature_K": 330.0}),
        (("CCO", "O"), "azeotrope", {}),
        (("CCO", "O"), "azeotrope", {"temperature_K": 330.0, "pressure_kPa": ONE_ATM}),
        (("CCO", "O", "CO"), "azeotrope", {"temperature_K": 330.0}),
        (("CCO",), "azeotrope", {"temperature_K": 330.0}),
        (("CCO", "O"), "azeotrope", {"temperature_K": -1.0}),
        (("CCO", "O"), "azeotrope", {"pressure_kPa": 0.0}),
    ],
)
def test_a_question_that_lacks_something_is_refused(smiles, question, given):
    with pytest.raises(InvalidInputError):
        measurement_plan(mixture(*smiles), question, **given)


def test_a_mixture_outside_every_table_is_refused():
    components = [Component(one) for one in molecules(["O", "CCB(CC)CC"])]
    with pytest.raises(PredictionError):
        measurement_plan(components, "azeotrope", pressure_kPa=ONE_ATM)
