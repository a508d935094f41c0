"""Critical points by Joback and Reid."""

import pytest
from rdkit import Chem

from groups.pure.critical import joback_critical


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
