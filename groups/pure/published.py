"""Which of the published curves of a compound is taken, and how far it is to be believed."""

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from importlib.resources import files

import numpy as np

from groups.pure.coefficients import Candidate, candidates
from groups.pure.saturation import VapourPressure

USUAL_RANGE_K = (250.0, 450.0)
"""The span judged when the caller names none: ordinary distillation; common practice, no source."""

_ENOUGH = 0.95
"""A source spans a range when it covers this share of the best coverage on offer."""

_SQRT_2 = float(np.sqrt(2.0))
_HIGHEST_LN_KPA = float(np.log(1000.0))
_SHARED_K = 5.0
"""Two curves that share less than this are not compared."""


@dataclass(frozen=True, slots=True)
class Slip:
    """One published curve that others contradict.

    Parameters
    ----------
    source : str
        Key of the collection.
    rejected : bool
        True where it is outvoted and never used; False where it is only disputed.
    disagreement_ln : float
        Largest root mean square difference of ln P from a witness.
    reason : str
        In words.
    """

    source: str
    rejected: bool
    disagreement_ln: float
    reason: str


_SOUND = Slip("", False, 0.0, "")


@lru_cache(maxsize=1)
def _all_slips() -> Mapping[str, Mapping[str, Slip]]:
    text = (files("groups.pure") / "tables" / "published_slips.csv").read_text("utf-8")
    found: dict[str, dict[str, Slip]] = {}
    for row in csv.DictReader(text.splitlines()):
        slip = Slip(
            row["source"],
            row["verdict"] == "rejected",
            float(row["disagreement_ln"]),
            row["reason"],
        )
        found.setdefault(row["cas"], {})[slip.source] = slip
    return found


def slips_of(cas: str) -> Mapping[str, Slip]:
    """What the audit holds against the published curves of a compound.

    Parameters
    ----------
    cas : str
        CAS registry number.

    Returns
    -------
    mapping of collection key to Slip

    Source
    ------
    groups/pure/tables/published_slips.csv, written by `python -m groups.pure.audit --write`.
    """
    return _all_slips().get(cas, {})


def published_vapour_pressure(
    cas: str, temperature_K: tuple[float, float] | None = None
) -> VapourPressure | None:
    """The published curve that spans the temperatures best, by precedence among equals.

    Parameters
    ----------
    cas : str
        CAS registry number.
    temperature_K : tuple of float, optional
        Lowest and highest temperature needed, K; 250 to 450 K where not given.

    Returns
    -------
    VapourPressure or None
        None where no collection holds the compound.
    """
    slips = slips_of(cas)
    offered = tuple(c for c in candidates(cas) if not slips.get(c.record.key, _SOUND).rejected)
    if not offered:
        return None
    chosen = _widest(offered, temperature_K or USUAL_RANGE_K)
    return VapourPressure(
        source="published",
        equation=chosen.record.equation,
        citation=chosen.record.citation,
        coefficients=chosen.coefficients,
        range_K=chosen.range_K,
        curve=chosen.curve,
        uncertainty_ln=_uncertainty(chosen, offered, slips.get(chosen.record.key, _SOUND)),
        critical_temperature_K=chosen.critical_temperature_K,
        critical_pressure_kPa=chosen.critical_pressure_kPa,
        notes=tuple(
            s.reason for s in slips.values() if s.rejected or s.source == chosen.record.key
        ),
    )


def _uncertainty(chosen: Candidate, offered: tuple[Candidate, ...], doubt: Slip) -> float:
    """The collection's usual scatter, or this compound's disagreement where that is larger."""
    apart = [distance_ln(chosen, other) for other in offered if other is not chosen]
    known = [d / _SQRT_2 for d in apart if d is not None]  # the difference of two has both errors
    return max(chosen.record.uncertainty_ln, doubt.disagreement_ln, *known)


def distance_ln(one: Candidate, other: Candidate) -> float | None:
    """Root mean square difference of ln P over the common range, from 1 to 1000 kPa.

    Parameters
    ----------
    one, other : Candidate

    Returns
    -------
    float or None
        None where they share less than 5 K.
    """
    low = max(one.range_K[0], other.range_K[0])
    high = min(one.range_K[1], other.range_K[1])
    if high - low < _SHARED_K:
        return None
    grid = np.linspace(low, high, 31)
    a, b = one.curve.ln_kPa(grid), other.curve.ln_kPa(grid)
    counted = (np.maximum(a, b) > 0.0) & (np.minimum(a, b) < _HIGHEST_LN_KPA)
    return float(np.sqrt(np.mean((a - b)[counted] ** 2))) if counted.sum() >= 3 else None


def _widest(offered: tuple[Candidate, ...], span_K: tuple[float, float]) -> Candidate:
    """First by precedence among those whose coverage is close to the best."""
    low, high = span_K
    if high <= low:  # one temperature: widen it so that coverage can be compared
        low, high = low - 0.5, high + 0.5
    covered = [c.covered_K((low, high)) for c in offered]
    best = max(covered)
    if best == 0.0:  # none reaches: take the nearest
        return min(offered, key=lambda c: max(c.range_K[0] - high, low - c.range_K[1]))
    return next(c for c, k in zip(offered, covered, strict=True) if k >= _ENOUGH * best)
