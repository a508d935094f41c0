"""Flashes with several liquids: closed equations, the lever rule, traces, twenty components."""

import numpy as np
import pytest

from groups.equilibrium import System, diagram, flash, flash_at_pressure, flash_at_temperature
from groups.errors import OutOfRangeError
from tests.unit.equilibrium.equilibrium_mixtures import (
    ACETONE,
    BENZENE,
    ETHANOL,
    WATER,
    Regular,
    regular_system,
)

HETERO = regular_system(4.0, lines=(BENZENE, WATER))
TERNARY = regular_system(0.4, 4.0, 1.2, lines=(ACETONE, BENZENE, WATER), power=1.0)


def gaps(system, result, k):
    """Largest difference of ln fugacity, by the definition, between all phases of one state."""
    T, P = result.temperature_K[k : k + 1], result.pressure_kPa[k]
    columns = []
    for x in result.liquids[k]:
        if np.isfinite(x).all():
            columns.append(np.log(x) + system.ln_volatility(T, x[None])[0])
    if np.isfinite(result.vapour[k]).all():
        columns.append(np.log(result.vapour[k] * P))
    return np.ptp(np.array(columns), axis=0).max()


def test_two_liquids_satisfy_the_closed_equation_and_the_lever_rule():
    z1 = 0.3
    result = flash(HETERO, 300.0, 500.0, [z1, 1.0 - z1])
    assert result.phase == ("two liquids",)
    first, second = result.liquids[0, :2]
    # gE/RT = 4 x1 x2: ln(x2/x1) = 4 (x2 - x1). 1e-9: the flash settles at 1e-11 in ln f.
    for x1, x2 in (first, second):
        assert np.log(x2 / x1) == pytest.approx(4.0 * (x2 - x1), abs=1e-9)
    share = (second[0] - z1) / (second[0] - first[0])
    assert result.liquid_fractions[0, 0] == pytest.approx(share, abs=1e-9)
    assert not result.liquid_stable[0]
    np.testing.assert_allclose(result.liquid[0], [z1, 1.0 - z1], atol=1e-12)


def test_random_ternaries_balance_and_are_in_equilibrium():
    random = np.random.default_rng(3)
    z = random.dirichlet(np.full(3, 0.7), 400)
    T, P = random.uniform(300.0, 390.0, 400), np.exp(random.uniform(3.0, 6.0, 400))
    result = flash(TERNARY, T, P, z)
    assert result.converged.all()
    # All kinds occur, so each is tested.
    assert set(result.phase) == {"liquid", "vapour", "two-phase", "two liquids", "three-phase"}
    assert max(gaps(TERNARY, result, k) for k in range(400)) < 1e-8  # the tolerance
    parts = np.nan_to_num(result.liquids) * result.liquid_fractions[:, :, None]
    total = parts.sum(axis=1) + np.nan_to_num(result.vapour) * result.vapour_fraction[:, None]
    np.testing.assert_allclose(total, z, atol=1e-10)  # the tolerance


def test_a_flash_does_not_depend_on_the_order_of_the_components():
    random = np.random.default_rng(4)
    z = random.dirichlet(np.ones(3), 60)
    order = [2, 0, 1]
    A = TERNARY.activity.A
    lines = tuple(TERNARY.vapour_pressures[k] for k in order)
    other = System(Regular(A[np.ix_(order, order)], power=1.0), lines)
    one, two = flash(TERNARY, 345.0, 101.325, z), flash(other, 345.0, 101.325, z[:, order])
    assert one.phase == two.phase
    np.testing.assert_allclose(two.vapour_fraction, one.vapour_fraction, atol=1e-8)


def test_an_absent_component_changes_nothing():
    z = np.array([[0.4, 0.6, 0.0], [0.05, 0.95, 0.0]])
    whole = flash(regular_system(4.0, 0.3, 0.9, lines=(BENZENE, WATER, ETHANOL)), 342.5, 101.325, z)
    part = flash(HETERO, 342.5, 101.325, z[:, :2])
    assert whole.phase == part.phase
    np.testing.assert_allclose(whole.vapour_fraction, part.vapour_fraction, atol=1e-10)


