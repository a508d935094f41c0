"""Measure the probabilities of azeotropes, and the intervals of their place, against handbooks.

    python -m tests.bench.measure_azeotrope_chances

For every binary of tests/reference/equilibrium/azeotropes.csv: the probability of an azeotrope at
101.325 kPa and whether the 90 % intervals of its composition and temperature hold the handbook's.
Last the Brier score: the mean square of probability less outcome, 0.25 for one who always says a
half, 0 for one who is always sure and right.
"""

import csv
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from groups.confidence import Interval
from groups.prediction import AzeotropeChance, Component, azeotropes
from groups.structure.molecule import molecule_from_smiles

HANDBOOK = Path(__file__).resolve().parents[1] / "reference/equilibrium/azeotropes.csv"
ATMOSPHERE_KPA = 101.325


@dataclass(frozen=True, slots=True)
class Judged:
    """One handbook binary and what was said of it."""

    name: str
    x1: float | None  # handbook; None where there is no azeotrope
    temperature_K: float | None
    chance: AzeotropeChance

    @property
    def x1_inside(self) -> bool:
        """Whether the interval of the composition holds the handbook's value."""
        return _holds(self.chance.x1, self.x1)

    @property
    def temperature_inside(self) -> bool:
        """Whether the interval of the temperature holds the handbook's value."""
        return _holds(self.chance.temperature_K, self.temperature_K)


def _holds(interval: Interval | None, value: float | None) -> bool:
    return interval is not None and value is not None and interval.lower <= value <= interval.upper


def judged() -> list[Judged]:
    """All binaries of the handbook file."""
    with HANDBOOK.open(encoding="utf-8") as file:
        return [_judged(row) for row in csv.DictReader(file)]


def _judged(row: dict[str, str]) -> Judged:
    pair = [Component(molecule_from_smiles(row[name])) for name in ("smiles1", "smiles2")]
    [chance] = azeotropes(pair, pressure_kPa=ATMOSPHERE_KPA).chances
    x1, temperature = (float(row[k]) if row[k] else None for k in ("x1", "temperature_K"))
    return Judged(f"{row['name1']} / {row['name2']}", x1, temperature, chance)


def brier_score(found: list[Judged]) -> float:
    """Mean square of probability less outcome."""
    return float(np.mean([(one.chance.probability - (one.x1 is not None)) ** 2 for one in found]))


def main() -> None:
    """Print one line a binary, and the summary."""
    found = judged()
    for one in found:
        place = one.chance.x1
        said = "" if place is None else f"x1 {place.lower:.3f} to {place.upper:.3f}"
        handbook = "none" if one.x1 is None else f"{one.x1:.3f}"
        print(
            f"{one.name:32s} probability {one.chance.probability:.2f}  {said:22s} "
            f"handbook {handbook:6s} {'inside' if one.x1_inside else ''}"
        )
    present = [one for one in found if one.x1 is not None]
    absent = [one for one in found if one.x1 is None]
    print(f"x1 inside {sum(one.x1_inside for one in present)} of {len(present)}")
    print(f"T inside {sum(one.temperature_inside for one in present)} of {len(present)}")
    for name, rows in (("present", present), ("absent", absent)):
        print(f"mean probability where {name}: {mean_probability(rows):.3f}")
    print(f"Brier score {brier_score(found):.3f}")


def mean_probability(found: list[Judged]) -> float:
    """Mean probability of an azeotrope."""
    return float(np.mean([one.chance.probability for one in found]))


if __name__ == "__main__":
    main()
