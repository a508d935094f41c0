"""Mixtures far beyond where their parameters mean anything, whose boiling curves have tears.

Found by random search: at these pressures the boiling temperatures run to 1,000 K and more, the
extrapolated activity coefficients fall faster than the vapour pressures rise, and some liquids
have no boiling point at all. The door still answers; the missing points are blank and told.
"""

import numpy as np
import pytest

from groups.prediction import azeotropes, diagram
from tests.unit.prediction.mixtures import mixture

TORN = [
    ("CCCCCCCCCCCCC", "Cc1ccccc1N", 474.65586870370305, "unifac-dortmund"),
    ("CCCOCCO", "ClCC(Cl)(Cl)Cl", 2558.2114523866085, "auto"),
    ("CC(C#N)CCC#N", "CNC=O", 32255.513069356803, "auto"),
]


@pytest.mark.parametrize(("first", "second", "pressure_kPa", "method"), TORN)
def test_a_diagram_with_a_tear_is_answered_with_blanks(first, second, pressure_kPa, method):
    answer = diagram(
        "Txy", mixture(first, second), pressure_kPa=pressure_kPa, points=41, method=method
    )
    drawn = answer.diagram
    known = np.isfinite(drawn.temperature_K + drawn.y1)
    assert known.tolist() == [text is None for text in drawn.failure]
    assert known[0] and known[-1]  # the pure ends boil
    if not known.all():
        assert "not_converged" in {reason.code for reason in answer.confidence.reasons}
    assert answer.confidence.grade == "low"


@pytest.mark.parametrize(("first", "second", "pressure_kPa", "method"), TORN)
def test_azeotropes_over_a_tear_are_verified_or_left_out(first, second, pressure_kPa, method):
    found = azeotropes(mixture(first, second), pressure_kPa=pressure_kPa, method=method)
    for one in found.azeotropes:
        assert one.pressure_kPa == pytest.approx(pressure_kPa, rel=1e-8)
        assert 40.0 <= one.temperature_K <= 2000.0