def test_a_trace_is_shared_by_its_coefficients():
    # At infinite dilution x''/x' = gamma'/gamma''; at 1e-9 the difference is of that order.
    system = regular_system(4.0, 1.5, -0.5, lines=(BENZENE, WATER, ETHANOL))
    result = flash(system, 300.0, 500.0, [0.5, 0.5 - 1e-9, 1e-9])
    first, second = result.liquids[0, :2]
    ln_gamma = system.activity.ln_gamma(300.0, np.stack([first, second]))
    expected = np.exp(ln_gamma[0, 2] - ln_gamma[1, 2])
    assert second[2] / first[2] == pytest.approx(expected, rel=1e-8)


def test_twenty_components_are_no_obstacle():
    random = np.random.default_rng(5)
    A = np.triu(random.uniform(-0.5, 1.5, (20, 20)), 1)
    A[0, 1:] = random.uniform(2.5, 4.0, 19)  # one component that dislikes all others
    lines = tuple(
        type(BENZENE)(BENZENE.A, BENZENE.B * scale, BENZENE.C)
        for scale in random.uniform(0.8, 1.3, 20)
    )
    system = System(Regular(A + A.T), lines)
    z = random.dirichlet(np.append(12.0, np.ones(19)), 20)
    result = flash(system, 345.0, np.geomspace(20.0, 300.0, 20), z)
    assert result.converged.all()
    assert max(gaps(system, result, k) for k in range(20)) < 1e-8
    half = flash_at_pressure(system, 60.0, 0.3, z[:4])
    assert half.converged.all() and "three-phase" in half.phase
    assert max(gaps(system, half, k) for k in range(4)) < 1e-8


@pytest.mark.parametrize("share", [0.05, 0.3, 0.6, 0.9])
def test_between_three_phases_the_vapour_fraction_fixes_the_amounts(share):
    line = diagram(HETERO, "Txy", pressure_kPa=101.325).liquid_split
    z1 = line.y1 + 0.02
    result = flash_at_pressure(HETERO, 101.325, share, [z1, 1.0 - z1])
    assert result.phase == ("three-phase",)
    assert result.temperature_K[0] == pytest.approx(line.temperature_K, abs=1e-7)
    # Two balances: l' + l'' = 1 - v and l' x' + l'' x'' = z - v y.
    rest = z1 - share * line.y1
    first = ((1.0 - share) * line.x1_upper - rest) / (line.x1_upper - line.x1_lower)
    assert result.liquid_fractions[0, 0] == pytest.approx(first, abs=1e-8)
    assert result.vapour_fraction[0] == pytest.approx(share, abs=1e-11)


def test_vapour_fractions_agree_with_flashes_at_temperature_and_pressure():
    random = np.random.default_rng(6)
    z, share = random.dirichlet(np.ones(3), 25), random.uniform(0.0, 1.0, 25)
    share[:2] = 0.0, 1.0
    at_P = flash_at_pressure(TERNARY, 101.325, share, z)
    at_T = flash_at_temperature(TERNARY, 340.0, share, z)
    for result in (at_P, at_T):
        assert result.converged.all()
        inner = (share > 0.0) & (share < 1.0)
        again = flash(TERNARY, result.temperature_K[inner], result.pressure_kPa[inner], z[inner])
        # 1e-7: a fraction moves by up to 100 in a K, and T is known to 1e-10 K.
        np.testing.assert_allclose(again.vapour_fraction, share[inner], atol=1e-7)
        assert again.phase == tuple(np.array(result.phase)[inner])


def test_a_vapour_fraction_outside_its_range_is_refused():
    with pytest.raises(OutOfRangeError):
        flash_at_pressure(HETERO, 101.325, 1.2, [0.5, 0.5])
