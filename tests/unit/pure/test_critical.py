"""Critical points by Joback and Reid."""

import math

import pytest
from rdkit import Chem

from groups.pure.critical import (
    estimated_critical,
    joback_critical,
    wilson_jasperson_critical,
)


def test_2_ethylphenol_is_the_worked_example() -> None:
    # Poling, Prausnitz, O'Connell, 5th ed. (2001), example 2-1: 698.1 K and 44.09 bar from a
    # boiling point of 477.67 K, from memory; tolerance is the printed rounding.
    estimate = joback_critical(Chem.MolFromSmiles("CCc1ccccc1O"), 477.67)
    assert estimate is not None
    assert estimate.temperature_K.value == pytest.approx(698.1, abs=0.1)
    assert estimate.pressure_kPa.value == pytest.approx(4409.0, abs=1.0)
    assert estimate.temperature_K.estimated and estimate.pressure_kPa.estimated


def test_a_very_large_molecule_is_held_at_the_turning_point_and_says_so() -> None:
    ratios = []
    for n in (20, 30, 60):
        estimate = joback_critical(Chem.MolFromSmiles("C" * n), 700.0)
        assert estimate is not None
        ratios.append(700.0 / estimate.temperature_K.value)
    assert ratios[0] < ratios[1] == ratios[2]
    assert estimate is not None and "turning point" in estimate.temperature_K.source


def test_no_group_no_critical_point() -> None:
    assert joback_critical(Chem.MolFromSmiles("C[Si](C)(C)C"), 300.0) is None
    assert joback_critical(Chem.MolFromSmiles("CC(C)=N"), 300.0) is None


def test_wilson_and_jasperson_for_heptane_by_hand() -> None:
    # Equations of Poling, Prausnitz, O'Connell, 5th ed. (2001), 2-2.5 to 2-2.7, from memory.
    Tb = 371.6
    Tc = Tb / (0.048271 + 7 * 0.008532 + 16 * 0.002793) ** 0.2
    Y = -0.00922295 + 0.041 * (7 * 0.72983 + 16 * 0.12660)
    Pc = 1.86233 * Tc / (math.exp(Y) - 0.96601)
    estimate = wilson_jasperson_critical(Chem.MolFromSmiles("CCCCCCC"), Tb)
    assert estimate is not None
    assert estimate.temperature_K.value == pytest.approx(Tc, rel=1e-12)
    assert estimate.pressure_kPa.value == pytest.approx(Pc, rel=1e-12)
    # IUPAC: 540.2 K and 2740 kPa, from memory; the method's usual errors are 2 % and 7 %.
    assert estimate.temperature_K.value == pytest.approx(540.2, rel=0.02)
    assert estimate.pressure_kPa.value == pytest.approx(2740.0, rel=0.07)


def test_a_sulfoxide_which_joback_lacks_goes_to_the_other_method() -> None:
    sulfoxide = Chem.MolFromSmiles("CCS(=O)CC")
    assert joback_critical(sulfoxide, 480.0) is None
    estimate = estimated_critical(sulfoxide, 480.0)
    assert estimate is not None and "Wilson" in estimate.temperature_K.source
    hexane = estimated_critical(Chem.MolFromSmiles("CCCCCC"), 341.9)
    assert hexane is not None and "Joback" in hexane.temperature_K.source


def test_an_element_without_a_contribution_has_no_critical_point() -> None:
    assert wilson_jasperson_critical(Chem.MolFromSmiles("CP(C)C"), 310.0) is None
