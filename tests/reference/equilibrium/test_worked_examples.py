"""Worked examples of a textbook.

Smith, Van Ness & Abbott, Introduction to Chemical Engineering Thermodynamics, 7th ed. (2005),
example 10.3 (methanol/methyl acetate) and table 12.1 with its Margules constants (methyl ethyl
ketone/toluene). From memory. Printed figures set the tolerances.
"""

import csv
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import numpy.typing as npt
import pytest

from groups.activity import activity_model
from groups.arrays import FloatArray
from groups.equilibrium import (
    System,
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    dew_temperature,
    diagram,
)
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles

# Half a unit of the last printed figure, and a whole one where the book rounds on its way.
LAST_PRESSURE = 0.011
LAST_TEMPERATURE = 0.011
LAST_FRACTION = 0.0011


@dataclass(frozen=True)
class Antoine:
    """ln P/kPa = A - B/(T - C)."""

    A: float
    B: float
    C: float
    critical_temperature_K: float | None = None

    def ln_kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.asarray(self.A - self.B / (np.asarray(temperature_K, dtype=float) - self.C))

    def slope(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.asarray(self.B / (np.asarray(temperature_K, dtype=float) - self.C) ** 2)


@dataclass(frozen=True)
class MargulesOfT:
    """gE/RT = x1 x2 (A21 x1 + A12 x2), each A = first + second * T."""

    first: tuple[float, float]
    second: tuple[float, float] = (0.0, 0.0)
    n_components: int = 2

    def _form(self, pair: tuple[float, float], x: FloatArray) -> FloatArray:
        (A12, A21), x1, x2 = pair, x[..., 0], x[..., 1]
        one = x2**2 * (A12 + 2.0 * (A21 - A12) * x1)
        two = x1**2 * (A21 + 2.0 * (A12 - A21) * x2)
        return np.stack([one, two], axis=-1)

    def ln_gamma(self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike) -> FloatArray:
        T = np.asarray(temperature_K, dtype=float)[..., None]
        x = np.asarray(mole_fractions, dtype=float)
        return self._form(self.first, x) + T * self._form(self.second, x)

    def ln_gamma_slope(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        T = np.asarray(temperature_K, dtype=float)[..., None]
        return self._form(self.second, np.asarray(mole_fractions, dtype=float)) + 0.0 * T

    def ln_gamma_mole_derivatives(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        T = np.asarray(temperature_K, dtype=float)
        x = np.asarray(mole_fractions, dtype=float)
        A12 = self.first[0] + self.second[0] * T
        A21 = self.first[1] + self.second[1] * T
        x1, x2 = x[..., 0], x[..., 1]
        second = -2.0 * (A12 + 2.0 * (A21 - A12) * x1) + 2.0 * (A21 - A12) * x2
        ends = np.stack([x2, -x1], axis=-1)
        return np.asarray(second[..., None, None] * ends[..., :, None] * ends[..., None, :])


EXAMPLE = System(
    MargulesOfT((2.771, 2.771), (-0.00523, -0.00523)),
    (Antoine(16.59158, 3643.31, 33.424), Antoine(14.25326, 2665.54, 53.424)),
)


def test_example_10_3a_bubble_pressure():
    states = bubble_pressure(EXAMPLE, 318.15, [0.25, 0.75])
    assert states.pressure_kPa[0] == pytest.approx(73.50, abs=LAST_PRESSURE)
    assert states.vapour[0, 0] == pytest.approx(0.282, abs=LAST_FRACTION)


def test_example_10_3b_dew_pressure():
    states = dew_pressure(EXAMPLE, 318.15, [0.60, 0.40])
    assert states.pressure_kPa[0] == pytest.approx(62.89, abs=LAST_PRESSURE)
    assert states.liquid[0, 0] == pytest.approx(0.817, abs=LAST_FRACTION)


def test_example_10_3c_bubble_temperature():
    states = bubble_temperature(EXAMPLE, 101.33, [0.85, 0.15])
    assert states.temperature_K[0] == pytest.approx(331.20, abs=LAST_TEMPERATURE)
    assert states.vapour[0, 0] == pytest.approx(0.670, abs=LAST_FRACTION)


def test_example_10_3d_dew_temperature():
    states = dew_temperature(EXAMPLE, 101.33, [0.40, 0.60])
    assert states.temperature_K[0] == pytest.approx(326.70, abs=LAST_TEMPERATURE)
    assert states.liquid[0, 0] == pytest.approx(0.460, abs=LAST_FRACTION)


def test_example_10_3e_azeotrope():
    (found,) = diagram(EXAMPLE, "Pxy", temperature_K=318.15).azeotropes
    assert found.pressure_kPa == pytest.approx(73.76, abs=LAST_PRESSURE)
    assert found.mole_fractions[0] == pytest.approx(0.325, abs=LAST_FRACTION)
    assert found.kind == "minimum-boiling"


def mek_toluene() -> FloatArray:
    with (Path(__file__).parent / "mek_toluene.csv").open() as file:
        rows = list(csv.DictReader(file))
    return np.array([[float(r["pressure_kPa"]), float(r["x1"]), float(r["y1"])] for r in rows])


def test_table_12_1_follows_its_margules_constants():
    P, x1, y1 = mek_toluene().T
    # ln gamma_inf 0.372 and 0.198 (section 12.1); the ends of the table are the vapour pressures.
    lines = (Antoine(np.log(36.09), 0.0, 0.0), Antoine(np.log(12.30), 0.0, 0.0))
    system = System(MargulesOfT((0.372, 0.198)), lines)
    states = bubble_pressure(system, 323.15, np.stack([x1, 1 - x1], axis=1))
    # Two constants leave about 0.5 % of P and 0.01 of y, as the figure in the book shows.
    np.testing.assert_allclose(states.pressure_kPa, P, rtol=0.007)
    np.testing.assert_allclose(states.vapour[:, 0], y1, atol=0.012)


@pytest.mark.parametrize("method", ["unifac", "unifac-dortmund"])
def test_table_12_1_is_predicted(method):
    P, x1, y1 = mek_toluene().T
    molecules = [molecule_from_smiles(smiles) for smiles in ("CCC(C)=O", "Cc1ccccc1")]
    counts = [assign(molecule, method).counts for molecule in molecules]
    lines = tuple(vapour_pressure(molecule) for molecule in molecules)
    system = System(activity_model(counts, method), lines)
    states = bubble_pressure(system, 323.15, np.stack([x1, 1 - x1], axis=1))
    # Group contribution for ketone/aromatic: some 3 % of P and 0.02 of y is its usual error.
    np.testing.assert_allclose(states.pressure_kPa, P, rtol=0.03)
    np.testing.assert_allclose(states.vapour[:, 0], y1, atol=0.02)
