"""Chances of azeotropes and splits against the same draws solved one by one, and handbooks."""

import numpy as np
import pytest

from groups.equilibrium import System, azeotropes, binary_split
from groups.prediction import azeotropes as predicted
from groups.prediction import diagram, liquid_splits
from groups.prediction.bands import drawn_around
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.chances import azeotrope_chance, split_chance
from groups.prediction.composition_line import GRID, coexisting
from groups.structure.molecule import molecule_from_smiles
from tests.bench.measure_azeotrope_chances import brier_score, judged
from tests.unit.prediction.mixtures import ONE_ATM, mixture
from tests.unit.prediction.test_boiling_bands import N_SOLVED, drawn_systems, few


def ends(values):
    return np.quantile(values, [0.05, 0.95])


@pytest.mark.parametrize("condition", [{"pressure_kPa": ONE_ATM}, {"temperature_K": 335.0}])
@pytest.mark.parametrize(
    "smiles",
    [("CC(C)=O", "CO"), ("CC(C)=O", "O"), ("CC(C)=O", "ClC(Cl)Cl"), ("CCCCO", "O")],
)
def test_the_chance_of_an_azeotrope_is_the_share_of_solved_draws_that_have_one(smiles, condition):
    mixed = boiling_mixture(mixture(*smiles), "auto", "estimate", **condition)
    drawn = few(mixed.drawn(340.0))
    found = azeotrope_chance(drawn, mixed.system, (0, 1), **condition)
    solved = [
        azeotropes(System(one.activity, one.vapour_pressures), **condition)
        for one in drawn_systems(mixed, drawn)
    ]
    # Draws whose azeotrope lies in the last thousandth of either end may fall on either side.
    assert found.probability == pytest.approx(np.mean([bool(one) for one in solved]), abs=0.04)
    first = [one[0] for one in solved if one]
    lower, upper = ends([one.mole_fractions[0] for one in first])
    # Steps of the line and straight lines in 1/T: a twentieth of the width, or 0.004.
    close = max(0.05 * (upper - lower), 0.004)
    assert found.x1.lower == pytest.approx(lower, abs=close)
    assert found.x1.upper == pytest.approx(upper, abs=close)
    place = found.temperature_K if "pressure_kPa" in condition else found.pressure_kPa
    name = "temperature_K" if "pressure_kPa" in condition else "pressure_kPa"
    lower, upper = ends([getattr(one, name) for one in first])
    close = 0.06 * (upper - lower)
    assert place.lower == pytest.approx(lower, abs=close)
    assert place.upper == pytest.approx(upper, abs=close)
    assert (found.temperature_K is None) == ("temperature_K" in condition)
    assert (found.pressure_kPa is None) == ("pressure_kPa" in condition)


@pytest.mark.parametrize(
    "smiles", [("CCCCO", "O"), ("CCC(C)=O", "O"), ("c1ccccc1", "O"), ("CCCCCC", "CO")]
)
def test_the_chance_of_a_split_is_the_share_of_solved_draws_that_split(smiles):
    drawn = few(drawn_around([molecule_from_smiles(s) for s in smiles], "estimate", 310.0))
    found = split_chance(drawn, 310.0)
    solved = [binary_split(model, 310.0) for model in drawn.models]
    assert found.probability == pytest.approx(
        np.mean([bool(s) for s in solved]), abs=1.0 / N_SOLVED
    )
    pairs = np.array([sorted((p[0][0], p[1][0])) for p in solved if p])
    for interval, values in ((found.x1_lower, pairs[:, 0]), (found.x1_upper, pairs[:, 1])):
        lower, upper = ends(np.log(values / (1.0 - values)))
        # Four steps of the line, 0.0625 in ln(x1/x2) each: near a consolute point it is flat, and
        # of two gaps that all but touch either may be the deeper one.
        assert np.log(interval.lower / (1.0 - interval.lower)) == pytest.approx(lower, abs=0.25)
        assert np.log(interval.upper / (1.0 - interval.upper)) == pytest.approx(upper, abs=0.25)


