"""The doors answer alike, whichever way the same question is put."""

from itertools import permutations

import numpy as np
import pytest

from groups.prediction import (
    ALL_METHODS,
    Component,
    activity_coefficients,
    azeotropes,
    bubble_point,
    dew_point,
    diagram,
    flash,
    infinite_dilution,
    liquid_splits,
)
from groups.pure import AntoineInput
from groups.structure.molecule import molecule_from_smiles
from tests.unit.prediction.mixtures import FOUR, ONE_ATM, equal, mixture

# The equations are held to 1e-9 in ln fugacity; a temperature or fraction found from them is worse
# by the slope of ln P (1/T^2 times some 4000 K) and by the round trip.
SOLVED = 1e-7
# Only the order of the sums differs.
ROUNDING = 1e-10


@pytest.mark.parametrize("method", ["auto", "unifac", "unifac-dortmund", "ideal"])
def test_infinite_dilution_is_the_activity_coefficient_at_zero(method):
    pairs = [("CCO", "O"), ("O", "CCO"), ("CCCCCC", "CC(C)=O"), ("ClC(Cl)Cl", "CCOCC")]
    taken = [tuple(molecule_from_smiles(s) for s in pair) for pair in pairs]
    answers = infinite_dilution([(u, v, 310.0) for u, v in taken], method)
    for (solute, solvent), answer in zip(taken, answers, strict=True):
        same = activity_coefficients(
            [Component(solute), Component(solvent)], 310.0, [0.0, 1.0], method
        )
        assert answer.ln_gamma_inf == pytest.approx(same.ln_gamma[0, 0], abs=ROUNDING)
        assert answer.method == same.method
        assert same.ln_gamma[0, 1] == pytest.approx(0.0, abs=ROUNDING)


def test_a_batch_answers_each_pair_as_if_it_were_alone():
    ethanol, water, hexane = (molecule_from_smiles(s) for s in ("CCO", "O", "CCCCCC"))
    pairs = [(ethanol, water, 300.0), (hexane, water, 320.0), (water, hexane, 310.0)]
    together = infinite_dilution(pairs)
    for pair, answer in zip(pairs, together, strict=True):
        (alone,) = infinite_dilution([pair])
        assert answer.ln_gamma_inf == pytest.approx(alone.ln_gamma_inf, abs=ROUNDING)
        assert answer.confidence.reasons == alone.confidence.reasons


@pytest.mark.parametrize("order", list(permutations(range(3))))
def test_the_order_of_components_does_not_matter(order):
    components, x = mixture("CC(C)=O", "CO", "O"), np.array([0.2, 0.5, 0.3])
    order = list(order)
    turned = [components[k] for k in order]
    for solve in (bubble_point, dew_point):
        one = solve(components, x, pressure_kPa=ONE_ATM)
        two = solve(turned, x[order], pressure_kPa=ONE_ATM)
        assert two.temperature_K == pytest.approx(one.temperature_K, abs=SOLVED)
        np.testing.assert_allclose(two.x, one.x[order], atol=SOLVED)
        np.testing.assert_allclose(two.y, one.y[order], atol=SOLVED)
        assert two.confidence.grade == one.confidence.grade
        assert {r.code for r in two.confidence.reasons} == {r.code for r in one.confidence.reasons}
    one = flash(components, x, temperature_K=338.0, pressure_kPa=ONE_ATM)
    two = flash(turned, x[order], temperature_K=338.0, pressure_kPa=ONE_ATM)
    assert two.vapour_fraction == pytest.approx(one.vapour_fraction, abs=SOLVED)
    one_activity = activity_coefficients(components, 320.0, x)
    two_activity = activity_coefficients(turned, 320.0, x[order])
    np.testing.assert_allclose(
        two_activity.ln_gamma[0], one_activity.ln_gamma[0, order], atol=ROUNDING
    )


def test_the_order_of_components_does_not_move_an_azeotrope_or_a_split():
    one = azeotropes(mixture("CCO", "O"), pressure_kPa=ONE_ATM).azeotropes
    two = azeotropes(mixture("O", "CCO"), pressure_kPa=ONE_ATM).azeotropes
    assert len(one) == len(two) == 1
    np.testing.assert_allclose(one[0].mole_fractions[::-1], two[0].mole_fractions, atol=1e-6)
    first = liquid_splits(mixture("CCCCO", "O"), temperature_K=300.0)
    second = liquid_splits(mixture("O", "CCCCO"), temperature_K=300.0)
    ends = sorted(phase[0] for phase in first.phases)
    np.testing.assert_allclose(ends, sorted(phase[1] for phase in second.phases), atol=1e-6)


@pytest.mark.parametrize("method", ["auto", "unifac", "unifac-nist", "ideal"])
@pytest.mark.parametrize("fixed", [{"temperature_K": 330.0}, {"pressure_kPa": ONE_ATM}])
def test_the_dew_point_of_the_first_vapour_is_the_liquid_it_came_from(method, fixed):
    components, x = mixture(*FOUR), np.array([0.3, 0.3, 0.2, 0.2])
    bubble = bubble_point(components, x, method=method, **fixed)
    dew = dew_point(components, bubble.y, method=method, **fixed)
    np.testing.assert_allclose(dew.x, x, atol=1e-6)
    assert dew.temperature_K == pytest.approx(bubble.temperature_K, abs=1e-6)
    assert dew.pressure_kPa == pytest.approx(bubble.pressure_kPa, rel=1e-7)


