"""Fits of a pair to a prediction: recovery, residuals, effects, refusals."""

import numpy as np
import pytest

from groups.activity import IdealModel
from groups.errors import FitRefusedError, OutOfRangeError, ShapeError
from groups.handoff.correlations import CORRELATIONS, correlative_model
from groups.handoff.fits import Boiling, PairConstants, fit_grid, fit_pair, pair_target
from tests.unit.handoff.handoff_mixtures import LINES, SIZES, nrtl, nrtl_b

CONSTANTS = PairConstants(*SIZES)
COEFFICIENTS = {
    "nrtl": (250.0, 120.0),
    "uniquac": (-120.0, -60.0),
    "wilson": (-150.0, -220.0),
    "van-laar": (300.0, 220.0),
    "margules-2": (260.0, 260.0),
    "margules-3": (300.0, 220.0),
}


def liquid(name: str):
    first, second = COEFFICIENTS[name]
    return correlative_model(
        name,
        "a+b/T",
        [[[0.0, 0.1], [0.1, 0.0]], [[0.0, first], [second, 0.0]]],
        alpha=0.3,
        volumes=SIZES[0],
        surfaces=SIZES[1],
    )


def grid(span=(300.0, 360.0)):
    return fit_grid(span)


@pytest.mark.parametrize("name", CORRELATIONS)
def test_an_equation_finds_its_own_parameters(name):
    true = liquid(name)
    fit = fit_pair(pair_target(true, *grid()), true, name, constants=CONSTANTS)
    found = fit.model.interactions.coefficients
    # Exact data: the only error is where the solver stops (1e-10 in its scaled variables).
    assert found == pytest.approx(true.interactions.coefficients, rel=1e-5, abs=1e-6)
    assert fit.residual.rms < 1e-8
    assert fit.accepted
    assert fit.notes == ()


def test_a_fitted_non_randomness_is_found():
    true = nrtl_b(420.0, 310.0, alpha=0.42)
    fit = fit_pair(pair_target(true, *grid()), true, "nrtl", "b/T", alpha=None)
    values = {one.name: one.value for one in fit.parameters}
    assert values["alpha_12"] == pytest.approx(0.42, abs=1e-5)
    assert values["b_12"] == pytest.approx(420.0, rel=1e-5)


def test_units_stand_with_each_parameter():
    true = nrtl_b(420.0, 310.0)
    fit = fit_pair(pair_target(true, *grid()), true, "nrtl", "a+b/T+c*ln(T)+d*T")
    units = {one.name: one.unit for one in fit.parameters}
    assert units == {
        **{
            f"{letter}_{pair}": unit
            for pair in ("12", "21")
            for letter, unit in zip("abcd", ("1", "K", "1", "1/K"), strict=True)
        },
        "alpha_12": "1",
    }
    assert next(one for one in fit.parameters if one.name == "alpha_12").standard_error is None


def test_the_largest_residual_stands_where_it_says():
    true = nrtl_b(900.0, 500.0)
    target = pair_target(true, *grid())
    fit = fit_pair(target, true, "margules-2")
    worst = fit.residual
    x = np.array([worst.x1, 1.0 - worst.x1])
    off = fit.model.ln_gamma(worst.temperature_K, x) - true.ln_gamma(worst.temperature_K, x)
    assert off[worst.component] == pytest.approx(worst.largest, abs=1e-12)
    whole = fit.model.ln_gamma(target.temperature_K[:, None], target.fractions) - target.ln_gamma
    assert np.abs(whole).max() == pytest.approx(abs(worst.largest), abs=1e-12)
    counted = whole[:, target.counted]
    assert np.sqrt((counted**2).mean()) == pytest.approx(worst.rms, rel=1e-9)
    assert "poor_fit" in {note.code for note in fit.notes}


def test_weights_pull_the_fit_where_the_prediction_is_sure():
    true = nrtl_b(900.0, 500.0)
    T, x1 = grid()
    sure = np.full((len(T), len(x1), 2), 1.0)
    sure[:, 0, 0] = 1e-3  # component 1 at infinite dilution
    plain = fit_pair(pair_target(true, T, x1), true, "margules-3")
    pulled = fit_pair(pair_target(true, T, x1, sure), true, "margules-3")

    def miss(fit):
        ends = fit.model.ln_gamma(T, [0.0, 1.0]) - true.ln_gamma(T, [0.0, 1.0])
        return np.abs(ends[:, 0]).max()

    assert miss(pulled) < 0.1 * miss(plain)


def test_standard_deviations_scale_the_covariance_but_not_the_parameters():
    true = liquid("wilson")
    T, x1 = grid()
    one, two = (fit_pair(pair_target(true, T, x1, s), true, "nrtl") for s in (0.2, 0.4))
    assert [p.value for p in two.parameters] == pytest.approx(
        [p.value for p in one.parameters], rel=1e-6
    )
    assert two.covariance == pytest.approx(4.0 * one.covariance, rel=1e-6)
    assert np.diag(one.correlation) == pytest.approx(1.0)


