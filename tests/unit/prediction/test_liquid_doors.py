"""Liquid splits, mutual solubilities, ternary diagrams, residue maps and gases at the doors."""

import numpy as np
import pytest

from groups.errors import (
    DuplicateComponentError,
    FractionSumError,
    OutOfRangeError,
    PredictionError,
    ShapeError,
)
from groups.prediction import (
    azeotropes,
    gas_solubility,
    liquid_splits,
    mutual_solubilities,
    residue_curves,
    ternary_diagram,
)
from groups.prediction.ternary_diagrams import binodal_line
from tests.unit.prediction.mixtures import ONE_ATM, mixture

EXTRACTION = ("CC(=O)O", "O", "CC(C)OC(C)C")
STILL = ("CC(C)=O", "ClC(Cl)Cl", "CO")
SOLVED = 1e-7  # the flash holds equal fugacities to 1e-9


def test_a_split_of_three_components_balances_and_has_equal_activities():
    feed = np.array([0.45, 0.35, 0.2])
    answer = liquid_splits(
        mixture("O", "c1ccccc1", "CCO"), temperature_K=298.15, mole_fractions=feed
    )
    assert answer.splits and answer.failure is None and answer.fractions is not None
    mixed = sum(share * phase for share, phase in zip(answer.fractions, answer.phases, strict=True))
    np.testing.assert_allclose(mixed, feed, atol=1e-9)
    first, second = (
        np.log(phase) + ln_gamma
        for phase, ln_gamma in zip(answer.phases, answer.ln_gamma, strict=True)
    )
    np.testing.assert_allclose(first, second, atol=SOLVED)
    np.testing.assert_allclose(
        answer.distribution[1], answer.phases[1] / answer.phases[0], rtol=SOLVED
    )


def test_the_table_fitted_to_splits_is_taken_in_its_range_and_nowhere_else():
    pair = mixture("CCCCO", "O")
    near, far = (liquid_splits(pair, temperature_K=T) for T in (298.15, 360.0))
    assert near.method == "unifac-lle"
    assert "table_chosen_for_splits" in {r.code for r in near.confidence.reasons}
    assert far.method == "auto"
    assert liquid_splits(pair, temperature_K=298.15, method="unifac").method == "unifac"


def test_a_mixture_outside_the_table_fitted_to_splits_gets_the_weighted_choice():
    silane = mixture("C[Si](C)(C)C", "O")
    assert liquid_splits(silane, temperature_K=298.15).method == "auto"


def test_butanol_and_water_dissolve_of_each_other_what_the_handbook_says():
    # Sorensen & Arlt (1979), from memory: 1-butanol in water 0.019, water in 1-butanol 0.513 at
    # 25 C; the factor 1.6 is the mean error of the table over the handbook pairs.
    answer = mutual_solubilities(mixture("CCCCO", "O"), lowest_K=288.15, highest_K=308.15, points=3)
    assert answer.method == "unifac-lle" and answer.found.splits.all()
    poor, rich = answer.found.first[1, 0], answer.found.second[1, 1]
    assert abs(np.log(poor / 0.019)) < np.log(1.6)
    assert abs(np.log(rich / 0.513)) < np.log(1.6)
    assert len(answer.chances) == 3


def test_a_consolute_point_ends_the_gap():
    answer = mutual_solubilities(
        mixture("Nc1ccccc1", "C1CCCCC1"), lowest_K=280.0, highest_K=340.0, points=13
    )
    (point,) = answer.found.consolute_points
    assert point.kind == "upper"
    # Aniline/cyclohexane: 31 C (Francis 1961, from memory); the tables miss such points by 25 K.
    assert point.temperature_K == pytest.approx(304.0, abs=25.0)
    np.testing.assert_array_equal(
        answer.found.splits, answer.found.temperature_K < point.temperature_K
    )
    assert "consolute_point_uncertain" in {r.code for r in answer.confidence.reasons}


@pytest.mark.parametrize(
    ("given", "field"),
    [
        ({"lowest_K": 20.0, "highest_K": 300.0}, "lowest_K"),
        ({"lowest_K": 300.0, "highest_K": 300.0}, "highest_K"),
        ({"lowest_K": 300.0, "highest_K": 5000.0}, "highest_K"),
        ({"lowest_K": 300.0, "highest_K": 310.0, "points": 1}, "points"),
    ],
)
def test_a_temperature_range_that_is_none_is_refused(given, field):
    with pytest.raises(OutOfRangeError) as caught:
        mutual_solubilities(mixture("CCCCO", "O"), **given)
    assert caught.value.field in (field, None) and field in str(caught.value)


def test_a_ternary_diagram_has_the_tie_lines_asked_for_and_closes_in_its_plait_point():
    answer = ternary_diagram(mixture(*EXTRACTION), temperature_K=293.15, tie_lines=7)
    (region,) = answer.found.regions
    assert len(region.first[:: answer.every]) == 7
    (plait,) = region.plait_points
    line = binodal_line(region)
    np.testing.assert_allclose(line.sum(axis=1), 1.0)
    k = int(np.abs(line - plait).max(axis=1).argmin())
    np.testing.assert_array_equal(line[k], plait)
    # The plait point is inside the line, between first and second liquids.
    assert 0 < k < len(line) - 1 and len(line) == 2 * len(region.first) + 1


