"""Drawn liquids and their intervals: laws that hold whatever the width."""

import numpy as np
import pytest

from groups.prediction import activity_coefficients, infinite_dilution
from groups.prediction.bands import N_SAMPLES, Band, band, drawn_around
from groups.structure.molecule import molecule_from_smiles
from tests.unit.prediction.mixtures import mixture

BINARIES = (("CCO", "O"), ("CC(C)=O", "CO"), ("CCCCCC", "c1ccccc1"), ("CCCCO", "O"))
LINE = np.column_stack([np.linspace(0.0, 1.0, 21), np.linspace(1.0, 0.0, 21)])


def molecules(*smiles):
    return [molecule_from_smiles(one) for one in smiles]


def samples_of(one, centre=0.0, n=999):
    return np.random.default_rng(one).normal(centre, 1.0, n)


@pytest.mark.parametrize("smiles", BINARIES)
def test_an_interval_holds_its_number_at_every_composition(smiles):
    answer = activity_coefficients(mixture(*smiles), 330.0, LINE)
    for number, found in (
        (answer.ln_gamma, answer.ln_gamma_band),
        (answer.excess_gibbs_RT, answer.excess_gibbs_band),
    ):
        assert (found.lower <= number).all() and (number <= found.upper).all()


@pytest.mark.parametrize("method", ["unifac", "unifac-2.0", "unifac-lyngby", "psrk"])
def test_a_single_table_that_lies_outside_stretches_the_interval(method):
    pair = [(*molecules("CCCCCCO", "O"), 298.15)]
    (auto,) = infinite_dilution(pair)
    (alone,) = infinite_dilution(pair, method)
    ends, wider = auto.confidence.interval_90, alone.confidence.interval_90
    assert wider.lower == pytest.approx(min(ends.lower, alone.ln_gamma_inf), abs=1e-12)
    assert wider.upper == pytest.approx(max(ends.upper, alone.ln_gamma_inf), abs=1e-12)


def test_a_number_far_outside_is_an_end_of_its_interval():
    drawn = samples_of(3)
    found = band(drawn, np.array(5.0))
    assert found.upper == 5.0
    assert found.lower == band(drawn, np.array(0.0)).lower


@pytest.mark.parametrize("levels", [(0.5, 0.8), (0.8, 0.9), (0.9, 0.99)])
def test_a_higher_level_gives_a_wider_interval(levels):
    drawn = samples_of(0)
    inner, outer = (band(drawn, np.array(0.0), level) for level in levels)
    assert outer.lower < inner.lower < inner.upper < outer.upper


def test_an_interval_of_draws_is_their_central_quantile():
    # Standard normal: 1.645 holds nine tenths. Ends of 200,000 draws scatter by 0.005 (quantile
    # density 0.103): four of those.
    found = band(samples_of(0, n=200_000), np.array(0.0))
    assert found.lower == pytest.approx(-1.6449, abs=0.02)
    assert found.upper == pytest.approx(1.6449, abs=0.02)
    assert found.half_width == pytest.approx(1.6449, abs=0.02)


def test_no_number_has_no_interval():
    found = band(samples_of(0), np.array(np.nan))
    assert np.isnan(found.lower) and np.isnan(found.upper)


def test_a_pure_liquid_has_no_doubt_and_the_dilute_end_the_most():
    answer = activity_coefficients(mixture("CCO", "O"), 330.0, LINE)
    found = answer.ln_gamma_band
    assert found.half_width[0, 1] == found.half_width[-1, 0] == 0.0  # the solvent itself
    assert found.half_width[:, 0].argmax() == 0
    assert found.half_width[:, 1].argmax() == len(LINE) - 1
    assert answer.excess_gibbs_band.half_width[[0, -1]] == pytest.approx([0.0, 0.0], abs=1e-15)


@pytest.mark.parametrize("order", [(1, 0, 2), (2, 1, 0), (1, 2, 0)])
def test_the_order_of_the_components_changes_nothing(order):
    smiles, x = ("CCO", "O", "CC(C)=O"), np.array([0.2, 0.5, 0.3])
    turned = [smiles[k] for k in order]
    one = activity_coefficients(mixture(*smiles), 330.0, x).ln_gamma_band
    other = activity_coefficients(mixture(*turned), 330.0, x[list(order)]).ln_gamma_band
    # Rounding of sums in another order only.
    np.testing.assert_allclose(other.lower[0], one.lower[0, list(order)], atol=1e-10)
    np.testing.assert_allclose(other.upper[0], one.upper[0, list(order)], atol=1e-10)


def test_the_same_question_gets_the_same_interval():
    one, again = (activity_coefficients(mixture("CCO", "O"), 330.0, LINE) for _ in range(2))
    np.testing.assert_array_equal(one.ln_gamma_band.lower, again.ln_gamma_band.lower)
    np.testing.assert_array_equal(one.ln_gamma_band.upper, again.ln_gamma_band.upper)


