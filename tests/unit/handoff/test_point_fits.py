"""Equations fitted to measured points: recovery, covariance, information criterion, folds."""

import numpy as np
import pytest

from groups.activity import IdealModel, excess_enthalpy
from groups.equilibrium import binary_split
from groups.errors import FitRefusedError, TooFewPointsError
from groups.handoff.comparisons import fit_points, observations, read_records
from groups.handoff.comparisons.regression import akaike, automatic_forms
from tests.unit.handoff.handoff_mixtures import LINES, TRUE_TAU, nrtl, nrtl_b, records

MASSES = (58.08, 32.04)
REPEATS = 150


def seen_of(rows, lines=LINES):
    points = read_records(rows, MASSES)
    return points, observations(points, lines, IdealModel(2))


def test_exact_points_give_the_parameters_back():
    points, seen = seen_of(records(nrtl(*TRUE_TAU)))
    fit = fit_points("nrtl", ["a"], points, seen)
    values = {one.name: one.value for one in fit.parameters}
    assert values["a_12"] == pytest.approx(TRUE_TAU[0], abs=1e-5)
    assert values["a_21"] == pytest.approx(TRUE_TAU[1], abs=1e-5)
    assert fit.weighted_rms < 1e-5


def test_the_stated_covariance_covers_the_true_parameters():
    # Known noise, many times over: the 90 % interval of either parameter holds the true one nine
    # times in ten. 150 repeats leave a standard error of 0.025; the widening by the scatter, where
    # that is above one, adds about 0.02. Three standard errors either side of 0.91.
    noise = np.random.default_rng(20)
    inside = np.zeros(2)
    spread = []
    for _ in range(REPEATS):
        points, seen = seen_of(records(nrtl(*TRUE_TAU), noise=noise))
        fit = fit_points("nrtl", ["a"], points, seen, most_folds=0)
        found = np.array([one.value for one in fit.parameters[:2]])
        error = np.array([one.standard_error for one in fit.parameters[:2]], dtype=float)
        inside += np.abs(found - TRUE_TAU) <= 1.645 * error
        spread.append((found, error))
    coverage = inside / REPEATS
    assert (coverage > 0.83).all()
    assert (coverage < 0.985).all()
    scatter = np.std([found for found, _ in spread], axis=0)
    stated = np.mean([error for _, error in spread], axis=0)
    assert stated == pytest.approx(scatter, rel=0.3)  # 150 repeats: 6 %; widening: up to 15 %


def test_correlation_of_the_two_parameters_is_the_one_seen_in_repeats():
    noise = np.random.default_rng(21)
    found = []
    for _ in range(60):
        points, seen = seen_of(records(nrtl(*TRUE_TAU), noise=noise))
        fit = fit_points("nrtl", ["a"], points, seen, most_folds=0)
        found.append([one.value for one in fit.parameters[:2]])
    seen_correlation = np.corrcoef(np.array(found).T)[0, 1]
    assert fit.correlation[0, 1] == pytest.approx(seen_correlation, abs=0.2)
    assert fit.correlation[0, 1] < -0.5  # tau_12 and tau_21 of one gE always trade off


def test_infinite_dilution_alone_is_enough():
    true = nrtl_b(420.0, 310.0)
    rows = []
    for T in (300.0, 330.0, 360.0):
        ends = np.exp(true.ln_gamma(T, np.eye(2)))
        rows.append({"temperature": T, "gamma_inf_1": ends[1, 0]})
        rows.append({"temperature": T, "gamma_inf_2": ends[0, 1]})
    points, seen = seen_of(rows, None)
    fit = fit_points("nrtl", ["b/T"], points, seen)
    assert fit.parameters[0].value == pytest.approx(420.0, rel=1e-4)
    assert fit.parameters[1].value == pytest.approx(310.0, rel=1e-4)


def test_mutual_solubilities_give_back_the_liquid_that_splits():
    true = nrtl_b(900.0, 700.0, alpha=0.2)
    rows = []
    for T in (290.0, 300.0, 310.0):
        poor, rich = binary_split(true, T)
        rows.append({"temperature": T, "x1_poor": poor[0], "x1_rich": rich[0]})
    points, seen = seen_of(rows, None)
    fit = fit_points("nrtl", ["b/T"], points, seen, alpha=0.2)
    assert fit.parameters[0].value == pytest.approx(900.0, rel=1e-4)
    assert fit.parameters[1].value == pytest.approx(700.0, rel=1e-4)
    with pytest.raises(FitRefusedError, match="never splits"):
        fit_points("wilson", ["b/T"], points, seen)


