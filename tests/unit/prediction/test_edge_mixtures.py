"""One component and twenty, absent components, gases, and mixtures that no table describes."""

import numpy as np
import pytest

from groups.errors import IncompleteAssignmentError, MissingParameterError
from groups.prediction import (
    ALL_METHODS,
    Component,
    activity_coefficients,
    assign_groups,
    azeotropes,
    bubble_point,
    dew_point,
    diagram,
    flash,
    infinite_dilution,
    liquid_splits,
)
from groups.structure.molecule import molecule_from_smiles
from tests.unit.prediction.mixtures import ONE_ATM, WITH_GAP, equal, mixture

HOMOLOGUES = (*("C" * n for n in range(5, 15)), *("C" * n + "O" for n in range(1, 11)))
OUTSIDE_EVERY_TABLE = "CCB(CC)CC"  # triethylborane: no published table has boron


@pytest.mark.parametrize("method", ALL_METHODS)
def test_a_single_component_boils_at_its_boiling_point(method):
    for solve in (bubble_point, dew_point):
        answer = solve(mixture("O"), [1.0], pressure_kPa=ONE_ATM, method=method)
        # Water at 1 atm: 373.12 K (IAPWS-95, from memory); the published fits are within 0.05 K.
        assert answer.temperature_K == pytest.approx(373.12, abs=0.05)
        if method != "psrk":  # an equation of state has no activity coefficients
            assert answer.gamma == pytest.approx([1.0])
        assert answer.relative_volatility == pytest.approx([1.0])
        assert answer.liquid_stable


def test_a_single_component_has_no_excess():
    answer = activity_coefficients(mixture("CCO"), [300.0, 350.0], [[1.0], [1.0]])
    assert (answer.ln_gamma == 0.0).all()
    assert (answer.excess_gibbs_RT == 0.0).all() and (answer.excess_enthalpy_J_mol == 0.0).all()


def test_a_component_in_no_table_may_still_boil_alone_or_ideally():
    silane = mixture("C[Si](C)(C)C", "CCCCC")
    answer = bubble_point(silane, [0.5, 0.5], pressure_kPa=ONE_ATM, method="ideal")
    assert 295.0 < answer.temperature_K < 312.0  # between the boiling points, 299.8 and 309.2 K


def test_twenty_components_are_taken_and_balanced():
    components = mixture(*HOMOLOGUES)
    bubble = bubble_point(components, equal(20), pressure_kPa=ONE_ATM)
    dew = dew_point(components, equal(20), pressure_kPa=ONE_ATM)
    assert bubble.failure is None and dew.failure is None
    assert bubble.temperature_K < dew.temperature_K
    T = 0.5 * (bubble.temperature_K + dew.temperature_K)
    found = flash(components, equal(20), temperature_K=T, pressure_kPa=ONE_ATM)
    mixed = (1.0 - found.vapour_fraction) * found.x + found.vapour_fraction * found.y
    np.testing.assert_allclose(mixed, equal(20), atol=1e-9)


@pytest.mark.parametrize("method", ["unifac", "unifac-dortmund", "ideal"])
def test_an_absent_component_changes_nothing_but_has_its_dilute_coefficient(method):
    two, three = mixture("CCO", "O"), mixture("CCO", "O", "CC(C)=O")
    for solve in (bubble_point, dew_point):
        with_none = solve(three, [0.4, 0.6, 0.0], pressure_kPa=ONE_ATM, method=method)
        without = solve(two, [0.4, 0.6], pressure_kPa=ONE_ATM, method=method)
        assert with_none.temperature_K == pytest.approx(without.temperature_K, abs=1e-7)
        np.testing.assert_allclose(with_none.y[:2], without.y, atol=1e-7)
        assert with_none.x[2] == with_none.y[2] == 0.0
        assert np.isfinite(with_none.gamma[2]) and with_none.gamma[2] > 0.0


def test_every_vertex_of_a_ternary_is_a_pure_boiling_point():
    components = mixture("CCO", "O", "CC(C)=O")
    for k in range(3):
        answer = bubble_point(components, np.eye(3)[k], pressure_kPa=ONE_ATM)
        boiling = answer.vapour_pressures[k].boiling_temperature(ONE_ATM)
        assert answer.temperature_K == pytest.approx(boiling, abs=1e-7)
        np.testing.assert_array_equal(answer.y, np.eye(3)[k])


