"""Published vapour pressures against handbook values, through the front door."""

import csv
from pathlib import Path

import numpy as np
import pytest

from groups.pure import constants, vapour_pressure
from groups.structure.molecule import molecule_from_smiles

HERE = Path(__file__).parent


def rows(name: str) -> list[dict[str, str]]:
    with (HERE / name).open(encoding="utf-8") as text:
        return list(csv.DictReader(text))


@pytest.mark.parametrize("row", rows("boiling_points.csv"), ids=lambda row: row["name"])
def test_a_handbook_boiling_point_is_met(row: dict[str, str]) -> None:
    curve = vapour_pressure(molecule_from_smiles(row["smiles"]))
    assert curve.source == "published"
    expected, tolerance = float(row["temperature_K"]), float(row["tolerance_K"])
    assert curve.boiling_temperature(101.325) == pytest.approx(expected, abs=tolerance)


@pytest.mark.parametrize("row", rows("pressures.csv"), ids=lambda row: row["name"])
def test_a_handbook_pressure_is_met(row: dict[str, str]) -> None:
    T = float(row["temperature_K"])
    curve = vapour_pressure(molecule_from_smiles(row["smiles"]), temperature_K=(T, T))
    assert not curve.extrapolated(T)
    expected, tolerance = float(row["pressure_kPa"]), float(row["tolerance"])
    assert float(curve.kPa(T)) == pytest.approx(expected, rel=tolerance)


def test_acentric_factors_are_those_of_the_textbooks() -> None:
    # Poling, Prausnitz, O'Connell (2001), appendix A, from memory; two decimals are rounding and
    # the differing critical points of the compilations.
    for smiles, expected in (("CCCCCC", 0.300), ("c1ccccc1", 0.210), ("CCO", 0.645), ("O", 0.344)):
        acentric = constants(molecule_from_smiles(smiles)).acentric_factor
        assert acentric is not None and not acentric.estimated
        assert acentric.value == pytest.approx(expected, abs=0.01)


def test_the_stated_uncertainty_covers_most_handbook_points() -> None:
    misses = []
    for row in rows("pressures.csv"):
        curve = vapour_pressure(molecule_from_smiles(row["smiles"]))
        T = float(row["temperature_K"])
        miss = abs(float(curve.ln_kPa(T)) - np.log(float(row["pressure_kPa"])))
        misses.append(miss / float(curve.uncertainty(T)))
    assert np.mean(np.array(misses) < 2.0) >= 0.9  # two standard deviations hold 95 %
