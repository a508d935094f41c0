"""The table behind a diagram: its starts, its interpolation, and the stability read from it."""

import numpy as np
import pytest

from groups.equilibrium import diagram, stability
from groups.equilibrium.binary_stability import stable_binaries
from groups.equilibrium.boiling_table import boiling_table
from tests.unit.equilibrium.equilibrium_mixtures import (
    ACETONE,
    BENZENE,
    METHANOL,
    TOLUENE,
    WATER,
    Antoine,
    regular_system,
)

P = np.array([101.325])


def grid(points: int) -> np.ndarray:
    x1 = np.linspace(0.0, 1.0, points)
    return np.stack([x1, 1.0 - x1], axis=1)


def test_the_table_gives_boiling_temperatures_and_slopes():
    system = regular_system(0.8, lines=(ACETONE, METHANOL), power=1.0)
    x = grid(21)
    table = boiling_table(system, P, x)
    T, slope, usable = table.boiling(np.full(21, np.log(101.325)))
    assert usable.all()
    for step in (-0.01, 0.0, 0.01):
        terms = x * np.exp(system.ln_volatility(T + step, x))
        # 1e-8: a polynomial through ten Chebyshev places over 40 K; step^2 for the slope.
        expected = np.log(101.325) + slope * step
        np.testing.assert_allclose(np.log(terms.sum(axis=1)), expected, atol=1e-8 + step**2)


def test_the_table_interpolates_activity_coefficients():
    system = regular_system(2.5, lines=(BENZENE, WATER), power=2.0)
    x, T = grid(11), np.array([345.0, 352.3, 371.0])
    found = boiling_table(system, P, x).ln_gamma_at(T)
    np.testing.assert_allclose(found, system.activity.ln_gamma(T[:, None], x[None]), atol=1e-10)


@pytest.mark.parametrize("strength", [1.9, 2.02, 2.2, 3.0, 6.0])
def test_stability_read_from_the_table_is_that_of_the_tangent_plane(strength):
    system = regular_system(strength, lines=(BENZENE, TOLUENE), power=1.0)
    trials = grid(101)
    x = np.linspace(0.002, 0.998, 250)
    x = np.stack([x, 1.0 - x], axis=1)
    T = np.linspace(354.0, 383.0, 250)
    table = boiling_table(system, P, trials)
    found = stable_binaries(system.activity, T, x, table, trials)
    np.testing.assert_array_equal(found, stability(system.activity, T, x).stable)


def test_a_pair_that_boils_far_apart_needs_no_table():
    far = Antoine(13.9, 6000.0, -20.0)  # boils near 666 K
    system = regular_system(0.5, lines=(ACETONE, far))
    assert boiling_table(system, P, grid(11)) is None
    result = diagram(system, "Txy", pressure_kPa=101.325, points=21)
    assert result.converged.all() and result.stable.all() and result.azeotropes == ()
    assert (np.diff(result.temperature_K) < 0.0).all()