def test_wilson_is_refused_for_a_splitting_liquid_with_the_reason():
    true = nrtl_b(900.0, 900.0)
    with pytest.raises(FitRefusedError, match=r"splits in two at 300\.0 K"):
        fit_pair(pair_target(true, *grid()), true, "wilson")


def test_van_laar_is_refused_for_ln_gamma_of_both_signs():
    true = correlative_model("margules-3", "a", [[[0.0, 0.5], [-0.2, 0.0]]])
    with pytest.raises(FitRefusedError, match="different signs"):
        fit_pair(pair_target(true, *grid()), true, "van-laar")


def test_a_split_that_the_fit_keeps_is_no_note():
    true = nrtl_b(900.0, 900.0, alpha=0.2)
    fit = fit_pair(pair_target(true, *grid((300.0, 330.0))), true, "nrtl", "b/T", alpha=0.2)
    assert all(one.predicted and one.fitted for one in fit.effects.splits)
    assert fit.accepted


def test_a_split_that_the_fit_loses_is_marked():
    # Barely splitting at the lowest temperature and not above; a gE without temperature, fitted
    # over all of it, lies below the consolute point everywhere.
    true = correlative_model("margules-2", "b/T", [[[0.0, 610.0], [610.0, 0.0]]])
    fit = fit_pair(pair_target(true, *grid((300.0, 360.0))), true, "margules-2", "a")
    assert fit.effects.splits[0].predicted is not None
    assert fit.effects.splits[0].fitted is None
    assert "split_lost" in {note.code for note in fit.notes}
    assert not fit.accepted


def test_a_split_that_the_fit_invents_is_marked():
    true = correlative_model("margules-2", "b/T", [[[0.0, 640.0], [640.0, 0.0]]])
    fit = fit_pair(pair_target(true, *grid((290.0, 345.0))), true, "margules-2", "a")
    assert fit.effects.splits[-1].predicted is None
    assert fit.effects.splits[-1].fitted is not None
    assert "split_invented" in {note.code for note in fit.notes}
    assert not fit.accepted


def test_azeotropes_of_prediction_and_fit_are_compared():
    true = nrtl(0.55, 0.25)
    fit = fit_pair(
        pair_target(true, *grid((320.0, 340.0))), true, "nrtl", "a", boiling=Boiling(LINES, 101.325)
    )
    assert fit.effects.azeotropes_predicted is not None
    assert fit.effects.azeotropes_fitted is not None
    before, after = fit.effects.azeotropes_predicted[0], fit.effects.azeotropes_fitted[0]
    assert after.mole_fractions == pytest.approx(before.mole_fractions, abs=1e-6)


def test_an_azeotrope_that_the_fit_loses_is_marked():
    # gamma that only rises close to x1 = 1: an azeotrope there that a symmetric gE cannot have.
    true = correlative_model("margules-3", "a", [[[0.0, 0.02], [0.5, 0.0]]])
    fit = fit_pair(
        pair_target(true, *grid((320.0, 340.0))),
        true,
        "margules-2",
        "a",
        boiling=Boiling(LINES, 101.325),
    )
    before = fit.effects.azeotropes_predicted
    after = fit.effects.azeotropes_fitted
    assert before is not None
    assert after is not None
    codes = {note.code for note in fit.notes}
    assert len(before) != len(after) or "azeotrope_moved" in codes
    assert fit.accepted == (len(before) == len(after))


def test_one_temperature_cannot_fix_two_coefficients():
    true = nrtl(0.5, 0.3)
    with pytest.raises(FitRefusedError, match="only 1 different temperature"):
        fit_pair(pair_target(true, *grid((320.0, 320.0))), true, "nrtl", "a+b/T")


def test_a_narrow_range_does_not_tell_four_terms_apart():
    true = nrtl(0.5, 0.3)
    with pytest.raises(FitRefusedError, match="do not tell"):
        fit_pair(pair_target(true, *grid((320.0, 320.001))), true, "nrtl", "a+b/T+c*ln(T)+d*T")


def test_bad_standard_deviations_are_refused():
    true = nrtl(0.5, 0.3)
    with pytest.raises(OutOfRangeError):
        pair_target(true, *grid(), 0.0)
    with pytest.raises(ShapeError):
        pair_target(true, *grid(), np.ones(7))


@pytest.mark.parametrize(
    ("span", "temperatures", "compositions"),
    [((300.0, 360.0), 0, 41), ((300.0, 360.0), 5, 4), ((360.0, 300.0), 5, 41), ((3.0, 9.0), 5, 41)],
)
def test_bad_grids_are_refused(span, temperatures, compositions):
    with pytest.raises(OutOfRangeError):
        fit_grid(span, temperatures, compositions)


@pytest.mark.parametrize("name", CORRELATIONS)
def test_an_ideal_solution_is_fitted_by_an_ideal_one(name):
    true = IdealModel(2)
    # UNIQUAC keeps its part for size, which its interactions can only make up for in part.
    same = PairConstants(np.array([2.0, 2.0]), np.array([1.8, 1.8]))
    fit = fit_pair(pair_target(true, *grid()), true, name, constants=same)
    assert fit.residual.rms < 1e-5
    assert fit.accepted