def test_a_supercritical_component_gives_a_number_with_a_warning():
    answer = bubble_point(mixture("C", "CCCCCC"), [0.01, 0.99], temperature_K=300.0)
    assert answer.failure is None and answer.pressure_kPa > 0.0
    codes = {reason.code: reason for reason in answer.confidence.reasons}
    assert "supercritical_component" in codes
    assert "methane" in codes["supercritical_component"].message
    assert answer.confidence.grade == "low"


def test_ideal_means_every_coefficient_is_one():
    components = mixture("CCO", "O")
    answer = bubble_point(components, [0.3, 0.7], temperature_K=350.0, method="ideal")
    assert (answer.gamma == 1.0).all()
    assert answer.pressure_kPa == pytest.approx(
        [0.3, 0.7] @ answer.saturation_kPa, rel=1e-12
    )  # Raoult's law
    assert answer.relative_volatility[0] == pytest.approx(
        answer.saturation_kPa[0] / answer.saturation_kPa[1]
    )
    assert azeotropes(components, pressure_kPa=ONE_ATM, method="ideal").azeotropes == ()
    assert not liquid_splits(components, temperature_K=300.0, method="ideal").splits


def test_a_stand_in_is_named_and_graded_low_at_most():
    answer = activity_coefficients(mixture(*WITH_GAP), 300.0, [0.5, 0.5], "unifac", "estimate")
    assert np.isfinite(answer.ln_gamma).all()
    assert answer.method != "unifac"
    assert answer.confidence[0].grade == "low"
    codes = {reason.code for reason in answer.confidence[0].reasons}
    assert {"method_replaced", "parameter_completed"} <= codes
    assert "unifac was asked for" in answer.methods_used[0].why


@pytest.mark.parametrize("method", ["unifac-2.0", "unifac-dortmund-2.0"])
def test_a_completed_parameter_is_an_estimate_and_refused_as_one(method):
    mixed = mixture(*WITH_GAP)
    assert activity_coefficients(mixed, 300.0, [0.5, 0.5], method).method == method
    with pytest.raises(MissingParameterError):
        activity_coefficients(mixed, 300.0, [0.5, 0.5], method, "refuse")


def test_auto_without_estimates_takes_no_completed_parameter():
    taken = activity_coefficients(mixture("CCO", "O"), 330.0, [0.5, 0.5], "auto", "refuse")
    codes = {reason.code for reason in taken.confidence[0].reasons}
    assert not codes & {"parameter_completed", "method_replaced"}
    assert np.isfinite(taken.ln_gamma).all()


def test_the_batch_answers_what_it_can_and_gives_a_reason_for_the_rest():
    ethanol, water, borane, hexene, iodide = (
        molecule_from_smiles(s) for s in ("CCO", "O", OUTSIDE_EVERY_TABLE, *WITH_GAP)
    )
    pairs = [(ethanol, water, 300.0), (borane, water, 300.0), (hexene, iodide, 300.0)]
    answers = infinite_dilution(pairs, "unifac", "refuse")
    assert np.isfinite(answers[0].ln_gamma_inf)
    for answer, code in ((answers[1], "no_groups"), (answers[2], "missing_parameter")):
        assert np.isnan(answer.ln_gamma_inf)
        assert answer.method is None and answer.methods_used == ()
        assert answer.confidence.grade == "none"
        assert [reason.code for reason in answer.confidence.reasons] == [code]


def test_a_refused_pair_says_which_groups_lack_a_parameter_or_which_atoms_a_group():
    borane, water, hexene, iodide = (
        molecule_from_smiles(s) for s in (OUTSIDE_EVERY_TABLE, "O", *WITH_GAP)
    )
    no_groups, no_parameter = infinite_dilution(
        [(borane, water, 300.0), (hexene, iodide, 300.0)], "unifac", "refuse"
    )
    assert "C=C / I" in no_parameter.confidence.reasons[0].message
    assert "triethylborane" in no_groups.confidence.reasons[0].message


