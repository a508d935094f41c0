"""Which vapour a mixture needs."""

import sys
from pathlib import Path

import numpy as np
import pytest

sys.path.insert(0, str(Path(__file__).parent))

from vapour_mixtures import systems

from groups.equilibrium import bubble_pressure
from groups.vapour import choose_vapour

X = np.array([[0.2, 0.8], [0.5, 0.5], [0.8, 0.2]])


@pytest.mark.parametrize(
    ("smiles", "T", "kind"),
    [
        (("CCCCCC", "CCCCCCC"), 298.15, "ideal"),  # 10 kPa of alkanes
        (("CC(=O)O", "O"), 298.15, "virial"),  # dimers at 3 kPa already
        (("CCCCCC", "CCCCCCC"), 400.0, "virial"),  # 400 kPa
        (("CCCC", "CCCCC"), 410.0, "psrk"),  # near the critical point of butane
    ],
)
def test_the_need_decides(smiles, T, kind):
    _, real = systems(*smiles)
    states = bubble_pressure(real, T, X)
    assert states.converged.all()
    choice = choose_vapour(
        real.vapour,
        states.temperature_K,
        states.pressure_kPa,
        states.vapour,  # type: ignore[arg-type]
    )
    assert choice.kind == kind
    assert choice.reason.endswith(".")
    if "O" in smiles:
        assert "dimers" in choice.reason and choice.largest_ln_volatility_error > 0.1