def test_a_point_has_the_same_interval_alone_as_among_others():
    T = np.linspace(300.0, 360.0, len(LINE))
    together = activity_coefficients(mixture("CCO", "O"), T, LINE).ln_gamma_band
    for k in (0, 7, 20):
        alone = activity_coefficients(mixture("CCO", "O"), T[k], LINE[k]).ln_gamma_band
        np.testing.assert_allclose(alone.lower[0], together.lower[k], rtol=0.0, atol=1e-12)
        np.testing.assert_allclose(alone.upper[0], together.upper[k], rtol=0.0, atol=1e-12)


def test_many_points_are_taken_in_blocks_without_a_seam():
    x = np.linspace(0.0, 1.0, 1100)
    many = np.column_stack([x, 1.0 - x])
    found = activity_coefficients(mixture("CCO", "O"), 330.0, many).ln_gamma_band
    few = activity_coefficients(mixture("CCO", "O"), 330.0, many[505:520]).ln_gamma_band
    np.testing.assert_allclose(found.lower[505:520], few.lower, rtol=0.0, atol=1e-12)


@pytest.mark.parametrize("smiles", BINARIES)
def test_the_interval_of_draws_at_infinite_dilution_is_the_one_calibrated(smiles):
    first, second = molecules(*smiles)
    (limit,) = infinite_dilution([(first, second, 330.0)])
    answer = activity_coefficients(mixture(*smiles), 330.0, [0.0, 1.0])
    calibrated = limit.confidence.interval_90
    width = answer.ln_gamma_band.half_width[0, 0]
    # Half-width of 400 draws against the closed form: scatter about 7 % (long tails), three times.
    assert width == pytest.approx((calibrated.upper - calibrated.lower) / 2.0, rel=0.2)
    # The points of a mixture and the limit have the one model.
    assert answer.ln_gamma[0, 0] == pytest.approx(limit.ln_gamma_inf, abs=1e-9)


def test_every_draw_is_a_consistent_liquid():
    drawn = drawn_around(molecules("CCO", "O", "CC(C)=O"), "estimate", 330.0)
    x = np.array([0.2, 0.5, 0.3])
    step = 1e-5 * np.array([1.0, -2.0, 1.0])
    change = drawn.models.ln_gamma(330.0, x + step) - drawn.models.ln_gamma(330.0, x - step)
    # Gibbs-Duhem: sum x d ln gamma = 0; central difference, rounding 1e-16/1e-5 and step^2.
    np.testing.assert_allclose((x * change).sum(axis=-1) / 2e-5, 0.0, atol=1e-7)


def test_iterating_gives_the_draws_as_models():
    drawn = drawn_around(molecules("CCO", "O"), "estimate", 330.0)
    together = drawn.models.ln_gamma(330.0, LINE)
    assert len(drawn.models) == N_SAMPLES
    for model, own in zip(list(drawn.models)[:5], together, strict=False):
        np.testing.assert_allclose(model.ln_gamma(330.0, LINE), own, atol=1e-12)


def test_one_component_has_no_error_of_activity():
    drawn = drawn_around(molecules("CCO"), "estimate", 330.0)
    assert (drawn.models.ln_gamma(330.0, np.array([[1.0]])) == 0.0).all()
    assert activity_coefficients(mixture("CCO"), 330.0, [1.0]).ln_gamma_band is None


def test_a_mixture_outside_every_table_cannot_be_drawn():
    assert drawn_around(molecules("O", "CCB(CC)CC"), "estimate", 330.0) is None


def test_an_ideal_solution_that_was_asked_for_has_no_interval():
    answer = activity_coefficients(mixture("CCO", "O"), 330.0, LINE, "ideal")
    assert answer.ln_gamma_band is None and answer.excess_gibbs_band is None
    (limit,) = infinite_dilution([(*molecules("CCO", "O"), 330.0)], "ideal")
    assert limit.confidence.interval_90 is None and limit.interval is None


def test_a_level_gives_a_second_interval_of_its_own():
    pair = [(*molecules("CCO", "O"), 330.0)]
    half, ninety, most = (infinite_dilution(pair, level=one)[0] for one in (0.5, 0.9, 0.99))
    assert half.confidence.interval_90 == ninety.confidence.interval_90 == ninety.interval
    assert most.interval.lower < ninety.interval.lower < half.interval.lower
    assert half.interval.upper < ninety.interval.upper < most.interval.upper


def test_half_the_distance_between_the_ends_is_the_half_width():
    assert Band(np.array([1.0]), np.array([4.0])).half_width == 1.5
