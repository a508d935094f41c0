"""Diagrams: pure ends, azeotropes with known places, and the three-phase line."""

import numpy as np
import pytest

from groups.equilibrium import System, bubble_temperature, diagram
from groups.errors import InvalidInputError, OutOfRangeError, ShapeError
from tests.unit.equilibrium.equilibrium_mixtures import (
    ACETONE,
    BENZENE,
    METHANOL,
    TOLUENE,
    WATER,
    Margules,
    regular_system,
)


def test_both_ends_are_pure_and_exact():
    system = regular_system(0.9, lines=(ACETONE, METHANOL))
    result = diagram(system, "Txy", pressure_kPa=101.325, points=11)
    assert result.x1[0] == 0.0 and result.x1[-1] == 1.0
    assert result.y1[0] == 0.0 and result.y1[-1] == 1.0
    for place, line in ((0, METHANOL), (-1, ACETONE)):
        assert line.ln_kPa(result.temperature_K[place]) == pytest.approx(np.log(101.325), abs=1e-11)
    # At infinite dilution alpha = gamma_inf Psat1/Psat2, with ln gamma_inf = A here.
    T = result.temperature_K[0]
    expected = np.exp(0.9 + ACETONE.ln_kPa(T) - METHANOL.ln_kPa(T))
    assert result.relative_volatility[0] == pytest.approx(expected, rel=1e-10)


@pytest.mark.parametrize(("A", "kind"), [(1.2, "minimum-boiling"), (-1.4, "maximum-boiling")])
def test_a_symmetric_azeotrope_at_given_temperature_lies_where_algebra_says(A, kind):
    # ln gamma1 - ln gamma2 = A (x2 - x1) = ln(Psat2/Psat1).
    T = 340.0
    system = regular_system(A, lines=(ACETONE, METHANOL))
    difference = METHANOL.ln_kPa(T) - ACETONE.ln_kPa(T)
    x1 = 0.5 * (1.0 - difference / A)
    (found,) = diagram(system, "Pxy", temperature_K=T, points=7).azeotropes
    assert found.mole_fractions[0] == pytest.approx(x1, abs=1e-10)
    ln_p = ACETONE.ln_kPa(T) + A * (1.0 - x1) ** 2
    assert np.log(found.pressure_kPa) == pytest.approx(ln_p, abs=1e-10)
    assert found.kind == kind and not found.heterogeneous


@pytest.mark.parametrize("edge", [1e-3, 1e-4, 1e-6])
def test_an_azeotrope_near_the_edge_is_found(edge):
    T = 350.0
    difference = float(TOLUENE.ln_kPa(T) - BENZENE.ln_kPa(T))
    A = -difference / (1.0 - 2.0 * edge)  # places it at x2 = edge
    found = diagram(regular_system(A, lines=(BENZENE, TOLUENE)), "Pxy", temperature_K=T).azeotropes
    assert len(found) == 1
    assert found[0].mole_fractions[1] == pytest.approx(edge, rel=1e-6)


def test_two_azeotropes_of_one_pair_are_both_found():
    # Equal vapour pressures: an azeotrope lies wherever ln gamma1 = ln gamma2, twice for this
    # liquid, as a plain count of sign changes says.
    liquid = Margules(-0.6, 0.5)
    system = System(liquid, (BENZENE, BENZENE))
    x1 = np.linspace(0.01, 0.99, 981)
    g = liquid.ln_gamma(350.0, np.stack([x1, 1 - x1], axis=1))
    changes = np.count_nonzero(np.diff(np.sign(g[:, 0] - g[:, 1])))
    found = diagram(system, "Txy", pressure_kPa=101.325).azeotropes
    assert changes == 2
    assert sorted(a.kind for a in found) == ["maximum-boiling", "minimum-boiling"]


def test_an_ideal_pair_of_close_boilers_has_no_azeotrope():
    near = type(BENZENE)(BENZENE.A, BENZENE.B * 1.0005, BENZENE.C)
    assert (
        diagram(System(Margules(0.0, 0.0), (BENZENE, near)), "Txy", pressure_kPa=100.0).azeotropes
        == ()
    )
    assert (
        diagram(
            System(Margules(0.0, 0.0), (BENZENE, BENZENE)), "Txy", pressure_kPa=100.0
        ).azeotropes
        == ()
    )