def test_handbook_azeotropes_are_held_and_told_from_mixtures_without():
    found = judged()
    present = [one for one in found if one.x1 is not None]
    # 90 % intervals of 24 independent binaries: 18 or more inside with 98 % (binomial).
    assert len(present) == 24
    assert sum(one.x1_inside for one in present) >= 18
    assert sum(one.temperature_inside for one in present) >= 18
    # Ethanol/water, the hardest, sits at even odds or better; the rest are all but certain.
    assert min(one.chance.probability for one in present) > 0.5
    assert max(one.chance.probability for one in found if one.x1 is None) < 0.5
    # 0.25 is no knowledge; five wrong by a half in 31 would give 0.04.
    assert brier_score(found) < 0.04


def test_an_interval_of_the_place_is_told_only_where_enough_draws_have_one():
    [chance] = predicted(mixture("CCCCCC", "CCCCCCC"), pressure_kPa=ONE_ATM).chances
    assert chance.probability < 0.01
    assert chance.x1 is None and chance.temperature_K is None
    never = liquid_splits(mixture("CCO", "CO"), temperature_K=300.0).chance
    assert never.probability == 0.0 and never.x1_lower is None and never.x1_upper is None


def test_every_two_of_three_components_have_a_chance():
    answer = predicted(mixture("CC(C)=O", "CO", "c1ccccc1"), pressure_kPa=ONE_ATM)
    assert [one.components for one in answer.chances] == [(0, 1), (0, 2), (1, 2)]
    assert all(0.0 <= one.probability <= 1.0 for one in answer.chances)


def test_turning_the_components_turns_the_place():
    [one] = predicted(mixture("CC(C)=O", "CO"), pressure_kPa=ONE_ATM).chances
    [other] = predicted(mixture("CO", "CC(C)=O"), pressure_kPa=ONE_ATM).chances
    assert other.probability == one.probability
    # The line is the same turned round; rounding of 1 - x.
    assert other.x1.lower == pytest.approx(1.0 - one.x1.upper, abs=1e-6)
    assert other.temperature_K.upper == pytest.approx(one.temperature_K.upper, abs=1e-6)


def test_the_same_question_gets_the_same_chance():
    asked = [predicted(mixture("CCO", "O"), pressure_kPa=ONE_ATM).chances for _ in range(2)]
    assert asked[0] == asked[1]


def test_a_diagram_and_the_azeotropes_tell_one_chance():
    drawn = diagram("Txy", mixture("CC(C)=O", "CO"), pressure_kPa=ONE_ATM, points=11)
    [alone] = predicted(mixture("CC(C)=O", "CO"), pressure_kPa=ONE_ATM).chances
    # Widths are taken a few kelvin apart.
    assert drawn.azeotrope_chance.probability == pytest.approx(alone.probability, abs=0.02)


def test_an_ideal_solution_has_no_chance_of_anything():
    assert predicted(mixture("CCO", "O"), pressure_kPa=ONE_ATM, method="ideal").chances == ()
    assert liquid_splits(mixture("CCO", "O"), temperature_K=300.0, method="ideal").chance is None


def test_a_common_tangent_of_a_symmetric_mixture_is_known():
    # Two-suffix Margules with A = 2.5: both liquids solve ln(x/(1-x)) = A (2x - 1).
    x = GRID
    difference = np.log(x / (1.0 - x)) + 2.5 * (1.0 - 2.0 * x)
    left, right = coexisting(difference[None], np.array([np.abs(x - 0.5).argmin()]))
    low, high = 0.01, 0.4
    for _ in range(60):
        middle = (low + high) / 2.0
        inside = np.log(middle / (1.0 - middle)) < 2.5 * (2.0 * middle - 1.0)
        low, high = (middle, high) if inside else (low, middle)
    step = 0.0625  # of the line, in ln(x1/x2)
    assert abs(np.log(x[left[0]] / (1.0 - x[left[0]])) - np.log(low / (1.0 - low))) <= step
    assert x[left[0]] == pytest.approx(1.0 - x[right[0]], abs=1e-9)


def test_a_place_outside_every_gap_is_spanned_by_its_neighbours():
    difference = np.log(GRID / (1.0 - GRID))
    left, right = coexisting(difference[None], np.array([200]))
    assert right[0] - left[0] == 1 and left[0] <= 200 <= right[0]