def test_excess_enthalpies_fix_the_slope_with_temperature():
    true = nrtl_b(420.0, 310.0)
    x1 = np.linspace(0.1, 0.9, 9)
    h = excess_enthalpy(true, 320.0, np.stack([x1, 1.0 - x1], axis=-1))
    rows = [
        {"temperature": 320.0, "x1": a, "excess_enthalpy": b} for a, b in zip(x1, h, strict=True)
    ]
    points, seen = seen_of(rows, None)
    assert automatic_forms(points) == ("b/T",)
    fit = fit_points("nrtl", ["b/T"], points, seen)
    again = excess_enthalpy(fit.model, 320.0, np.stack([x1, 1.0 - x1], axis=-1))
    assert again == pytest.approx(h, rel=1e-4)


def test_derivatives_of_every_kind_of_residual():
    from groups.handoff.comparisons.regression import _PointResiduals
    from groups.handoff.fits.formulation import formulation

    true = nrtl_b(620.0, 310.0)
    x1 = np.array([0.3, 0.7])
    h = excess_enthalpy(true, 320.0, np.stack([x1, 1.0 - x1], axis=-1))
    rows = [
        *records(true, x1=np.array([0.2, 0.6])),
        {"temperature": 330.0, "gamma_inf_1": 3.0},
        {"temperature": 331.0, "gamma_2": 1.5, "x1": 0.4},
        {"temperature": 300.0, "x1_poor": 0.1, "x1_rich": 0.7},
        *(
            {"temperature": 320.0, "x1": a, "excess_enthalpy": b}
            for a, b in zip(x1, h, strict=True)
        ),
    ]
    points, seen = seen_of(rows)
    how = formulation("nrtl", "a+b/T", points.temperatures_K, alpha=None)
    residuals = _PointResiduals(how, seen, np.arange(seen.n_residuals))
    p = np.array([0.4, -0.3, 0.2, 0.5, 0.3])
    values, J = residuals(p)
    assert values.shape == (2 + 2 + 2 + 2 + 2,)
    for k in range(len(p)):
        step = np.zeros(len(p))
        step[k] = 1e-6
        numerical = (residuals(p + step)[0] - residuals(p - step)[0]) / 2e-6
        assert J[:, k] == pytest.approx(numerical, rel=1e-6, abs=1e-6 * np.abs(J).max())


def test_the_criterion_prefers_the_equation_that_made_the_points():
    noise = np.random.default_rng(3)
    points, seen = seen_of(records(nrtl(1.8, 0.9), noise=noise))
    right = fit_points("nrtl", ["a"], points, seen)
    poor = fit_points("margules-2", ["a"], points, seen)
    assert right.aicc < poor.aicc - 10.0
    assert right.cross_validated_rms < poor.cross_validated_rms
    assert right.cross_validated_rms == pytest.approx(1.0, abs=0.4)  # the noise is what is stated


def test_akaike_by_hand():
    # n ln(S/n) + 2k + 2k(k+1)/(n-k-1) with k = 3: 10 ln 0.2 + 6 + 24/6
    assert akaike(2.0, 10, 2) == pytest.approx(10.0 * np.log(0.2) + 10.0)
    assert akaike(2.0, 4, 2) == float("inf")


def test_too_few_points_are_refused_with_the_numbers():
    rows = records(nrtl(*TRUE_TAU), x1=np.array([0.5]))
    points, seen = seen_of(rows)
    with pytest.raises(TooFewPointsError) as caught:
        fit_points("nrtl", ["a"], points, seen)
    assert (caught.value.given, caught.value.needed) == (2, 3)


def test_forms_follow_the_span_of_temperature():
    one = read_records(records(nrtl(*TRUE_TAU)), MASSES)
    assert automatic_forms(one) == ("a",)
    two = read_records(
        records(nrtl(*TRUE_TAU)) + records(nrtl(*TRUE_TAU), temperature_K=340.0), MASSES
    )
    assert automatic_forms(two) == ("b/T", "a+b/T")


def test_points_that_fix_nothing_are_refused_and_not_run_after():
    # Activity coefficients of nonsense at both ends and a middle that contradicts them.
    rows = [
        {"temperature": 300.0, "gamma_inf_1": 1e-4},
        {"temperature": 300.0, "gamma_inf_2": 1e6},
        {"temperature": 300.0, "gamma_1": 1e5, "x1": 0.5},
    ]
    points, seen = seen_of(rows, None)
    for name in ("nrtl", "wilson"):
        try:
            fit = fit_points(name, ["a"], points, seen)
        except FitRefusedError:
            continue
        u = fit.model.interactions.values(np.array([300.0]))
        assert np.abs(u).max() < 40.0
        assert fit.weighted_rms > 10.0
