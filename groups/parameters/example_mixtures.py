"""What each table says of mixtures of example molecules, where that is absurd.

Where one table alone puts the simplest mixture of two groups far outside anything measured, the
pair of groups is at fault. The findings are kept in ``tables/example_mixtures.csv``; the command
that writes the file predicts the mixtures, this module lays the blame.
"""

import csv
import io
import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from itertools import product

from groups.errors import DataError
from groups.parameters.csv_file import integer_of, text_of
from groups.parameters.record import tables_folder

EXAMPLE_MIXTURES_FILE = "example_mixtures.csv"
COLUMNS = ("method", "i", "j", "solute", "solvent", "ln_gamma_inf", "others_ln_gamma_inf")

# The open gamma-infinity data (16 thousand values) reach from -3.3 to 8.3 in ln gamma, in water to
# 13.4; twice as far down, half as far again up, and nearly twice as far in water leave ample room.
LOWEST_LN_GAMMA, HIGHEST_LN_GAMMA, HIGHEST_LN_GAMMA_IN_WATER = -7.0, 12.0, 25.0
# A factor of 50 from what the other tables agree on, and in at least a quarter of the simplest
# mixtures of the pair, or the example and not the pair is special.
FURTHEST_FROM_OTHERS, SMALLEST_SHARE = math.log(50.0), 0.25

Pair = tuple[int, int]


@dataclass(frozen=True, slots=True)
class ExampleMixture:
    """One solute at infinite dilution in one solvent, by one table and by the others."""

    solute: str
    solvent: str
    solute_mains: frozenset[int]
    solvent_mains: frozenset[int]
    ln_gamma_inf: float
    others_ln_gamma_inf: float

    @property
    def absurd(self) -> bool:
        """Beyond all measured values, and far beyond what the other tables say."""
        highest = HIGHEST_LN_GAMMA_IN_WATER if self.solvent == "O" else HIGHEST_LN_GAMMA
        apart = abs(self.ln_gamma_inf - self.others_ln_gamma_inf)
        inside = LOWEST_LN_GAMMA <= self.ln_gamma_inf <= highest
        return not inside and apart > FURTHEST_FROM_OTHERS


@dataclass(frozen=True, slots=True)
class AbsurdMixture:
    """A pair (i < j) at fault, with the worst of its simplest mixtures."""

    method: str
    i: int
    j: int
    solute: str
    solvent: str
    ln_gamma_inf: float
    others_ln_gamma_inf: float


def absurd_pairs(method: str, mixtures: Iterable[ExampleMixture]) -> Iterator[AbsurdMixture]:
    """Pairs whose simplest mixtures are absurd.

    Parameters
    ----------
    method : str
        The table that predicted.
    mixtures : iterable of ExampleMixture
        Any order.

    Yields
    ------
    AbsurdMixture
        Ascending by pair.

    Notes
    -----
    The simplest mixtures of a pair are those with the fewest main groups that hold one of the pair
    in the solute and the other in the solvent only: phenol in tetrachloromethane tells of ACOH with
    CCl4, while ACH with CCl4 is told by benzene.
    """
    of_pair: dict[Pair, list[ExampleMixture]] = {}
    for mixture in mixtures:
        for pair in _told_pairs(mixture):
            known = of_pair.get(pair)
            size = _size(mixture)
            if known is None or size < _size(known[0]):
                of_pair[pair] = [mixture]
            elif size == _size(known[0]):
                known.append(mixture)
    for pair, simplest in sorted(of_pair.items()):
        absurd = [mixture for mixture in simplest if mixture.absurd]
        if len(absurd) >= SMALLEST_SHARE * len(simplest):
            worst = max(absurd, key=lambda m: abs(m.ln_gamma_inf - m.others_ln_gamma_inf))
            yield AbsurdMixture(
                method,
                *pair,
                worst.solute,
                worst.solvent,
                worst.ln_gamma_inf,
                worst.others_ln_gamma_inf,
            )


def _size(mixture: ExampleMixture) -> int:
    return len(mixture.solute_mains | mixture.solvent_mains)


def _told_pairs(mixture: ExampleMixture) -> set[Pair]:
    """Pairs of which each member is in one of the two molecules only."""
    only_solute = mixture.solute_mains - mixture.solvent_mains
    only_solvent = mixture.solvent_mains - mixture.solute_mains
    return {(min(i, j), max(i, j)) for i, j in product(only_solute, only_solvent)}


def absurd_csv(rows: Sequence[AbsurdMixture]) -> str:
    """Text of the file of findings.

    Parameters
    ----------
    rows : sequence of AbsurdMixture
        In the order to be written.

    Returns
    -------
    str
        CSV with a header row.
    """
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    for row in rows:
        values = [f"{row.ln_gamma_inf:.1f}", f"{row.others_ln_gamma_inf:.1f}"]
        writer.writerow([row.method, row.i, row.j, row.solute, row.solvent, *values])
    return text.getvalue()


def read_absurd_mixtures() -> tuple[AbsurdMixture, ...]:
    """The committed findings.

    Returns
    -------
    tuple of AbsurdMixture
        In the order of the file.

    Raises
    ------
    DataError
        If the file is absent or a row is incomplete.
    """
    name = EXAMPLE_MIXTURES_FILE
    try:
        content = (tables_folder() / name).read_text(encoding="utf-8")
    except OSError as error:
        raise DataError(f"{name} cannot be read: {error}") from error
    return tuple(
        AbsurdMixture(
            text_of(row, "method", name),
            integer_of(row, "i", name),
            integer_of(row, "j", name),
            text_of(row, "solute", name),
            text_of(row, "solvent", name),
            float(text_of(row, "ln_gamma_inf", name)),
            float(text_of(row, "others_ln_gamma_inf", name)),
        )
        for row in csv.DictReader(io.StringIO(content))
    )
