"""Bubble points against Raoult's law worked by hand, and what happens at the edges."""

import numpy as np
import pytest
from equilibrium_mixtures import BENZENE, LINES, TOLUENE, regular_system

from groups.equilibrium import bubble_pressure, bubble_temperature
from groups.errors import FractionSumError, OutOfRangeError, ShapeError

IDEAL_PAIR = regular_system(0.0, lines=(BENZENE, TOLUENE))
# Rounding of exp and log over about ten operations.
ROUNDING = 1e-12


def test_an_ideal_liquid_follows_raoult():
    states = bubble_pressure(IDEAL_PAIR, 360.0, [[0.3, 0.7]])
    partial = np.array([0.3, 0.7]) * np.exp([BENZENE.ln_kPa(360.0), TOLUENE.ln_kPa(360.0)])
    assert states.pressure_kPa[0] == pytest.approx(partial.sum(), rel=ROUNDING)
    np.testing.assert_allclose(states.vapour[0], partial / partial.sum(), rtol=ROUNDING)


def test_bubble_temperature_returns_to_the_pressure_it_was_asked_for():
    system = regular_system(1.5, 0.4, -0.9, power=1.0)
    x = np.random.default_rng(1).dirichlet(np.ones(3), 50)
    states = bubble_temperature(system, 101.325, x)
    assert states.converged.all()
    back = bubble_pressure(system, states.temperature_K, x)
    # The search stops at 1e-12 in ln P.
    np.testing.assert_allclose(back.pressure_kPa, 101.325, rtol=2e-12)
    np.testing.assert_allclose(back.vapour, states.vapour, atol=1e-12)


def test_a_pure_liquid_boils_at_its_own_temperature():
    system = regular_system(1.5, 0.4, -0.9)
    states = bubble_temperature(system, 50.0, np.eye(3))
    for i, line in enumerate(LINES[:3]):
        assert line.ln_kPa(states.temperature_K[i]) == pytest.approx(np.log(50.0), abs=ROUNDING)
    np.testing.assert_array_equal(states.vapour, np.eye(3))


@pytest.mark.parametrize("strength", [-30.0, 15.0, 30.0])
def test_extreme_activity_coefficients_neither_overflow_nor_warn(strength):
    x = np.array([[1e-12, 1 - 1e-12], [0.5, 0.5], [1.0, 0.0], [1 - 1e-9, 1e-9]])
    states = bubble_temperature(regular_system(strength), [1e-3, 100.0, 100.0, 2000.0], x)
    assert states.converged.all()


def test_a_pressure_that_no_temperature_reaches_is_blank_with_a_reason():
    # ln P of these lines never exceeds A = 16.4, that is 1.3e7 kPa at infinite temperature, and
    # 1.3e6 kPa lies beyond 2000 K.
    states = bubble_temperature(IDEAL_PAIR, 9e5, [0.5, 0.5])
    assert not states.converged[0]
    assert np.isnan(states.temperature_K[0])
    assert "boils" in str(states.failure[0])


def test_no_points_give_no_states():
    states = bubble_temperature(IDEAL_PAIR, np.empty(0), np.empty((0, 2)))
    assert states.failure == ()


@pytest.mark.parametrize(
    ("temperature_K", "fractions", "error"),
    [
        (300.0, [0.5, 0.6], FractionSumError),
        (300.0, [np.nan, 1.0], OutOfRangeError),
        (300.0, [-0.1, 1.1], OutOfRangeError),
        (-5.0, [0.5, 0.5], OutOfRangeError),
        (np.inf, [0.5, 0.5], OutOfRangeError),
        (300.0, [1.0], ShapeError),
        ([300.0, 310.0], [[0.5, 0.5]] * 3, ShapeError),
    ],
)
def test_bad_input_is_refused(temperature_K, fractions, error):
    with pytest.raises(error):
        bubble_pressure(IDEAL_PAIR, temperature_K, fractions)
