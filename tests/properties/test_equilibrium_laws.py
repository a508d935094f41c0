"""Laws that every phase-equilibrium answer obeys, on random mixtures of an exact model."""

import sys
from pathlib import Path

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

sys.path.insert(0, str(Path(__file__).parents[1] / "unit" / "equilibrium"))

from groups.equilibrium import (
    azeotropes,
    binary_split,
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    diagram,
    stability,
)
from groups.equilibrium.subset import subset
from tests.unit.equilibrium.equilibrium_mixtures import LINES, Regular, regular_system

STRENGTH = st.floats(-6.0, 8.0)
SEED = st.integers(0, 2**31)
# No deadline: the first example pays for imports.
LAW = settings(deadline=None, max_examples=60)


def compositions(seed: int, n: int, count: int = 12) -> np.ndarray:
    return np.random.default_rng(seed).dirichlet(np.full(n, 0.6), count)


@LAW
@given(st.lists(STRENGTH, min_size=3, max_size=3), SEED)
def test_bubble_pressure_never_lies_below_dew_pressure(pairs, seed):
    system, z = regular_system(*pairs, power=1.0), compositions(seed, 3)
    bubble, dew = bubble_pressure(system, 345.0, z), dew_pressure(system, 345.0, z)
    assert bubble.converged.all() and dew.converged.all()
    # 1e-9 relative: the tolerance of a state. Equal at an azeotrope.
    assert (bubble.pressure_kPa >= dew.pressure_kPa * (1.0 - 1e-9)).all()


@LAW
@given(st.lists(STRENGTH, min_size=3, max_size=3), SEED)
def test_a_bubble_point_does_not_depend_on_the_order_of_the_components(pairs, seed):
    system, x = regular_system(*pairs, power=1.0), compositions(seed, 3)
    order = (2, 0, 1)
    here = bubble_temperature(system, 101.325, x)
    there = bubble_temperature(subset(system, order), 101.325, x[:, list(order)])
    np.testing.assert_allclose(there.temperature_K, here.temperature_K, rtol=1e-11)
    np.testing.assert_allclose(there.vapour, here.vapour[:, list(order)], atol=1e-10)


@LAW
@given(STRENGTH)
def test_a_component_of_no_amount_changes_nothing(strength):
    pair = regular_system(strength, power=1.0)
    triple = regular_system(strength, 1.0, -2.0, power=1.0)
    x = compositions(4, 2)
    here = bubble_temperature(pair, 101.325, x)
    there = bubble_temperature(triple, 101.325, np.column_stack([x, np.zeros(len(x))]))
    np.testing.assert_allclose(there.temperature_K, here.temperature_K, rtol=1e-11)


@LAW
@given(STRENGTH, st.floats(10.0, 1000.0))
def test_vapour_and_liquid_are_the_same_at_every_homogeneous_azeotrope(strength, pressure):
    system = regular_system(strength, power=1.0)
    for azeotrope in azeotropes(system, pressure_kPa=pressure):
        if azeotrope.heterogeneous:
            continue
        state = bubble_temperature(system, pressure, azeotrope.mole_fractions)
        np.testing.assert_allclose(state.vapour[0], azeotrope.mole_fractions, atol=1e-9)
        assert abs(state.temperature_K[0] - azeotrope.temperature_K) < 1e-7


@LAW
@given(STRENGTH, st.floats(20.0, 500.0))
def test_the_vapour_of_a_stable_diagram_grows_richer_with_its_liquid(strength, pressure):
    # Second law of Konovalov: y1 rises with x1 along the boiling curve of stable liquids.
    result = diagram(regular_system(strength, power=1.0), "Txy", pressure_kPa=pressure, points=41)
    assert result.converged.all()
    assert (np.diff(result.y1) >= -1e-10).all()


@LAW
@given(STRENGTH, st.floats(20.0, 500.0))
def test_the_first_law_of_konovalov(strength, pressure):
    # Where y1 > x1, adding component 1 lowers the boiling temperature.
    result = diagram(regular_system(strength, power=1.0), "Txy", pressure_kPa=pressure, points=201)
    rising = np.diff(result.temperature_K)
    excess = result.y1 - result.x1
    clear = result.stable[1:] & result.stable[:-1] & (excess[1:] * excess[:-1] > 0.0)
    assert (rising[clear] * excess[1:][clear] <= 1e-9).all()


@LAW
@given(st.floats(2.01, 200.0), st.floats(280.0, 450.0))
def test_a_split_is_stable_and_what_lies_between_is_not(strength, temperature):
    liquid = Regular(np.array([[0.0, strength], [strength, 0.0]]))
    split = binary_split(liquid, temperature)
    assert split is not None
    assert stability(liquid, temperature, np.stack(split)).stable.all()
    between = 0.5 * (split[0] + split[1])
    assert not stability(liquid, temperature, between).stable[0]


@LAW
@given(st.lists(STRENGTH, min_size=3, max_size=3), SEED)
def test_a_split_binary_makes_unstable_ternaries_beside_it(pairs, seed):
    # A trace of a third component cannot heal a clear split of the other two.
    system = regular_system(*pairs)
    if pairs[0] < 2.5:
        return
    liquid = system.activity
    assert not stability(liquid, 345.0, [0.4999, 0.4999, 0.0002]).stable[0]


def test_pressures_of_an_ideal_mixture_are_raoults():
    for n in (1, 2, 4, 6):
        system = subset(regular_system(*[0.0] * 15), tuple(range(n)))
        x = compositions(n, n)
        partial = x * np.exp([line.ln_kPa(350.0) for line in LINES[:n]])
        states = bubble_pressure(system, 350.0, x)
        np.testing.assert_allclose(states.pressure_kPa, partial.sum(axis=1), rtol=1e-12)
        np.testing.assert_allclose(
            states.vapour, partial / partial.sum(axis=1, keepdims=True), rtol=1e-12
        )
