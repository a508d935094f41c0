"""Which published vapour pressures contradict the others: the audit behind published_slips.csv.

Witnesses for one compound are its published curves and its published boiling point. Two of them
agree when they differ by less than a bound. A curve that is contradicted is rejected when the
witness against it has more independent support than the curve itself, and disputed when it has as
much. One curve copied from another counts once.

    python -m groups.pure.audit            print what the audit finds
    python -m groups.pure.audit --write    and write tables/published_slips.csv
"""

import csv
import hashlib
import re
import sys
from collections.abc import Iterable
from dataclasses import dataclass
from io import StringIO
from pathlib import Path

import numpy as np

from groups.pure.coefficients import Candidate, candidates, every_registry_number, name_of
from groups.pure.constants import published_boiling
from groups.pure.corresponding_states import ATMOSPHERE_KPA
from groups.pure.published import distance_ln

CURVE_BOUND_LN = 0.10
"""Two evaluated curves that differ by more than this (10 % in pressure) contradict each other.

Nine tenths of all pairs of collections agree within 0.05.
"""

BOILING_BOUND_LN = 0.25
"""A curve that misses the boiling point by more than this, about 7 K, contradicts it."""

_COPY_LN = 1e-3
_REACH_K = 15.0
"""A curve may be asked for the boiling point this far outside its range."""

TABLE = Path(__file__).parent / "tables" / "published_slips.csv"
COLUMNS = ("cas", "name", "source", "verdict", "disagreement_ln", "witness", "reason")


@dataclass(frozen=True, slots=True)
class Finding:
    """One row of published_slips.csv."""

    cas: str
    name: str
    source: str
    verdict: str
    disagreement_ln: float
    witness: str
    reason: str


@dataclass(frozen=True, slots=True)
class _Witness:
    key: str
    support: int
    differences: tuple[float | None, ...]  # to each curve


def audit_compound(cas: str) -> tuple[Finding, ...]:
    """Contradicted curves of one compound.

    Parameters
    ----------
    cas : str
        CAS registry number.

    Returns
    -------
    tuple of Finding
        In the order of precedence of the collections.
    """
    curves = candidates(cas)
    witnesses = _witnesses(cas, curves)
    found = []
    for place, curve in enumerate(curves):
        against = [w for w in witnesses if _contradicts(w, place)]
        if not against:
            continue
        strongest = max(against, key=lambda w: w.support)
        own = next(w for w in witnesses if w.key == curve.record.key)
        if strongest.support >= own.support:
            found.append(_finding(cas, own, strongest, place))
    return tuple(found)


def _witnesses(cas: str, curves: tuple[Candidate, ...]) -> list[_Witness]:
    """Every curve and the boiling point, with the number of independent others that agree."""
    table = [[distance_ln(a, b) for b in curves] for a in curves]
    boiling, n_handbooks = _boiling_differences(cas, curves)
    witnesses: list[_Witness] = []
    for curve, differences in zip(curves, table, strict=True):
        place = len(witnesses)
        agree = [d for k, d in enumerate(differences) if k != place and _agrees(d, CURVE_BOUND_LN)]
        copies = sum(d is not None and d < _COPY_LN for d in agree)
        support = len(agree) - copies + int(_agrees(boiling[place], BOILING_BOUND_LN))
        witnesses.append(_Witness(curve.record.key, support, tuple(differences)))
    if n_handbooks:
        agreeing = sum(_agrees(d, BOILING_BOUND_LN) for d in boiling)
        support = agreeing + n_handbooks - 1
        witnesses.append(_Witness("boiling point", support, tuple(boiling)))
    return witnesses


def _boiling_differences(cas: str, curves: tuple[Candidate, ...]) -> tuple[list[float | None], int]:
    """How far each curve misses one atmosphere at the boiling point, and how many say so."""
    published = published_boiling(cas)
    if published is None:
        return [None] * len(curves), 0
    T = published.value
    misses: list[float | None] = []
    for curve in curves:
        if not curve.range_K[0] - _REACH_K <= T <= curve.range_K[1] + _REACH_K:
            misses.append(None)
            continue
        edge = np.clip(T, *curve.range_K)
        steep = curve.curve.slope(edge) * edge**2
        ln_P = curve.curve.ln_kPa(edge) + steep * (1.0 / edge - 1.0 / T)
        misses.append(abs(float(ln_P) - float(np.log(ATMOSPHERE_KPA))))
    return misses, published.source.count(";") + 1


def _agrees(difference: float | None, bound: float) -> bool:
    return difference is not None and difference <= bound


def _contradicts(witness: _Witness, place: int) -> bool:
    difference = witness.differences[place]
    bound = BOILING_BOUND_LN if witness.key == "boiling point" else CURVE_BOUND_LN
    return difference is not None and difference > bound


def _finding(cas: str, own: _Witness, strongest: _Witness, place: int) -> Finding:
    difference = strongest.differences[place]
    assert difference is not None  # a witness that contradicts has a difference
    outvoted = strongest.support > own.support
    what = f"differs from {strongest.key} by {difference:.2f} in ln P"
    why = f"independent support {strongest.support} against {own.support}"
    verdict = "rejected" if outvoted else "disputed"
    return Finding(
        cas,
        name_of(cas),
        own.key,
        verdict,
        round(difference, 3),
        strongest.key,
        f"{own.key} {what}: {why}",
    )


def audit(registry_numbers: Iterable[str] | None = None) -> tuple[Finding, ...]:
    """Contradicted curves of many compounds.

    Parameters
    ----------
    registry_numbers : iterable of str, optional
        All that any collection holds, where not given.

    Returns
    -------
    tuple of Finding
        Sorted by CAS number.
    """
    chosen = every_registry_number() if registry_numbers is None else registry_numbers
    return tuple(finding for cas in sorted(chosen) for finding in audit_compound(cas))


def as_csv(findings: Iterable[Finding]) -> str:
    """The text of published_slips.csv.

    Parameters
    ----------
    findings : iterable of Finding

    Returns
    -------
    str
    """
    out = StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(COLUMNS)
    for finding in findings:
        writer.writerow([getattr(finding, column) for column in COLUMNS])
    return out.getvalue()


def main(arguments: list[str]) -> None:
    """Print the findings, and write them where asked to.

    Parameters
    ----------
    arguments : list of str
        "--write" or nothing.
    """
    text = as_csv(audit())
    if "--write" in arguments:
        TABLE.write_text(text, encoding="utf-8")
        _renew_record(text)
    sys.stdout.write(text)


def _renew_record(text: str) -> None:
    """Bring rows and checksum of the record beside the table up to date."""
    path = TABLE.with_suffix(".toml")
    record = path.read_text(encoding="utf-8")
    checksum = hashlib.sha256(text.encode()).hexdigest()
    record = re.sub(r"(?m)^rows = .*$", f"rows = {len(text.splitlines()) - 1}", record)
    path.write_text(re.sub(r"(?m)^sha256 = .*$", f'sha256 = "{checksum}"', record), "utf-8")


if __name__ == "__main__":
    main(sys.argv[1:])