def test_auto_without_any_table_is_an_incomplete_assignment():
    with pytest.raises(IncompleteAssignmentError) as caught:
        bubble_point(mixture("O", OUTSIDE_EVERY_TABLE), [0.5, 0.5], pressure_kPa=ONE_ATM)
    assert caught.value.field == "components[1]"


def test_the_splitting_liquids_have_equal_activities():
    answer = liquid_splits(mixture("CCCCO", "O"), temperature_K=310.0)
    assert answer.splits and len(answer.phases) == 2
    activities = [
        np.log(phase) + ln_gamma
        for phase, ln_gamma in zip(answer.phases, answer.ln_gamma, strict=True)
    ]
    np.testing.assert_allclose(activities[0], activities[1], atol=1e-8)  # the solver's residual


def test_a_liquid_inside_the_gap_splits_and_one_outside_does_not():
    components = mixture("CCCCO", "O")
    phases = liquid_splits(components, temperature_K=310.0).phases
    ends = sorted(float(phase[0]) for phase in phases)
    middle = 0.5 * sum(ends)
    for x1, splits in ((middle, True), (0.5 * ends[0], False), (0.5 * (1.0 + ends[1]), False)):
        answer = liquid_splits(components, temperature_K=310.0, mole_fractions=[x1, 1.0 - x1])
        assert answer.splits is splits
        assert bool(answer.phases) is splits


def test_many_points_are_answered_in_order_each_with_its_confidence():
    x = np.column_stack([np.linspace(0, 1, 7), 1 - np.linspace(0, 1, 7)])
    T = np.linspace(300.0, 480.0, 7)
    answer = activity_coefficients(mixture("CCO", "O"), T, x, "unifac-dortmund")
    assert len(answer.confidence) == 7
    for k in range(7):
        alone = activity_coefficients(mixture("CCO", "O"), T[k], x[k], "unifac-dortmund")
        np.testing.assert_allclose(answer.ln_gamma[k], alone.ln_gamma[0], atol=1e-12)
        assert answer.confidence[k] == alone.confidence[0]
    outside = [
        any(reason.code == "outside_temperature_range" for reason in one.reasons)
        for one in answer.confidence
    ]
    assert outside == [bool(one > 420.0) for one in T]  # the table's range ends at 420 K


def test_combinatorial_and_residual_parts_add_up_and_excess_follows_from_them():
    x = np.array([[0.3, 0.5, 0.2]])
    answer = activity_coefficients(mixture("CCO", "O", "CC(C)=O"), 330.0, x)
    total = answer.ln_gamma_combinatorial + answer.ln_gamma_residual
    np.testing.assert_allclose(answer.ln_gamma, total, atol=1e-12)
    np.testing.assert_allclose(answer.gamma, np.exp(total), rtol=1e-12)
    assert answer.excess_gibbs_RT[0] == pytest.approx(float((x * total).sum()), abs=1e-12)


def test_groups_are_assigned_for_the_methods_asked_and_no_other():
    (ethanol,) = assign_groups([molecule_from_smiles("CCO")], ["unifac", "unifac-dortmund"])
    assert list(ethanol) == ["unifac", "unifac-dortmund"]
    # Hansen et al. (1991) and Gmehling et al. (1993): ethanol is CH3, CH2, OH (p).
    assert ethanol["unifac"].counts == {1: 1, 2: 1, 14: 1}
    assert ethanol["unifac-dortmund"].counts == {1: 1, 2: 1, 14: 1}


def test_a_component_made_twice_is_one_and_the_same_answer():
    one = bubble_point(mixture("CCO", "O"), [0.5, 0.5], pressure_kPa=ONE_ATM)
    two = bubble_point(
        [Component(molecule_from_smiles(s)) for s in ("[CH3][CH2][OH]", "[H]O[H]")],
        [0.5, 0.5],
        pressure_kPa=ONE_ATM,
    )
    assert two.temperature_K == pytest.approx(one.temperature_K, abs=1e-9)


def test_a_diagram_whose_inner_liquids_never_boil_still_answers():
    # Nitrogen is above its critical temperature (126 K, from memory) wherever benzene is a liquid.
    answer = diagram("Txy", mixture("c1ccccc1", "N#N"), pressure_kPa=0.002, method="psrk")
    assert answer.azeotrope_chance is None or answer.azeotrope_chance.probability == 0.0
