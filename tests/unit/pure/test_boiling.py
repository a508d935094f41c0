"""Boiling points by the three published methods, and their median."""

import numpy as np
import pytest
from rdkit import Chem

from groups.pure.boiling import (
    constantinou_gani_boiling_K,
    estimated_boiling,
    joback_boiling_K,
    stein_brown_boiling_K,
)

HEXANE, PHENOL = Chem.MolFromSmiles("CCCCCC"), Chem.MolFromSmiles("Oc1ccccc1")


def test_hexane_by_stein_and_brown_by_hand() -> None:
    T = 198.2 + 2 * 21.98 + 4 * 24.22  # the paper's contributions, from memory
    expected = T - 94.84 + 0.5577 * T - 0.0007705 * T**2
    assert stein_brown_boiling_K(HEXANE) == pytest.approx(expected, rel=1e-12)
    assert expected == pytest.approx(341.9, abs=5.0)  # CRC Handbook; the method's usual error


def test_above_700_K_stein_and_brown_correct_along_the_second_line() -> None:
    T = 198.2 + 2 * 21.98 + 28 * 24.22
    assert T > 700.0
    long = stein_brown_boiling_K(Chem.MolFromSmiles("C" * 30))
    assert long == pytest.approx(T + 282.7 - 0.5209 * T, rel=1e-12)


def test_hexane_by_constantinou_and_gani_by_hand() -> None:
    expected = 204.359 * np.log(2 * 0.8894 + 4 * 0.9225)  # from memory
    assert constantinou_gani_boiling_K(HEXANE) == pytest.approx(expected, rel=1e-12)


def test_phenol_by_joback_and_reid_by_hand() -> None:
    expected = 198.0 + 5 * 26.73 + 31.01 + 76.34  # from memory
    assert joback_boiling_K(PHENOL) == pytest.approx(expected, rel=1e-12)


def test_the_estimate_is_the_median_and_widens_with_the_spread() -> None:
    close = estimated_boiling(HEXANE)
    apart = estimated_boiling(Chem.MolFromSmiles("FC(F)(F)C(F)(F)C(F)(F)C(F)(F)C(F)(F)F"))
    assert close is not None and apart is not None
    assert len(close.by_method) == len(apart.by_method) == 3
    assert close.value_K == sorted(T for _, T in close.by_method)[1]
    spread_close, spread_apart = (np.ptp([T for _, T in e.by_method]) for e in (close, apart))
    assert spread_apart > spread_close
    assert apart.uncertainty_K > close.uncertainty_K


def test_where_one_method_is_missing_stein_and_brown_stand_alone_and_less_sure() -> None:
    sulfoxide = estimated_boiling(Chem.MolFromSmiles("CCS(=O)CC"))
    full = estimated_boiling(HEXANE)
    assert sulfoxide is not None and full is not None
    assert sulfoxide.value_K == dict(sulfoxide.by_method)["Stein-Brown"]
    assert sulfoxide.uncertainty_K > full.uncertainty_K


def test_a_molecule_outside_the_tables_has_no_estimate() -> None:
    assert estimated_boiling(Chem.MolFromSmiles("C[Si](C)(C)C")) is None
