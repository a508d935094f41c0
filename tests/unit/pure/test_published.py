"""Choosing among published curves."""

import numpy as np
import pytest

from groups.pure.coefficients import candidates
from groups.pure.published import distance_ln, published_vapour_pressure, slips_of


def test_water_comes_from_its_own_formulation() -> None:
    water = published_vapour_pressure("7732-18-5")
    assert water is not None
    assert "IAPWS" in water.citation
    assert water.critical_temperature_K == 647.096


def test_an_unknown_compound_has_none() -> None:
    assert published_vapour_pressure("0-00-0") is None


@pytest.mark.parametrize("T", [260.0, 300.0, 350.0, 500.0])
def test_a_curve_is_taken_that_spans_the_temperature(T: float) -> None:
    for cas in ("64-17-5", "71-43-2", "62-53-3", "67-66-3"):
        if any(c.range_K[0] <= T <= c.range_K[1] for c in candidates(cas)):
            curve = published_vapour_pressure(cas, (T, T))
            assert curve is not None and not curve.extrapolated(T)


def test_far_from_every_range_the_nearest_is_taken() -> None:
    curve = published_vapour_pressure("64-17-5", (2000.0, 2001.0))
    assert curve is not None
    assert curve.range_K[1] == max(c.range_K[1] for c in candidates("64-17-5"))


def test_pyridine_is_spared_the_slip_of_one_collection() -> None:
    # That curve gives 311 kPa at the boiling point of 388.4 K (CRC Handbook, from memory).
    slip = slips_of("110-86-1")["landolt-antoine"]
    assert slip.rejected and slip.disagreement_ln > 1.0
    curve = published_vapour_pressure("110-86-1")
    assert curve is not None
    assert curve.boiling_temperature(101.325) == pytest.approx(388.4, abs=0.5)
    assert slip.reason in curve.notes


def test_a_rejected_curve_is_not_used_even_where_it_stands_alone() -> None:
    alone = [
        cas
        for cas in ("75-89-8", "542-10-9", "355-25-9")
        if len(candidates(cas)) == 1 and slips_of(cas)["landolt-antoine"].rejected
    ]
    assert alone
    assert all(published_vapour_pressure(cas) is None for cas in alone)


def test_disagreement_of_the_collections_widens_the_uncertainty() -> None:
    # Ethylene glycol: two Wagner equations differ by several per cent.
    curve = published_vapour_pressure("107-21-1")
    offered = candidates("107-21-1")
    assert curve is not None
    largest = max(d for c in offered[1:] if (d := distance_ln(offered[0], c)) is not None)
    assert curve.uncertainty_ln >= min(largest / np.sqrt(2.0), 0.1) * 0.99 > 0.014


def test_distance_is_symmetric_and_zero_to_itself() -> None:
    a, b = candidates("64-17-5")[:2]
    assert distance_ln(a, a) == 0.0
    assert distance_ln(a, b) == pytest.approx(distance_ln(b, a), rel=1e-12)
