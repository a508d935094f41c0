"""Bubble points against Raoult's law worked by hand, and what happens at the edges."""

from dataclasses import dataclass

import numpy as np
import pytest

from groups.equilibrium import (
    System,
    azeotropes,
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    dew_temperature,
    flash,
    relative_volatility,
    stability,
)
from groups.equilibrium.subset import subset
from groups.errors import FractionSumError, OutOfRangeError, ShapeError
from tests.unit.equilibrium.equilibrium_mixtures import BENZENE, LINES, TOLUENE, regular_system

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


def test_one_component_alone_boils_and_condenses_at_its_saturation_line():
    system = subset(regular_system(1.0), (0,))
    expected = float(np.exp(LINES[0].ln_kPa(330.0)))
    assert bubble_pressure(system, 330.0, [1.0]).pressure_kPa[0] == pytest.approx(expected)
    assert dew_pressure(system, 330.0, [1.0]).pressure_kPa[0] == pytest.approx(expected)
    back = dew_temperature(system, expected, [1.0]).temperature_K[0]
    assert back == pytest.approx(330.0, abs=1e-9)
    phases = flash(system, 330.0, [0.9 * expected, 1.1 * expected], [1.0]).phase
    assert phases == ("vapour", "liquid")
    assert azeotropes(system, pressure_kPa=100.0) == ()
    assert stability(system.activity, 330.0, [1.0]).stable[0]


def test_relative_volatility_has_its_limit_where_a_component_is_absent():
    system = regular_system(0.8)
    states = bubble_pressure(system, 340.0, [[0.0, 1.0], [0.3, 0.7]])
    alpha = relative_volatility(system, states)
    # ln gamma1_inf = A = 0.8 in pure component 2.
    expected = np.exp(0.8 + LINES[0].ln_kPa(340.0) - LINES[1].ln_kPa(340.0))
    assert alpha[0, 0] == pytest.approx(expected, rel=1e-12)
    y, x = states.vapour[1], states.liquid[1]
    assert alpha[1, 0] == pytest.approx(y[0] / x[0] / (y[1] / x[1]), rel=1e-12)
    np.testing.assert_array_equal(alpha[:, 1], 1.0)


@dataclass(frozen=True)
class ShiftedVapour:
    """A constant correction that depends a little on the composition and pressure."""

    ideal: bool = False

    def ln_correction(self, temperature_K, pressure_kPa, vapour):
        return -0.03 * (pressure_kPa / temperature_K)[:, None] * (1.0 + vapour[:, ::-1])


def test_a_real_vapour_enters_every_solver_in_the_same_way():
    ideal = regular_system(0.9)
    system = System(ideal.activity, ideal.vapour_pressures, ShiftedVapour())
    x = np.array([[0.2, 0.8], [0.7, 0.3]])
    bubble = bubble_temperature(system, 500.0, x)
    assert bubble.converged.all()
    # y_i P exp(correction_i) = x_i gamma_i Psat_i, written out.
    for k in range(2):
        T, y = bubble.temperature_K[k], bubble.vapour[k]
        right = x[k] * np.exp(ideal.ln_volatility(np.array([T]), x[k : k + 1])[0])
        left = y * 500.0 * np.exp(-0.03 * 500.0 / T * (1.0 + y[::-1]))
        np.testing.assert_allclose(left, right, rtol=1e-9)
    pressure = bubble_pressure(system, bubble.temperature_K, x)
    np.testing.assert_allclose(pressure.pressure_kPa, 500.0, rtol=1e-9)
    dew = dew_temperature(system, 500.0, bubble.vapour)
    np.testing.assert_allclose(dew.temperature_K, bubble.temperature_K, rtol=1e-9)
    for azeotrope in azeotropes(system, pressure_kPa=500.0):
        state = bubble_temperature(system, 500.0, azeotrope.mole_fractions)
        np.testing.assert_allclose(state.vapour[0], azeotrope.mole_fractions, atol=1e-9)
