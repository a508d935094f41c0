"""Every source against the solvents and solutes of the open gamma-infinity collection."""

import csv
from collections import Counter
from pathlib import Path

import numpy as np
import pytest

from groups.errors import NoVapourPressureError, UnsupportedStructureError
from groups.pure import vapour_pressure
from groups.structure.molecule import molecule_from_smiles

OPEN_DATA = Path(__file__).parents[4] / "shared" / "data" / "gamma_infinity.csv"


@pytest.mark.skipif(not OPEN_DATA.exists(), reason="the open data of ../shared/data are absent")
def test_nearly_every_liquid_of_the_open_collection_has_a_rising_vapour_pressure() -> None:
    with OPEN_DATA.open(encoding="utf-8") as text:
        rows = list(csv.DictReader(text))
    every = sorted({row[k] for row in rows for k in ("solute_smiles", "solvent_smiles")})
    sources: Counter[str] = Counter()
    T = np.linspace(150.0, 1000.0, 200)
    for smiles in every[::3]:
        try:
            curve = vapour_pressure(molecule_from_smiles(smiles))
        except (NoVapourPressureError, UnsupportedStructureError):
            sources["none"] += 1
            continue
        sources[curve.source] += 1
        assert np.all(np.diff(curve.ln_kPa(T)) > 0.0), smiles
        assert 0.0 < curve.uncertainty_ln < 5.0, smiles
    # Metals are refused and a tallow-like C87 alkane and phosphates have no estimate: 1 %.
    assert sources["none"] <= 0.02 * sources.total()
    assert sources["published"] >= 0.75 * sources.total()  # these liquids are well known