def test_bubble_pressure_and_bubble_temperature_invert_each_other():
    components, x = mixture(*FOUR), equal(4)
    at_T = bubble_point(components, x, temperature_K=330.0)
    back = bubble_point(components, x, pressure_kPa=at_T.pressure_kPa)
    assert back.temperature_K == pytest.approx(330.0, abs=1e-6)


@pytest.mark.parametrize(("kind", "fixed"), [("Txy", ONE_ATM), ("Pxy", 340.0)])
def test_a_diagram_holds_the_bubble_points_of_its_compositions(kind, fixed):
    given = {"pressure_kPa" if kind == "Txy" else "temperature_K": fixed}
    components = mixture("CCO", "O")
    drawn = diagram(kind, components, points=11, **given).diagram
    assert drawn.stable.all() and drawn.converged.all()
    for k, x1 in enumerate(drawn.x1):
        point = bubble_point(components, [x1, 1.0 - x1], **given)
        assert drawn.temperature_K[k] == pytest.approx(point.temperature_K, abs=SOLVED)
        assert drawn.pressure_kPa[k] == pytest.approx(point.pressure_kPa, rel=SOLVED)
        assert drawn.y1[k] == pytest.approx(point.y[0], abs=SOLVED)


def test_the_diagram_and_the_azeotrope_door_place_the_azeotrope_alike():
    components = mixture("CCO", "O")
    (drawn,) = diagram("Txy", components, pressure_kPa=ONE_ATM).diagram.azeotropes
    (found,) = azeotropes(components, pressure_kPa=ONE_ATM).azeotropes
    assert drawn.temperature_K == pytest.approx(found.temperature_K, abs=1e-6)
    np.testing.assert_allclose(drawn.mole_fractions, found.mole_fractions, atol=1e-6)
    at = bubble_point(components, found.mole_fractions, pressure_kPa=ONE_ATM)
    np.testing.assert_allclose(at.y, found.mole_fractions, atol=1e-6)


def test_a_flash_between_bubble_and_dew_point_balances_its_feed():
    components, z = mixture(*FOUR), equal(4)
    low = bubble_point(components, z, pressure_kPa=ONE_ATM).temperature_K
    high = dew_point(components, z, pressure_kPa=ONE_ATM).temperature_K
    assert low < high
    for share in (0.1, 0.5, 0.9):
        T = low + share * (high - low)
        found = flash(components, z, temperature_K=T, pressure_kPa=ONE_ATM)
        assert 0.0 < found.vapour_fraction < 1.0
        mixed = (1.0 - found.vapour_fraction) * found.x + found.vapour_fraction * found.y
        np.testing.assert_allclose(mixed, z, atol=1e-9)


@pytest.mark.parametrize(("T", "fraction"), [(300.0, 0.0), (400.0, 1.0)])
def test_a_flash_outside_the_two_phases_has_one_phase_and_no_composition_of_the_other(T, fraction):
    found = flash(mixture(*FOUR), equal(4), temperature_K=T, pressure_kPa=ONE_ATM)
    present, absent = (found.x, found.y) if fraction == 0.0 else (found.y, found.x)
    assert found.vapour_fraction == fraction and found.failure is None
    np.testing.assert_allclose(present, equal(4), atol=1e-12)
    assert np.isnan(absent).all()


@pytest.mark.parametrize("method", ALL_METHODS)
def test_pure_ends_of_a_diagram_are_the_boiling_points(method):
    answer = diagram(
        "Txy", mixture("CCO", "CC(C)=O"), pressure_kPa=ONE_ATM, method=method, points=5
    )
    first, second = (line.boiling_temperature(ONE_ATM) for line in answer.vapour_pressures)
    assert answer.diagram.temperature_K[-1] == pytest.approx(first, abs=SOLVED)
    assert answer.diagram.temperature_K[0] == pytest.approx(second, abs=SOLVED)
    # Handbook boiling points of ethanol and acetone at 1 atm: 351.4 K and 329.2 K.
    assert first == pytest.approx(351.4, abs=0.3) and second == pytest.approx(329.2, abs=0.3)


def test_the_callers_own_vapour_pressure_is_the_one_used():
    # Ethanol, Smith, Van Ness & Abbott (2005), appendix B.2, from memory, made 10 % too high.
    own = AntoineInput(16.8958 + np.log(1.1), 3795.17, 230.918, "e", "kPa", "C")
    ethanol, water = mixture("CCO", "O")
    mine = Component(ethanol.molecule, own)
    answer = bubble_point([mine, water], [1.0, 0.0], temperature_K=340.0)
    expected = 1.1 * np.exp(16.8958 - 3795.17 / (340.0 - 273.15 + 230.918))
    assert answer.pressure_kPa == pytest.approx(expected, rel=1e-12)
    assert answer.vapour_pressures[0].source == "user"
    published = bubble_point([ethanol, water], [1.0, 0.0], temperature_K=340.0)
    # Two published equations of ethanol at 340 K differ by well under 1 %.
    assert answer.pressure_kPa / published.pressure_kPa == pytest.approx(1.1, rel=0.01)
