"""What each door refuses, with the field at fault and a cure."""

import numpy as np
import pytest

from groups.errors import (
    DuplicateComponentError,
    FractionSumError,
    IncompleteAssignmentError,
    InvalidInputError,
    MissingParameterError,
    MixwrightError,
    OutOfRangeError,
    ShapeError,
    UnknownMethodError,
)
from groups.prediction import (
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
from groups.pure import AntoineInput
from groups.structure.molecule import molecule_from_smiles
from tests.unit.prediction.mixtures import (
    DOORS,
    ETHANOL_WATER,
    ONE_ATM,
    WITH_GAP,
    WITHOUT_COMPOSITION,
    call,
    mixture,
)

BINARY = mixture(*ETHANOL_WATER)
ALL_DOORS = (*DOORS, *WITHOUT_COMPOSITION)
NOT_A_TEMPERATURE = (np.nan, np.inf, -np.inf, -5.0, 0.0, 25.0, 1e4)
NOT_A_PRESSURE = (np.nan, np.inf, -np.inf, -1.0, 0.0, 1e-9, 1e9)


def refused(error: type[MixwrightError], function, *arguments, **named) -> MixwrightError:
    """The error that the call raises; it must carry a cure."""
    with pytest.raises(error) as caught:
        function(*arguments, **named)
    assert caught.value.cure
    return caught.value


@pytest.mark.parametrize("temperature_K", NOT_A_TEMPERATURE)
@pytest.mark.parametrize(
    "door",
    [
        lambda T: activity_coefficients(BINARY, T, [0.5, 0.5]),
        lambda T: bubble_point(BINARY, [0.5, 0.5], temperature_K=T),
        lambda T: dew_point(BINARY, [0.5, 0.5], temperature_K=T),
        lambda T: flash(BINARY, [0.5, 0.5], temperature_K=T, pressure_kPa=ONE_ATM),
        lambda T: diagram("Pxy", BINARY, temperature_K=T),
        lambda T: azeotropes(BINARY, temperature_K=T),
        lambda T: liquid_splits(BINARY, temperature_K=T),
    ],
)
def test_an_absurd_temperature_is_refused_by_name(door, temperature_K):
    error = refused(OutOfRangeError, door, temperature_K)
    assert error.field == "temperature_K"
    assert repr(float(temperature_K)) in str(error)


@pytest.mark.parametrize("pressure_kPa", NOT_A_PRESSURE)
@pytest.mark.parametrize(
    "door",
    [
        lambda P: bubble_point(BINARY, [0.5, 0.5], pressure_kPa=P),
        lambda P: dew_point(BINARY, [0.5, 0.5], pressure_kPa=P),
        lambda P: flash(BINARY, [0.5, 0.5], temperature_K=350.0, pressure_kPa=P),
        lambda P: diagram("Txy", BINARY, pressure_kPa=P),
        lambda P: azeotropes(BINARY, pressure_kPa=P),
    ],
)
def test_an_absurd_pressure_is_refused_by_name(door, pressure_kPa):
    assert refused(OutOfRangeError, door, pressure_kPa).field == "pressure_kPa"


@pytest.mark.parametrize("temperature_K", NOT_A_TEMPERATURE)
def test_an_absurd_temperature_of_one_dilute_pair_is_refused_with_its_place(temperature_K):
    ethanol, water = (component.molecule for component in BINARY)
    pairs = [(ethanol, water, 300.0), (water, ethanol, temperature_K)]
    assert refused(OutOfRangeError, infinite_dilution, pairs).field.startswith("pairs[1]")


def test_one_bad_temperature_among_many_is_named_with_its_place():
    x = np.full((3, 2), 0.5)
    error = refused(OutOfRangeError, activity_coefficients, BINARY, [300.0, 310.0, np.nan], x)
    assert error.field == "temperature_K[2]"


@pytest.mark.parametrize("door", DOORS)
@pytest.mark.parametrize(
    ("fractions", "error"),
    [
        ([0.5, 0.4], FractionSumError),
        ([0.5, 0.500002], FractionSumError),
        ([1.2, -0.2], OutOfRangeError),
        ([np.nan, 1.0], OutOfRangeError),
        ([np.inf, 0.0], OutOfRangeError),
        ([50.0, 50.0], OutOfRangeError),
        ([1.0], ShapeError),
        ([0.3, 0.3, 0.4], ShapeError),
        ([], ShapeError),
        ([[0.5, 0.5], [1.0]], ShapeError),
        ([[[0.5, 0.5]]], ShapeError),
    ],
    ids=str,
)
def test_fractions_that_are_none_are_refused(door, fractions, error):
    assert refused(error, DOORS[door], BINARY, fractions).field.startswith("mole_fractions")


def test_the_wrong_sum_is_said():
    error = refused(FractionSumError, bubble_point, BINARY, [0.5, 0.4], pressure_kPa=ONE_ATM)
    assert error.total == pytest.approx(0.9)
    assert "0.9" in str(error)


def test_fractions_rounded_in_their_last_figure_are_taken():
    # Six printed figures: the sum may be out by 1e-6 at most, as thirds are.
    answer = activity_coefficients(
        mixture("CCO", "O", "CO"), 330.0, [0.3333333, 0.3333333, 0.3333333]
    )
    assert answer.mole_fractions.sum() == pytest.approx(1.0, abs=1e-15)


def test_a_ragged_table_of_points_is_refused():
    points = [[0.5, 0.5], [0.2, 0.3, 0.5]]
    assert refused(ShapeError, activity_coefficients, BINARY, 300.0, points)


def test_temperatures_that_do_not_match_the_points_are_refused():
    x = np.full((3, 2), 0.5)
    error = refused(ShapeError, activity_coefficients, BINARY, [300.0, 310.0], x)
    assert error.field == "temperature_K"
    assert refused(ShapeError, activity_coefficients, BINARY, [], x).field == "temperature_K"


@pytest.mark.parametrize("door", DOORS)
def test_no_component_is_refused(door):
    assert refused(ShapeError, DOORS[door], [], []).field == "components"


@pytest.mark.parametrize("door", WITHOUT_COMPOSITION)
def test_a_single_component_is_refused_where_two_are_needed(door):
    assert refused(ShapeError, WITHOUT_COMPOSITION[door], mixture("CCO")).field == "components"


@pytest.mark.parametrize("door", ["Txy", "Pxy"])
def test_a_diagram_of_three_is_refused(door):
    three = mixture("CCO", "O", "CO")
    assert refused(ShapeError, WITHOUT_COMPOSITION[door], three).field == "components"


def test_azeotropes_of_seven_are_refused():
    seven = mixture(*("C" * n for n in range(5, 12)))
    assert refused(ShapeError, azeotropes, seven, pressure_kPa=ONE_ATM).field == "components"


@pytest.mark.parametrize("door", ALL_DOORS)
def test_one_molecule_written_two_ways_is_a_duplicate(door):
    error = refused(DuplicateComponentError, call, door, mixture("CCO", "OCC"))
    assert error.field == "components[1]"
    assert (error.first, error.second) == (0, 1)


def test_a_dilute_pair_of_one_molecule_is_refused_with_its_place():
    ethanol, water = (component.molecule for component in BINARY)
    pairs = [(ethanol, water, 300.0), (ethanol, ethanol, 300.0)]
    error = refused(DuplicateComponentError, infinite_dilution, pairs)
    assert error.field.startswith("pairs[1]")


@pytest.mark.parametrize("door", ALL_DOORS)
@pytest.mark.parametrize("method", ["uniquac", "", "UNIFAC", "unifac "])
def test_an_unknown_method_is_refused_and_the_known_ones_listed(door, method):
    error = refused(UnknownMethodError, call, door, BINARY, method=method)
    assert error.field == "method"
    assert "unifac-dortmund" in str(error) and "auto" in str(error)


def test_an_unknown_method_is_refused_in_the_batch_and_for_groups():
    pairs = [(BINARY[0].molecule, BINARY[1].molecule, 300.0)]
    assert refused(UnknownMethodError, infinite_dilution, pairs, "nrtl")
    assert refused(UnknownMethodError, assign_groups, [BINARY[0].molecule], ["auto"])


def test_an_unknown_method_is_refused_even_for_a_single_component():
    assert refused(
        UnknownMethodError, bubble_point, mixture("O"), [1.0], pressure_kPa=100.0, method="nrtl"
    )


@pytest.mark.parametrize(
    "given", [{}, {"temperature_K": 350.0, "pressure_kPa": 100.0}], ids=["neither", "both"]
)
@pytest.mark.parametrize(
    "door",
    [
        lambda **g: bubble_point(BINARY, [0.5, 0.5], **g),
        lambda **g: dew_point(BINARY, [0.5, 0.5], **g),
        lambda **g: azeotropes(BINARY, **g),
        lambda **g: diagram("Txy", BINARY, **g),
        lambda **g: diagram("Pxy", BINARY, **g),
    ],
)
def test_exactly_one_of_temperature_and_pressure_is_taken(door, given):
    assert refused(InvalidInputError, door, **given).field in ("temperature_K", "pressure_kPa")


@pytest.mark.parametrize(
    ("kind", "given"), [("Txy", {"temperature_K": 350.0}), ("Pxy", {"pressure_kPa": 100.0})]
)
def test_a_diagram_with_the_condition_of_the_other_kind_is_refused(kind, given):
    error = refused(InvalidInputError, diagram, kind, BINARY, **given)
    assert kind in str(error)


def test_an_unknown_kind_of_diagram_is_refused():
    assert refused(InvalidInputError, diagram, "xy", BINARY, pressure_kPa=ONE_ATM).field == "kind"


@pytest.mark.parametrize("points", [-1, 0, 1, 2002, 10**9])
def test_a_diagram_of_too_few_or_too_many_points_is_refused(points):
    error = refused(OutOfRangeError, diagram, "Txy", BINARY, pressure_kPa=ONE_ATM, points=points)
    assert error.field == "points"


def test_three_components_need_a_composition_for_their_split():
    error = refused(ShapeError, liquid_splits, mixture("CCO", "O", "CCCCCC"), temperature_K=300.0)
    assert error.field == "mole_fractions"


@pytest.mark.parametrize(
    "door", [d for d in ALL_DOORS if d not in ("activity_coefficients", "liquid_splits")]
)
def test_a_vapour_pressure_that_no_liquid_has_is_refused_at_its_component(door):
    # Common logarithm given as natural: the slope is 2.3 times too small for any liquid.
    wrong = AntoineInput(8.1, 1500.0, -8000.0, "10", "kPa", "K", (300.0, 400.0))
    components = [BINARY[0], Component(BINARY[1].molecule, wrong)]
    assert refused(InvalidInputError, call, door, components).field.startswith("components[1]")


@pytest.mark.parametrize("door", ALL_DOORS)
def test_a_gap_in_the_table_is_refused_if_estimates_are_not_wanted(door):
    error = refused(
        MissingParameterError, call, door, mixture(*WITH_GAP), method="unifac", on_missing="refuse"
    )
    assert error.pairs
    assert "C=C / I" in str(error)


@pytest.mark.parametrize("door", ALL_DOORS)
def test_a_molecule_without_groups_is_refused_at_its_component(door):
    silane = mixture("O", "C[Si](C)(C)C")  # tetramethylsilane: not a group of the Lyngby table
    error = refused(IncompleteAssignmentError, call, door, silane, method="unifac-lyngby")
    assert error.field == "components[1]"
    assert error.atoms


def test_no_pairs_give_no_answers():
    assert infinite_dilution([]) == ()


def test_a_molecule_is_not_changed_by_a_refusal():
    molecule = molecule_from_smiles("C[Si](C)(C)C")
    before = molecule.canonical_smiles
    refused(
        IncompleteAssignmentError,
        bubble_point,
        [Component(molecule), *mixture("O")],
        [0.5, 0.5],
        pressure_kPa=ONE_ATM,
        method="unifac-lyngby",
    )
    assert molecule.canonical_smiles == before
