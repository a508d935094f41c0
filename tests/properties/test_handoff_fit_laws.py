"""Laws of fits and comparisons: the order of components, the order of points, units."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from groups.activity import IdealModel
from groups.equilibrium.subset import SubsetLiquid
from groups.errors import FitRefusedError
from groups.handoff.comparisons import consistency, fit_points, observations, read_records
from groups.handoff.correlations import correlative_model
from groups.handoff.fits import fit_grid, fit_pair, pair_target
from tests.unit.handoff.handoff_mixtures import LINES, nrtl, nrtl_b, records

MASSES = (58.08, 32.04)
ENERGIES = st.floats(-250.0, 600.0)
SLOW = settings(max_examples=25, deadline=None)


@SLOW
@given(ENERGIES, ENERGIES, st.sampled_from(["nrtl", "wilson", "margules-3"]))
def test_the_order_of_the_components_does_not_matter_to_a_fit(first, second, name):
    true = nrtl_b(first, second, alpha=0.2)
    turned = SubsetLiquid(true, (1, 0))
    T, x1 = fit_grid((320.0, 380.0), 3, 21)
    try:
        one = fit_pair(pair_target(true, T, x1), true, name, "b/T")
        other = fit_pair(pair_target(turned, T, x1), turned, name, "b/T")
    except FitRefusedError:  # Wilson and a split: then both are refused
        with pytest.raises(FitRefusedError):
            fit_pair(pair_target(turned, T, x1), turned, name, "b/T")
        return
    # The solver stops at a relative change of 1e-10 of the sum of squares.
    assert other.residual.rms == pytest.approx(one.residual.rms, abs=1e-6)
    x = np.array([[0.3, 0.7], [0.0, 1.0], [1.0, 0.0]])
    assert other.model.ln_gamma(340.0, x[:, ::-1])[:, ::-1] == pytest.approx(
        one.model.ln_gamma(340.0, x), abs=1e-4
    )


@SLOW
@given(ENERGIES, ENERGIES)
def test_an_equation_always_finds_its_own_numbers(first, second):
    true = nrtl_b(first, second)
    fit = fit_pair(pair_target(true, *fit_grid((320.0, 380.0))), true, "nrtl", "b/T")
    # NRTL has other parameters for one curve now and then: the curve is what must come back.
    assert fit.residual.rms < 1e-6


@SLOW
@given(st.integers(0, 10_000), st.sampled_from(["nrtl", "uniquac", "wilson", "van-laar"]))
def test_points_in_another_order_give_the_same_fit(seed, name):
    rng = np.random.default_rng(seed)
    rows = records(nrtl(0.55, 0.25), noise=rng, x1=np.linspace(0.05, 0.95, 9))
    constants = None
    if name == "uniquac":
        from groups.handoff.fits import PairConstants
        from tests.unit.handoff.handoff_mixtures import SIZES

        constants = PairConstants(*SIZES)
    found = []
    for order in (np.arange(9), rng.permutation(9)):
        points = read_records([rows[k] for k in order], MASSES)
        seen = observations(points, LINES, IdealModel(2))
        fit = fit_points(name, ["a"], points, seen, constants=constants, most_folds=0)
        found.append((fit.weighted_rms, fit.model.ln_gamma(323.15, [0.4, 0.6])))
    assert found[1][0] == pytest.approx(found[0][0], rel=1e-6)
    assert found[1][1] == pytest.approx(found[0][1], abs=1e-5)


@SLOW
@given(st.integers(0, 10_000))
def test_units_do_not_matter(seed):
    rng = np.random.default_rng(seed)
    rows = records(nrtl(0.55, 0.25), noise=rng)
    other = [
        {
            "temperature_F": (row["temperature"] - 273.15) * 1.8 + 32.0,
            "pressure_mmHg": row["pressure"] * 760.0 / 101.325,
            "x1_mole_percent": 100.0 * row["x1"],
            "y1_mole_percent": 100.0 * row["y1"],
        }
        for row in rows
    ]
    plain = [{k: row[k] for k in ("temperature", "pressure", "x1", "y1")} for row in rows]
    one, two = (read_records(r, MASSES).vapour_liquid for r in (plain, other))
    for name in ("temperature_K", "pressure_kPa", "x1", "y1"):
        assert getattr(two, name) == pytest.approx(getattr(one, name), rel=1e-12)


@SLOW
@given(st.floats(0.0, 2.5), st.floats(0.0, 2.5))
def test_a_thermodynamic_set_always_passes_the_tests_of_consistency(first, second):
    model = correlative_model("margules-3", "a", [[[0.0, first], [second, 0.0]]])
    rows = records(model, x1=np.linspace(0.0, 1.0, 17))
    for row in rows:
        row["u_pressure"], row["u_y1"] = 0.1, 0.005
    points = read_records(rows, MASSES)
    seen = observations(points, LINES, IdealModel(2))
    found = consistency(points.vapour_liquid, seen, LINES)
    passed = {test.name: test.passed for test in found.tests}
    assert passed["point-to-point"] is True
    assert passed["direct"] is True
    assert passed["Fredenslund"] is True
    assert passed["pure ends"] is True
    assert found.suspects == ()
