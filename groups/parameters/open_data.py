"""What open measurements say about each pair of main groups, as committed statistics.

Only counts and errors are kept, in ``tables/open_data.csv``; the measurements themselves are read
by the command that writes the file and are no part of the project.
"""

import csv
import io
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.errors import DataError
from groups.parameters.csv_file import integer_of, text_of
from groups.parameters.record import tables_folder

OPEN_DATA_FILE = "open_data.csv"
COLUMNS = (
    "method",
    "i",
    "j",
    "points",
    "systems",
    "system_error",
    "mean_error",
    "others_error",
    "blow_up",
)

# A blow-up: e^1 = 2.7-fold error in the median system, ten times the scatter of repeated
# measurements (about 0.1), and at least twice the error of the other tables on the same points, so
# that the cause is this table and not the mixture. Few points or one system could be wrong data, or
# the work of another pair: hence the median over systems.
BLOW_UP_RATIO = 2.0
# (least error, fewest points, fewest systems): the larger the error, the fewer witnesses it needs.
BLOW_UPS = ((1.0, 8, 3), (2.0, 3, 2), (3.0, 3, 1))

Pair = tuple[int, int]


@dataclass(frozen=True, slots=True)
class PairEvidence:
    """Errors of ln gamma at infinite dilution over the points whose mixtures hold a pair.

    `system_error` is the median over systems of each system's mean absolute error, `mean_error`
    the mean over points with its sign, `others_error` the median over systems of what the other
    tables (the median of them) get on the same points.
    """

    method: str
    i: int
    j: int
    points: int
    systems: int
    system_error: float
    mean_error: float
    others_error: float
    blow_up: bool


@dataclass(frozen=True, slots=True)
class MeasuredPoint:
    """One measurement as one table sees it."""

    pairs: frozenset[Pair]
    system: str
    error: float
    others_abs_error: float


def pair_evidence(method: str, points: Sequence[MeasuredPoint]) -> tuple[PairEvidence, ...]:
    """Statistics of every pair, and the pairs that must be blamed.

    Parameters
    ----------
    method : str
        The table that predicted.
    points : sequence of MeasuredPoint
        Each with the main-group pairs (i < j) in its mixture, a name of its system, the error
        (predicted minus measured ln gamma), and the median absolute error of the other tables.

    Returns
    -------
    tuple of PairEvidence
        Ascending by pair.

    Notes
    -----
    A bad pair spoils every other pair that shares its mixtures. So blame is laid one pair at a
    time: the worst pair first, then its points are set aside and the rest is looked at again.
    """
    systems = _by_system(points)
    pairs = sorted({pair for system in systems for pair in system.pairs})
    holds = np.array([[pair in system.pairs for system in systems] for pair in pairs])
    count = np.array([len(system.errors) for system in systems])
    error = np.array([np.abs(system.errors).mean() for system in systems])
    signed = np.array([np.sum(system.errors) for system in systems])
    others = np.array([np.mean(system.others) for system in systems])
    blamed = set(_blamed(holds, count, error, others))
    return tuple(
        PairEvidence(
            method,
            *pair,
            points=int(count[mask].sum()),
            systems=int(mask.sum()),
            system_error=float(np.median(error[mask])),
            mean_error=float(signed[mask].sum() / count[mask].sum()),
            others_error=float(np.median(others[mask])),
            blow_up=row in blamed,
        )
        for row, (pair, mask) in enumerate(zip(pairs, holds, strict=True))
    )


@dataclass(frozen=True, slots=True)
class _System:
    """All points of one solute in one solvent."""

    pairs: frozenset[Pair]
    errors: list[float]
    others: list[float]


def _by_system(points: Sequence[MeasuredPoint]) -> list[_System]:
    systems: dict[str, _System] = {}
    for point in points:
        system = systems.setdefault(point.system, _System(point.pairs, [], []))
        system.errors.append(point.error)
        system.others.append(point.others_abs_error)
    return list(systems.values())


def _blamed(
    holds: BoolArray, count: IntArray, error: FloatArray, others: FloatArray
) -> Iterator[int]:
    """Rows of `holds` that blow up, the worst first, each judged without the ones before."""
    left = np.ones(len(error), dtype=np.bool_)
    while True:
        worst, worst_error = -1, 0.0
        for row, mask in enumerate(holds & left):
            if not mask.any():
                continue
            size, points, systems = float(np.median(error[mask])), count[mask].sum(), mask.sum()
            refuted = any(
                size > least and points >= fewest_points and systems >= fewest_systems
                for least, fewest_points, fewest_systems in BLOW_UPS
            )
            singular = size > BLOW_UP_RATIO * float(np.median(others[mask]))
            if refuted and singular and size > worst_error:
                worst, worst_error = row, size
        if worst < 0:
            return
        yield worst
        left &= ~holds[worst]


def evidence_csv(evidence: Sequence[PairEvidence]) -> str:
    """Text of the file of statistics.

    Parameters
    ----------
    evidence : sequence of PairEvidence
        Rows in the order to be written.

    Returns
    -------
    str
        CSV with a header row; errors to three decimals, the data carry no more.
    """
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    for row in evidence:
        errors = (row.system_error, row.mean_error, row.others_error)
        shown = [f"{value:.3f}" for value in errors]
        head = [row.method, row.i, row.j, row.points, row.systems]
        writer.writerow([*head, *shown, "yes" if row.blow_up else "no"])
    return text.getvalue()


def read_open_data() -> Mapping[tuple[str, int, int], PairEvidence]:
    """The committed statistics.

    Returns
    -------
    mapping of (str, int, int) to PairEvidence
        By method and main-group numbers (i < j).

    Raises
    ------
    DataError
        If the file is absent or a row is incomplete.
    """
    name = OPEN_DATA_FILE
    try:
        content = (tables_folder() / name).read_text(encoding="utf-8")
    except OSError as error:
        raise DataError(f"{name} cannot be read: {error}") from error
    evidence = {}
    for row in csv.DictReader(io.StringIO(content)):
        method = text_of(row, "method", name)
        i, j = integer_of(row, "i", name), integer_of(row, "j", name)
        evidence[method, i, j] = PairEvidence(
            method,
            i,
            j,
            points=integer_of(row, "points", name),
            systems=integer_of(row, "systems", name),
            system_error=float(text_of(row, "system_error", name)),
            mean_error=float(text_of(row, "mean_error", name)),
            others_error=float(text_of(row, "others_error", name)),
            blow_up=text_of(row, "blow_up", name) == "yes",
        )
    return evidence
