"""Azeotropes of three and four components, checked by their equations and by topology."""

import itertools

import numpy as np
import pytest

from groups.equilibrium import System, azeotropes
from groups.equilibrium.azeotrope_index import balanced
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.subset import subset
from groups.errors import InvalidInputError
from tests.unit.equilibrium.equilibrium_mixtures import (
    ACETONE,
    BENZENE,
    ETHANOL,
    METHANOL,
    WATER,
    Antoine,
    regular_system,
)

# Smith, Van Ness & Abbott (2005), appendix B.2, from memory.
CHLOROFORM = Antoine(13.7324, 2548.74, 218.552 - 273.15)
SADDLE = regular_system(-0.75, 0.65, 1.0, lines=(ACETONE, CHLOROFORM, METHANOL))
SPLITTING = regular_system(1.7, 1.3, 6.0, lines=(ETHANOL, BENZENE, WATER))


def gap(system, azeotrope):
    """Largest |ln(x_i gamma_i Psat_i / (z_i P))| over the liquids."""
    present = list(azeotrope.components)
    worst = 0.0
    for x in azeotrope.liquids:
        T = azeotrope.temperature_K
        ln_p = np.log(x[present]) + system.ln_volatility(np.array([T]), x[None])[0, present]
        ln_y = np.log(azeotrope.mole_fractions[present]) + np.log(azeotrope.pressure_kPa)
        worst = max(worst, float(np.abs(ln_p - ln_y).max()))
    return worst


@pytest.mark.parametrize("condition", [{"pressure_kPa": 101.325}, {"temperature_K": 330.0}])
@pytest.mark.parametrize("system", [SADDLE, SPLITTING])
def test_every_azeotrope_satisfies_its_equations_and_the_set_its_index(system, condition):
    found = azeotropes(system, **condition)
    assert max(gap(system, a) for a in found) < 1e-9  # the project's tolerance of a state
    assert balanced(system, Condition(**condition), list(found))


def test_three_binaries_of_two_signs_enclose_a_saddle():
    found = azeotropes(SADDLE, pressure_kPa=101.325)
    assert [a.kind for a in found] == [
        "maximum-boiling",
        "minimum-boiling",
        "minimum-boiling",
        "saddle",
    ]
    assert found[-1].components == (0, 1, 2)


def test_the_rule_of_zharov_and_serafimov_holds():
    """2 (N3 - S3) + N2 - S2 + N1 = 2, counted by hand from boiling points and volatilities."""
    found = azeotropes(SADDLE, pressure_kPa=101.325)
    # Ternary saddle: S3 = 1. The acetone/methanol and chloroform/methanol minima and the
    # acetone/chloroform maximum are nodes, or saddles if the third component says otherwise.
    nodes2 = saddles2 = 0
    for a in found[:3]:
        (other,) = set(range(3)) - set(a.components)
        ln_k = SADDLE.ln_volatility(np.array([a.temperature_K]), a.mole_fractions[None])[0, other]
        third_leaves = ln_k > np.log(101.325)
        if third_leaves == (a.kind == "maximum-boiling"):
            nodes2 += 1
        else:
            saddles2 += 1
    nodes1 = 0
    for i in range(3):
        x = np.eye(3)[i]
        line = SADDLE.vapour_pressures[i]
        T = line.B / (line.A - np.log(101.325)) - line.C  # Antoine, solved
        ln_k = SADDLE.ln_volatility(np.array([T]), x[None])[0] - np.log(101.325)
        nodes1 += len(set(np.sign(np.delete(ln_k, i)))) == 1
    assert -2 + nodes2 - saddles2 + nodes1 == 2


def test_a_missing_azeotrope_unbalances_the_index():
    found = list(azeotropes(SADDLE, pressure_kPa=101.325))
    for k in range(len(found)):
        assert not balanced(SADDLE, Condition(pressure_kPa=101.325), found[:k] + found[k + 1 :])


def test_azeotropes_do_not_depend_on_the_order_of_the_components():
    reference = azeotropes(SPLITTING, pressure_kPa=101.325)
    for order in itertools.permutations(range(3)):
        found = azeotropes(subset(SPLITTING, order), pressure_kPa=101.325)
        assert len(found) == len(reference)
        for a in reference:
            expected = a.mole_fractions[list(order)]
            (same,) = [b for b in found if {order[i] for i in b.components} == set(a.components)]
            np.testing.assert_allclose(same.mole_fractions, expected, atol=1e-8)
            assert same.temperature_K == pytest.approx(a.temperature_K, abs=1e-7)
            assert (same.kind, same.heterogeneous) == (a.kind, a.heterogeneous)


def test_a_heterogeneous_ternary_azeotrope_boils_lowest():
    found = azeotropes(SPLITTING, pressure_kPa=101.325)
    ternary = found[-1]
    assert ternary.heterogeneous and ternary.kind == "minimum-boiling"
    assert ternary.temperature_K < min(a.temperature_K for a in found[:-1])
    first, second = ternary.liquids
    z = ternary.mole_fractions
    share = (z - second) / (first - second)
    np.testing.assert_allclose(share, share[0], rtol=1e-6)  # z lies on the tie line
    assert 0.0 < share[0] < 1.0


def test_a_symmetric_ternary_has_its_azeotrope_in_the_middle():
    system = System(regular_system(1.0, 1.0, 1.0).activity, (BENZENE,) * 3)
    ternary = azeotropes(system, pressure_kPa=101.325)[-1]
    np.testing.assert_allclose(ternary.mole_fractions, 1.0 / 3.0, atol=1e-9)
    assert ternary.kind == "minimum-boiling"
    # ln gamma_i = A (1 - x_i) - A sum_{j<k} x_j x_k = 2/3 - 1/3 at the middle.
    ln_p = BENZENE.ln_kPa(ternary.temperature_K) + 1.0 / 3.0
    assert ln_p == pytest.approx(np.log(101.325), abs=1e-9)


def test_a_symmetric_quaternary_is_searched_too():
    system = System(regular_system(*[1.0] * 6).activity, (BENZENE,) * 4)
    found = azeotropes(system, temperature_K=350.0)
    assert sorted(len(a.components) for a in found) == [2] * 6 + [3] * 4 + [4]
    np.testing.assert_allclose(found[-1].mole_fractions, 0.25, atol=1e-9)


def test_an_ideal_mixture_has_none():
    assert azeotropes(regular_system(0.0, 0.0, 0.0), pressure_kPa=101.325) == ()


@pytest.mark.parametrize("condition", [{}, {"pressure_kPa": 100.0, "temperature_K": 300.0}])
def test_exactly_one_condition_is_asked_for(condition):
    with pytest.raises(InvalidInputError):
        azeotropes(SADDLE, **condition)
