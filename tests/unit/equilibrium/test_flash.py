"""Flashes: phases, balance, and agreement with bubble and dew points."""

import numpy as np
import pytest

from groups.equilibrium import bubble_pressure, dew_pressure, flash
from groups.equilibrium.phase_fraction import phase_fraction
from tests.unit.equilibrium.equilibrium_mixtures import BENZENE, TOLUENE, regular_system

SYSTEM = regular_system(1.4, -0.5, 0.8, power=1.0)


def test_an_ideal_binary_flash_is_the_lever_rule():
    system = regular_system(0.0, lines=(BENZENE, TOLUENE))
    p1, p2 = np.exp(BENZENE.ln_kPa(365.0)), np.exp(TOLUENE.ln_kPa(365.0))
    x1 = (100.0 - p2) / (p1 - p2)
    y1 = x1 * p1 / 100.0
    z1 = 0.5 * (x1 + y1) + 0.1 * (y1 - x1)
    result = flash(system, 365.0, 100.0, [z1, 1.0 - z1])
    assert result.phase == ("two-phase",)
    # 1e-10: the flash settles at 1e-11 in ln K.
    assert result.liquid[0, 0] == pytest.approx(x1, abs=1e-10)
    assert result.vapour[0, 0] == pytest.approx(y1, abs=1e-10)
    assert result.vapour_fraction[0] == pytest.approx(0.6, abs=1e-9)


def test_phases_follow_the_bubble_and_dew_pressures():
    z = [0.3, 0.3, 0.4]
    high = bubble_pressure(SYSTEM, 340.0, z).pressure_kPa[0]
    low = dew_pressure(SYSTEM, 340.0, z).pressure_kPa[0]
    pressures = [high * 1.001, high * 0.999, 0.5 * (high + low), low * 1.001, low * 0.999]
    result = flash(SYSTEM, 340.0, pressures, z)
    assert result.phase == ("liquid", "two-phase", "two-phase", "two-phase", "vapour")
    assert (np.diff(result.vapour_fraction) >= 0.0).all()
    assert np.isnan(result.vapour[0]).all() and np.isnan(result.liquid[-1]).all()


def test_a_flash_balances_and_is_in_equilibrium():
    random = np.random.default_rng(8)
    z = random.dirichlet(np.full(3, 0.6), 300)
    high, low = bubble_pressure(SYSTEM, 345.0, z), dew_pressure(SYSTEM, 345.0, z)
    share = random.uniform(0.001, 0.999, 300)
    P = high.pressure_kPa**share * low.pressure_kPa ** (1 - share)
    result = flash(SYSTEM, 345.0, P, z)
    assert result.converged.all() and set(result.phase) == {"two-phase"}
    b = result.vapour_fraction[:, None]
    np.testing.assert_allclose(b * result.vapour + (1 - b) * result.liquid, z, atol=1e-10)
    back = bubble_pressure(SYSTEM, 345.0, result.liquid)
    np.testing.assert_allclose(back.pressure_kPa, P, rtol=1e-9)
    np.testing.assert_allclose(back.vapour, result.vapour, atol=1e-9)


def test_a_liquid_that_splits_is_given_as_two():
    system = regular_system(5.0)
    result = flash(system, 300.0, 500.0, [[0.5, 0.5], [1e-4, 0.9999]])
    assert result.phase == ("two liquids", "liquid")
    assert result.liquid_stable.tolist() == [False, True]


def test_the_phase_fraction_survives_extreme_coefficients():
    z = np.array([[0.5, 0.5], [1e-9, 1 - 1e-9], [0.3, 0.7]])
    ln_k = np.array([[200.0, -200.0], [60.0, -1e-8], [-1.0, -2.0]])
    fraction, inside = phase_fraction(z, ln_k)
    # Second: the sum is 1e17 without vapour and -9e-9 with nothing else, so both phases exist.
    assert inside.tolist() == [True, True, False]
    # Immiscible components of extreme volatility: each phase is one of them.
    assert fraction[0] == pytest.approx(0.5, abs=1e-12)
    assert fraction[2] == 0.0