def test_an_unstable_liquid_is_drawn_as_the_three_phase_line():
    system = regular_system(4.0, lines=(BENZENE, WATER))
    result = diagram(system, "Txy", pressure_kPa=101.325)
    split = result.liquid_split
    assert split is not None and split.azeotropic
    inside = (result.x1 > split.x1_lower) & (result.x1 < split.x1_upper)
    np.testing.assert_array_equal(result.stable, ~inside)
    assert np.ptp(result.temperature_K[inside]) == 0.0
    # Symmetric binodal: ln(x2/x1) = A (1 - 2 x1); p3 = x1'' g1'' Psat1 + x2' g2' Psat2.
    x = split.x1_lower
    assert np.log((1 - x) / x) == pytest.approx(4.0 * (1 - 2 * x), abs=1e-9)
    activity = (1 - x) * np.exp(4.0 * x**2)
    T = split.temperature_K
    partial = activity * np.exp([BENZENE.ln_kPa(T), WATER.ln_kPa(T)])
    assert partial.sum() == pytest.approx(101.325, rel=1e-9)
    assert split.y1 == pytest.approx(partial[0] / partial.sum(), abs=1e-9)
    (azeotrope,) = result.azeotropes
    assert azeotrope.heterogeneous and azeotrope.kind == "minimum-boiling"


def test_nearly_immiscible_liquids_boil_at_the_sum_of_their_pressures():
    system = regular_system(25.0, lines=(BENZENE, WATER))
    split = diagram(system, "Txy", pressure_kPa=101.325).liquid_split
    total = np.exp(BENZENE.ln_kPa(split.temperature_K)) + np.exp(WATER.ln_kPa(split.temperature_K))
    assert total == pytest.approx(101.325, rel=1e-8)  # solubilities are 1e-11
    assert split.x1_lower < 1e-10 and split.x1_upper > 1 - 1e-10


def test_a_split_whose_vapour_lies_outside_the_gap_is_no_azeotrope():
    # Acetone over water, more polar than it is: the vapour is richer than either liquid.
    system = regular_system(2.05, lines=(ACETONE, WATER))
    result = diagram(system, "Txy", pressure_kPa=101.325)
    assert result.liquid_split is not None and not result.liquid_split.azeotropic
    assert result.liquid_split.y1 > result.liquid_split.x1_upper
    assert not any(a.heterogeneous for a in result.azeotropes)


def test_the_boiling_curve_is_flat_at_an_azeotrope():
    # Gibbs-Konovalov: dT/dx = 0 where y = x.
    system = regular_system(1.1, lines=(ACETONE, METHANOL), power=1.0)
    (found,) = diagram(system, "Txy", pressure_kPa=101.325).azeotropes
    x1 = found.mole_fractions[0] + np.array([-1e-4, 0.0, 1e-4])
    T = bubble_temperature(system, 101.325, np.stack([x1, 1 - x1], axis=1)).temperature_K
    assert abs(T[2] - T[0]) / 2e-4 < 1e-3  # the third-order remainder; elsewhere it is tens of K
    assert T[1] < min(T[0], T[2])
    assert T[1] == pytest.approx(found.temperature_K, abs=1e-8)


@pytest.mark.parametrize(
    ("arguments", "error"),
    [
        ({"kind": "Txy", "temperature_K": 300.0}, InvalidInputError),
        ({"kind": "Pxy", "pressure_kPa": 100.0}, InvalidInputError),
        ({"kind": "Txy", "pressure_kPa": -1.0}, OutOfRangeError),
        ({"kind": "Txy", "pressure_kPa": 100.0, "points": 1}, OutOfRangeError),
    ],
)
def test_a_condition_that_does_not_fit_is_refused(arguments, error):
    with pytest.raises(error):
        diagram(regular_system(0.5), **arguments)


def test_a_diagram_of_three_components_is_refused():
    with pytest.raises(ShapeError):
        diagram(regular_system(0.5, 0.5, 0.5), "Txy", pressure_kPa=100.0)
