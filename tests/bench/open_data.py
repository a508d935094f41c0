"""Where the open measurements lie, and how benches and tests read them.

The folder `shared/data` stands beside the checkout and is never part of it.
"""

import csv
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from groups.arrays import FloatArray

OPEN_DATA = Path(__file__).resolve().parents[3] / "shared" / "data"
ABSENT = f"the open measurements are not at hand (no folder {OPEN_DATA.parent.name}/data)"

# As the data set's own notes say: 1,3-dioxolane with three amines was measured with u(P) = 0.3 kPa,
# more than the lowest pressures themselves, so these sets are weighed by absolute error.
STATED_PRESSURE_UNCERTAINTY_KPA = {"10.1016/j.tca.2010.07.027": 0.3}


@dataclass(frozen=True, slots=True)
class GammaInfinity:
    """Measured ln gamma at infinite dilution; all of length n_rows."""

    solute: tuple[str, ...]
    solvent: tuple[str, ...]
    ln_gamma: FloatArray
    temperature_K: FloatArray


def gamma_infinity() -> GammaInfinity:
    """Read the open set of activity coefficients at infinite dilution.

    Source
    ------
    Brouwer, Kersten, Bargeman & Schuur, Sep. Purif. Technol. 272 (2021) 118727, open data set.
    """
    with (OPEN_DATA / "gamma_infinity.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    return GammaInfinity(
        tuple(row["solute_smiles"] for row in rows),
        tuple(row["solvent_smiles"] for row in rows),
        np.array([float(row["ln_gamma_inf"]) for row in rows]),
        np.array([float(row["temperature_K"]) for row in rows]),
    )


@dataclass(frozen=True, slots=True)
class VleSet:
    """Measured boiling states of one binary at one temperature or one pressure.

    `y1` is NaN where the vapour was not analysed. `pressure_uncertainty_kPa` is the authors'
    stated uncertainty where it is a large part of the lowest pressures, else None.
    """

    set_id: str
    source: str
    names: tuple[str, str]
    smiles: tuple[str, str]
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    x1: FloatArray
    y1: FloatArray
    pressure_uncertainty_kPa: float | None

    @property
    def isothermal(self) -> bool:
        """Whether the temperature is the fixed one."""
        return bool(np.ptp(self.temperature_K) == 0.0)


@dataclass(frozen=True, slots=True)
class EnthalpySet:
    """Measured excess molar enthalpies of one binary; arrays of length n_rows."""

    set_id: str
    source: str
    smiles: tuple[str, str]
    temperature_K: FloatArray
    x1: FloatArray
    excess_enthalpy_J_mol: FloatArray


def vle() -> tuple[VleSet, ...]:
    """Read the open vapour-liquid states, one record a set.

    Source
    ------
    NIST ThermoML Archive; the paper of each set is named in `source`.
    """
    sets = []
    for set_id, rows in _rows_by_set("vle.csv").items():
        first = rows[0]
        sets.append(
            VleSet(
                set_id,
                first["source"],
                (first["name1"], first["name2"]),
                (first["smiles1"], first["smiles2"]),
                _column(rows, "temperature_K"),
                _column(rows, "pressure_kPa"),
                _column(rows, "x1"),
                _column(rows, "y1"),
                STATED_PRESSURE_UNCERTAINTY_KPA.get(first["source"]),
            )
        )
    return tuple(sets)


def excess_enthalpy() -> tuple[EnthalpySet, ...]:
    """Read the open excess enthalpies, one record a set.

    Source
    ------
    NIST ThermoML Archive; the paper of each set is named in `source`.
    """
    return tuple(
        EnthalpySet(
            set_id,
            rows[0]["source"],
            (rows[0]["smiles1"], rows[0]["smiles2"]),
            _column(rows, "temperature_K"),
            _column(rows, "x1"),
            _column(rows, "excess_enthalpy_J_per_mol"),
        )
        for set_id, rows in _rows_by_set("excess_enthalpy.csv").items()
    )


def _rows_by_set(file_name: str) -> dict[str, list[dict[str, str]]]:
    sets: dict[str, list[dict[str, str]]] = {}
    with (OPEN_DATA / file_name).open(encoding="utf-8") as file:
        for row in csv.DictReader(file):
            sets.setdefault(row["set_id"], []).append(row)
    return sets


def _column(rows: list[dict[str, str]], name: str) -> FloatArray:
    return np.array([float(row[name] or "nan") for row in rows])
