"""Advice on the class of property method: textbook cases on either side of each line."""

import numpy as np
import pytest

from groups.errors import DuplicateComponentError, InvalidInputError, OutOfRangeError, ShapeError
from groups.prediction import advice, bubble_point
from groups.prediction.ideality_costs import compositions
from tests.unit.prediction.mixtures import mixture

AT_1_ATM = {"temperature_K": (320.0, 395.0), "pressure_kPa": (101.325, 101.325)}
# Textbook classes of these mixtures (Smith, Van Ness & Abbott (2005), chapters 10 to 14; Prausnitz,
# Lichtenthaler & de Azevedo (1999), chapter 5, from memory), not our own output.
TEXTBOOK = [
    (("c1ccccc1", "Cc1ccccc1"), AT_1_ATM, "ideal gas", "ideal solution", "ideal"),
    (("CCCCCC", "CCCCCCC"), AT_1_ATM, "ideal gas", "ideal solution", "ideal"),
    (
        ("CCO", "O"),
        AT_1_ATM,
        "ideal gas",
        "real solution",
        "activity coefficients, ideal vapour",
    ),
    (
        ("CC(=O)O", "O"),
        AT_1_ATM,
        "real gas",
        "real solution",
        "activity coefficients, real vapour",
    ),
    (
        ("CO", "O=C=O"),
        {"temperature_K": (298.15, 333.15), "pressure_kPa": (100.0, 5000.0)},
        "real gas",
        "real solution",
        "equation of state",
    ),
    (
        ("c1ccccc1", "Cc1ccccc1"),
        {"temperature_K": (420.0, 520.0), "pressure_kPa": (1000.0, 2500.0)},
        "real gas",
        "ideal solution",
        "equation of state",
    ),
]


@pytest.mark.parametrize(("smiles", "given", "vapour", "liquid", "flowsheet"), TEXTBOOK)
def test_textbook_mixtures_get_their_class(smiles, given, vapour, liquid, flowsheet):
    answer = advice(mixture(*smiles), **given)
    assert (answer.vapour, answer.liquid, answer.flowsheet_class) == (vapour, liquid, flowsheet)
    assert answer.boils_within and answer.findings[-1].code == "recommended"


def test_the_order_of_components_changes_no_verdict():
    one = advice(mixture("CC(=O)O", "O"), **AT_1_ATM)
    two = advice(mixture("O", "CC(=O)O"), **AT_1_ATM)
    assert one.flowsheet_class == two.flowsheet_class
    assert one.ideal_gas_cost.pressure == pytest.approx(two.ideal_gas_cost.pressure, rel=1e-9)
    assert one.solution.largest_ln_gamma == pytest.approx(two.solution.largest_ln_gamma, rel=1e-9)


def test_the_cost_of_an_ideal_vapour_covers_the_difference_of_two_bubble_points():
    components = mixture("CC(=O)O", "O")
    answer = advice(components, **AT_1_ATM)
    for x1 in (0.2, 0.5, 0.8):
        x = [x1, 1.0 - x1]
        real = bubble_point(components, x, pressure_kPa=101.325, vapour="virial")
        ideal = bubble_point(components, x, temperature_K=real.temperature_K, vapour="ideal")
        # To first order in the deviations, hence the quarter on top.
        error = abs(ideal.pressure_kPa / real.pressure_kPa - 1.0)
        assert error <= 1.25 * answer.ideal_gas_cost.pressure


def test_the_cost_of_an_ideal_solution_is_at_least_that_of_one_of_its_liquids():
    components = mixture("CCO", "O")
    answer = advice(components, **AT_1_ATM)
    point = bubble_point(components, [0.5, 0.5], pressure_kPa=101.325, vapour="ideal")
    raoult = float(np.dot([0.5, 0.5], point.saturation_kPa))
    assert abs(raoult / point.pressure_kPa - 1.0) <= answer.ideal_solution_cost.pressure + 1e-3


def test_a_narrow_range_of_composition_costs_less():
    components = mixture("CCO", "O")
    whole = advice(components, **AT_1_ATM)
    narrow = advice(components, mole_fractions=[(0.95, 1.0), (0.0, 0.05)], **AT_1_ATM)
    assert narrow.ideal_solution_cost.pressure < whole.ideal_solution_cost.pressure


def test_acids_beside_bases_are_out_of_scope():
    for pair in (("CC(=O)O", "CCN(CC)CC"), ("CCC(=O)O", "c1ccncc1")):
        answer = advice(mixture(*pair), temperature_K=(350.0, 450.0), pressure_kPa=(50.0, 110.0))
        assert answer.flowsheet_class == "out of scope"
        assert {finding.code for finding in answer.out_of_scope} == {"electrolytes"}


def test_splits_azeotropes_and_gases_are_found_and_named():
    split = advice(mixture("CCCCO", "O"), **AT_1_ATM)
    assert split.splits == (("1-butanol", "water"),) and split.azeotropes == 1
    assert "Wilson" not in split.findings[-1].message
    gas = advice(mixture("CO", "N#N"), temperature_K=(290.0, 310.0), pressure_kPa=(100.0, 300.0))
    assert gas.supercritical == ("nitrogen",)
    assert gas.flowsheet_class == "activity coefficients, Henry's law for gases"


def test_a_liquid_that_never_boils_in_the_ranges_is_told():
    answer = advice(
        mixture("CCO", "O"), temperature_K=(298.15, 310.0), pressure_kPa=(1000.0, 2000.0)
    )
    assert not answer.boils_within
    assert "nothing_boils_within" in {finding.code for finding in answer.findings}


@pytest.mark.parametrize("n", [2, 3, 5])
def test_the_compositions_lie_within_their_bounds_and_sum_to_one(n):
    lower = np.full(n, 0.05)
    lower[0], upper = 0.3, np.ones(n)
    every = compositions(lower, upper)
    assert len(every) > 20
    np.testing.assert_allclose(every.sum(axis=1), 1.0)
    assert (every >= lower - 1e-6).all() and (every <= upper + 1e-6).all()


@pytest.mark.parametrize(
    ("given", "error", "field"),
    [
        ({"temperature_K": (400.0, 300.0)}, OutOfRangeError, "temperature_K[1]"),
        ({"temperature_K": (20.0, 300.0)}, OutOfRangeError, "temperature_K[0]"),
        ({"pressure_kPa": (100.0,)}, ShapeError, "pressure_kPa"),
        ({"mole_fractions": [(0.0, 1.0)]}, ShapeError, "mole_fractions"),
        ({"mole_fractions": [(0.0, 0.2), (0.0, 0.2)]}, ShapeError, "mole_fractions"),
        ({"mole_fractions": [(0.5, 0.2), (0.0, 1.0)]}, OutOfRangeError, "mole_fractions[0][1]"),
        ({"mole_fractions": [(0.0, 1.2), (0.0, 1.0)]}, OutOfRangeError, "mole_fractions[0]"),
    ],
)
def test_ranges_that_are_none_are_refused_by_name(given, error, field):
    with pytest.raises(error) as caught:
        advice(mixture("CCO", "O"), **{**AT_1_ATM, **given})
    assert caught.value.field == field and caught.value.cure


def test_one_component_or_one_twice_is_refused():
    with pytest.raises(InvalidInputError):
        advice(mixture("O"), **AT_1_ATM)
    with pytest.raises(DuplicateComponentError):
        advice(mixture("O", "O"), **AT_1_ATM)
