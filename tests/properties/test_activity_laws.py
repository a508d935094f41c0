"""Laws that every activity-coefficient model must obey, for every method and any composition."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from groups.activity import (
    GroupContributionModel,
    WeightedModel,
    activity_model,
    excess_enthalpy,
    excess_gibbs,
    excess_heat_capacity,
    ln_gamma_infinite,
)
from groups.activity.excess import GAS_CONSTANT_J_MOL_K
from groups.arrays import FloatArray
from groups.parameters import METHODS, table

# 1-propanol, n-hexane, toluene and methyl acetate. The tables number and name these alike but for
# the hydroxyl of the modified ones and toluene, which Lyngby's table builds without ACCH3.
MOLECULES = (
    {"CH3": 1, "CH2": 2, "OH": 1},
    {"CH3": 2, "CH2": 4},
    {"ACH": 5, "ACCH3": 1},
    {"CH3": 1, "CH3COO": 1},
)
METHODS_WITH_WEIGHTED = (*METHODS, "weighted")
# Analytic identities in double precision: a few hundred roundings of numbers of order 10.
ROUNDING = 1e-11

compositions = arrays(np.float64, 4, elements=st.floats(0.0, 1.0)).filter(lambda x: x.sum() > 0.01)
temperatures = st.floats(250.0, 500.0)


def model_of(method: str) -> GroupContributionModel | WeightedModel:
    if method == "weighted":
        return WeightedModel((model_of("unifac"), model_of("unifac-dortmund")), (0.3, 0.7))
    return activity_model(counts_of(method), method)


def counts_of(method: str) -> list[dict[int, int]]:
    names, numbers = table(method).subgroup_names, table(method).subgroup_numbers
    number = {name: int(n) for name, n in zip(names, numbers, strict=True)}
    number.setdefault("OH", number.get("OH (primary)", 0))
    molecules = [dict(groups) for groups in MOLECULES]
    if "ACCH3" not in number:
        molecules[2] = {"ACH": 5, "AC": 1, "CH3": 1}
    return [{number[name]: n for name, n in groups.items()} for groups in molecules]


def normalised(x: np.ndarray) -> np.ndarray:
    return x / x.sum()


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
@settings(max_examples=25, deadline=None)
@given(x=compositions, T=temperatures)
def test_gibbs_duhem_holds_for_the_mole_derivatives(method: str, x: np.ndarray, T: float) -> None:
    x = normalised(x)
    J = model_of(method).ln_gamma_mole_derivatives(T, x)
    np.testing.assert_allclose(x @ J, 0.0, atol=ROUNDING)
    np.testing.assert_allclose(J, J.T, atol=ROUNDING * max(1.0, float(np.abs(J).max())))


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
@settings(max_examples=25, deadline=None)
@given(x=compositions, T=temperatures)
def test_mole_derivatives_match_central_differences(method: str, x: np.ndarray, T: float) -> None:
    model, step = model_of(method), 1e-4
    x = 0.9 * normalised(x) + 0.025  # a central difference needs room on both sides
    for j in range(4):
        moved = [x + sign * step * np.eye(4)[j] for sign in (1.0, -1.0)]
        up, down = (model.ln_gamma(T, normalised(n)) for n in moved)
        J = model.ln_gamma_mole_derivatives(T, x)[:, j]
        # The truncation of a central difference at x >= 0.025: step^2 times a third derivative.
        np.testing.assert_allclose((up - down) / (2.0 * step), J, rtol=1e-4, atol=1e-4)


def slope_at(values: Callable[[FloatArray], FloatArray], T: float) -> FloatArray:
    """The five-point difference: truncation step^4/30 times the fifth derivative."""
    step = 0.5
    down2, down, up, up2 = values(T + step * np.array([-2.0, -1.0, 1.0, 2.0]))
    return (8.0 * (up - down) - (up2 - down2)) / (12.0 * step)


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
@settings(max_examples=25, deadline=None)
@given(x=compositions, T=temperatures)
def test_gibbs_helmholtz_holds(method: str, x: np.ndarray, T: float) -> None:
    model, x = model_of(method), normalised(x)
    slope = slope_at(lambda at: excess_gibbs(model, at, np.tile(x, (4, 1))), T)
    # J/mol: a fifth derivative of gE/RT below 1e-9/K^5 and R T^2 of up to 2e6 J K/mol give 4e-6.
    np.testing.assert_allclose(
        excess_enthalpy(model, T, x), -GAS_CONSTANT_J_MOL_K * T**2 * slope, rtol=1e-7, atol=1e-5
    )


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
@settings(max_examples=25, deadline=None)
@given(x=compositions, T=temperatures)
def test_heat_capacity_is_the_slope_of_the_enthalpy(method: str, x: np.ndarray, T: float) -> None:
    model, x = model_of(method), normalised(x)
    slope = slope_at(lambda at: excess_enthalpy(model, at, np.tile(x, (4, 1))), T)
    # J/(mol K): as above, one order of T higher.
    np.testing.assert_allclose(excess_heat_capacity(model, T, x), slope, rtol=1e-7, atol=1e-6)


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
def test_gamma_is_one_at_purity(method: str) -> None:
    T = np.linspace(250.0, 500.0, 6)
    pure = model_of(method).ln_gamma(T[:, None], np.eye(4))
    np.testing.assert_allclose(np.diagonal(pure, axis1=1, axis2=2), 0.0, atol=1e-13)


@pytest.mark.parametrize("method", METHODS)
@settings(max_examples=10, deadline=None)
@given(x=compositions, T=temperatures, order=st.permutations(range(4)))
def test_the_order_of_components_does_not_matter(
    method: str, x: np.ndarray, T: float, order: list[int]
) -> None:
    counts, x = counts_of(method), normalised(x)
    reordered = activity_model([counts[k] for k in order], method).ln_gamma(T, x[order])
    np.testing.assert_allclose(reordered, model_of(method).ln_gamma(T, x)[order], atol=1e-12)


@pytest.mark.parametrize("method", METHODS)
@settings(max_examples=10, deadline=None)
@given(x=compositions, T=temperatures, share=st.floats(0.0, 1.0))
def test_splitting_a_component_in_two_changes_nothing(
    method: str, x: np.ndarray, T: float, share: float
) -> None:
    counts, x = counts_of(method), normalised(x)
    split = activity_model([*counts, counts[0]], method)
    x_split = np.array([x[0] * share, *x[1:], x[0] * (1.0 - share)])
    whole = model_of(method).ln_gamma(T, x)
    np.testing.assert_allclose(
        split.ln_gamma(T, x_split), [*whole, whole[0]], rtol=ROUNDING, atol=ROUNDING
    )


@pytest.mark.parametrize("method", METHODS_WITH_WEIGHTED)
def test_infinite_dilution_is_the_limit_of_vanishing_fractions(method: str) -> None:
    model, T = model_of(method), np.array([280.0, 350.0, 450.0])
    exact = ln_gamma_infinite(model, T)
    for j in range(4):
        for dilution in (1e-4, 1e-8):
            x = np.full(4, dilution)
            x[j] = 1.0 - 3.0 * dilution
            near = model.ln_gamma(T, x)
            # ln gamma is linear in x there, with a slope below 100 for these molecules.
            np.testing.assert_allclose(near, exact[:, :, j], atol=100.0 * 3.0 * dilution + 1e-12)


@pytest.mark.parametrize("method", METHODS)
def test_the_residual_part_of_alkanes_is_zero(method: str) -> None:
    hexane, hexadecane = {1: 2, 2: 4}, {1: 2, 2: 14}
    combinatorial, residual = activity_model([hexane, hexadecane], method).ln_gamma_parts(
        [[300.0], [400.0]], [[0.0, 1.0], [0.3, 0.7], [1.0, 0.0]]
    )
    np.testing.assert_allclose(residual, 0.0, atol=1e-12)
    assert combinatorial[0, 0, 0] < -0.01  # a short chain in a long one: below Raoult's law


@pytest.mark.parametrize("method", METHODS)
@pytest.mark.parametrize("T", [260.0, 350.0, 480.0])
def test_the_slope_and_curvature_follow_the_values(method: str, T: float) -> None:
    model = model_of(method)
    x = np.tile(normalised(np.arange(1.0, 5.0)), (4, 1))
    slope = slope_at(lambda at: model.ln_gamma(at, x), T)
    curvature = slope_at(lambda at: model.ln_gamma_slope(at, x), T)
    # 1/K and 1/K^2: truncation as above; ln gamma is rounded at 1e-15 and divided by the step.
    np.testing.assert_allclose(model.ln_gamma_slope(T, x[0]), slope, rtol=1e-7, atol=1e-11)
    np.testing.assert_allclose(model.ln_gamma_curvature(T, x[0]), curvature, rtol=1e-7, atol=1e-13)
