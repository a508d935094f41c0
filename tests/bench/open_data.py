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
