"""Dew points against Raoult's law, against bubble points, and over liquids that split."""

import numpy as np
import pytest

from groups.equilibrium import (
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    dew_temperature,
    stability,
)
from tests.unit.equilibrium.equilibrium_mixtures import BENZENE, TOLUENE, WATER, regular_system


def test_an_ideal_vapour_condenses_at_the_harmonic_mean():
    system = regular_system(0.0, lines=(BENZENE, TOLUENE))
    states = dew_pressure(system, 360.0, [0.3, 0.7])
    shares = np.array([0.3, 0.7]) / np.exp([BENZENE.ln_kPa(360.0), TOLUENE.ln_kPa(360.0)])
    # The search ends at 1e-11 in ln fugacity.
    assert states.pressure_kPa[0] == pytest.approx(1.0 / shares.sum(), rel=1e-11)
    np.testing.assert_allclose(states.liquid[0], shares / shares.sum(), rtol=1e-10)


@pytest.mark.parametrize("pairs", [(0.5, 0.2, 0.9), (-3.0, 1.0, -2.0), (4.0, 1.0, 0.2), (9, 5, -2)])
def test_the_dew_point_undoes_the_bubble_point_of_a_stable_liquid(pairs):
    system = regular_system(*pairs, power=1.0)
    x = np.random.default_rng(3).dirichlet(np.full(3, 0.7), 60)
    bubble = bubble_temperature(system, 101.325, x)
    stable = stability(system.activity, bubble.temperature_K, x).stable
    dew = dew_temperature(system, 101.325, bubble.vapour)
    assert dew.converged.all()
    # 1e-9 K: 1e-11 in ln P over a slope near 0.04/K. The vapour of an unstable liquid condenses
    # to another liquid, at a higher temperature.
    np.testing.assert_allclose(dew.temperature_K[stable], bubble.temperature_K[stable], rtol=1e-10)
    assert (dew.temperature_K[~stable] > bubble.temperature_K[~stable] - 1e-7).all()


def test_the_liquid_of_a_dew_point_never_splits():
    system = regular_system(6.0, lines=(BENZENE, WATER))
    y1 = np.linspace(0.0, 1.0, 81)
    states = dew_temperature(system, 101.325, np.stack([y1, 1 - y1], axis=1))
    assert states.converged.all()
    assert stability(system.activity, states.temperature_K, states.liquid).stable.all()


def test_dew_pressure_and_dew_temperature_agree():
    system = regular_system(2.5, -1.0, 0.5, power=1.0)
    y = np.random.default_rng(5).dirichlet(np.ones(3), 40)
    pressure = dew_pressure(system, 345.0, y)
    back = [
        dew_temperature(system, p, z).temperature_K[0]
        for p, z in zip(pressure.pressure_kPa, y, strict=True)
    ]
    np.testing.assert_allclose(back, 345.0, rtol=1e-10)


def test_a_component_that_is_absent_stays_absent():
    system = regular_system(1.0, 0.5, 0.3)
    states = dew_temperature(system, 101.325, [[0.4, 0.0, 0.6], [0.0, 1.0, 0.0]])
    assert states.liquid[0, 1] == 0.0
    np.testing.assert_array_equal(states.liquid[1], [0.0, 1.0, 0.0])
    pure = bubble_pressure(system, states.temperature_K[1], [0.0, 1.0, 0.0])
    assert pure.pressure_kPa[0] == pytest.approx(101.325, rel=1e-10)