def test_a_tie_line_is_the_split_of_its_middle():
    components = mixture(*EXTRACTION)
    answer = ternary_diagram(components, temperature_K=293.15, tie_lines=7)
    (region,) = answer.found.regions
    k = len(region.first) // 2
    middle = 0.5 * (region.first[k] + region.second[k])
    split = liquid_splits(components, temperature_K=293.15, mole_fractions=middle)
    assert split.method == answer.method
    ends = sorted((region.first[k], region.second[k]), key=lambda x: x[0])
    np.testing.assert_allclose(np.array(split.phases), np.array(ends), atol=1e-6)


def test_a_ternary_of_neighbours_has_no_region():
    answer = ternary_diagram(mixture("CCCCCC", "CCCCCCC", "CCCCCCCC"), temperature_K=298.15)
    assert answer.found.regions == () and answer.found.triangles == ()


def test_a_residue_map_agrees_with_the_azeotropes_and_balances():
    components = mixture(*STILL)
    answer = residue_curves(
        components, pressure_kPa=ONE_ATM, starts=[[0.3, 0.3, 0.4], [0.1, 0.7, 0.2]]
    )
    assert answer.found.index_balanced and len(answer.found.curves) == 2
    found = azeotropes(components, pressure_kPa=ONE_ATM).azeotropes
    fixed = [p.mole_fractions for p in answer.found.fixed_points if p.azeotrope is not None]
    assert len(fixed) == len(found) == 4  # three binary ones and the ternary saddle
    for one, other in zip(fixed, found, strict=True):
        np.testing.assert_allclose(one, other.mole_fractions, atol=1e-8)
    for curve in answer.found.curves:
        T = curve.temperature_K[np.isfinite(curve.temperature_K)]
        assert (np.diff(T) > -1e-6).all()  # an open still only ever grows hotter
        stability = [p.stability for p in answer.found.fixed_points]
        assert stability[curve.begins] == "unstable node" and stability[curve.ends] == "stable node"


@pytest.mark.parametrize(
    ("starts", "error"),
    [
        ([[0.5, 0.5]], ShapeError),
        ([[0.5, 0.4, 0.3]], FractionSumError),
        ([[1 / 3] * 3] * 51, ShapeError),
    ],
)
def test_starts_that_are_no_compositions_are_refused(starts, error):
    with pytest.raises(error):
        residue_curves(mixture(*STILL), pressure_kPa=ONE_ATM, starts=starts)


def test_carbon_dioxide_dissolves_in_methanol_as_measured():
    # Henry's constant at 298.15 K: 14.4 MPa from the solubility x = 0.0070 at 101.3 kPa partial
    # pressure (IUPAC Solubility Data Series, from memory, 0.0065 to 0.0075): 13.5 to 15.6 MPa.
    # The equation is fitted to this pair; 15 % is its usual error.
    answer = gas_solubility(*_gas_and_solvents("O=C=O", "CO"), temperature_K=298.15)
    assert answer.henry_kPa[0] == pytest.approx(14_400.0, rel=0.15)
    assert answer.gas_mole_fraction[0] == pytest.approx(answer.liquid[0, 0])
    # At low pressure Henry's law holds: fugacity of the gas is about its partial pressure.
    partial = ONE_ATM * answer.vapour[0, 0]
    assert answer.gas_mole_fraction[0] * answer.henry_kPa[0] == pytest.approx(partial, rel=0.02)


def test_a_boiling_solvent_dissolves_no_gas_and_says_so():
    answer = gas_solubility(*_gas_and_solvents("N#N", "CO"), temperature_K=[298.15, 400.0])
    assert np.isfinite(answer.gas_mole_fraction[0]) and np.isnan(answer.gas_mole_fraction[1])
    assert answer.failure[0] is None and "boils" in str(answer.failure[1])
    assert "not_converged" in {r.code for r in answer.confidence.reasons}


def test_what_a_gas_lacks_is_laid_to_the_gas_and_what_a_solvent_lacks_to_the_solvent():
    gas, solvents = _gas_and_solvents("O=C=O", "CO", "O")
    with pytest.raises(ShapeError, match="solvent_mole_fractions"):
        gas_solubility(gas, solvents, temperature_K=300.0)
    with pytest.raises(FractionSumError) as caught:
        gas_solubility(gas, solvents, temperature_K=300.0, solvent_mole_fractions=[0.5, 0.6])
    assert caught.value.field == "solvent_mole_fractions"
    with pytest.raises(DuplicateComponentError) as twice:
        gas_solubility(gas, [gas], temperature_K=300.0)
    assert str(twice.value.field).startswith("solvents[0]")
    odd = mixture("CCB(CC)CC")
    with pytest.raises(PredictionError) as uncovered:
        gas_solubility(gas, odd, temperature_K=300.0)
    assert str(uncovered.value.field).startswith("solvents[0]")
    with pytest.raises(ShapeError) as none:
        gas_solubility(gas, [], temperature_K=300.0)
    assert none.value.field == "solvents"


def _gas_and_solvents(gas: str, *solvents: str):
    return mixture(gas)[0], mixture(*solvents)
