"""Random mixtures of the open molecules, for measurements of robustness."""

import csv
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from groups.activity import activity_model
from groups.arrays import FloatArray
from groups.equilibrium import System
from groups.errors import MixwrightError
from groups.pure import VapourPressure, vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule, molecule_from_smiles

DATA = Path(__file__).parents[3] / "shared" / "data" / "gamma_infinity.csv"
#: The completed table reaches every mixture; the fitted ones those whose parameters exist.
METHODS = ("unifac", "unifac-dortmund", "unifac-2.0", "unifac-lle")


@dataclass(frozen=True)
class Case:
    """One flash: what, where, and how much of each."""

    number: int
    method: str
    smiles: tuple[str, ...]
    system: System
    temperature_K: float
    pressure_kPa: float
    feed: FloatArray


@dataclass
class Pool:
    """The molecules, with what has been worked out about them."""

    smiles: list[str]
    molecules: dict[str, Molecule]
    lines: dict[str, VapourPressure | None]

    @classmethod
    def read(cls) -> "Pool":
        """All solutes and solvents of the open set, in a fixed order."""
        with DATA.open(encoding="utf-8") as file:
            rows = list(csv.DictReader(file))
        names = {row[column] for row in rows for column in ("solute_smiles", "solvent_smiles")}
        return cls(sorted(names), {}, {})

    def system(self, smiles: tuple[str, ...], method: str) -> System | None:
        """The mixture by this table, or None where the table or a vapour pressure is lacking."""
        counts, lines = [], []
        for name in smiles:
            if name not in self.lines:
                try:
                    self.molecules[name] = molecule_from_smiles(name)
                    self.lines[name] = vapour_pressure(self.molecules[name])
                except MixwrightError:
                    self.lines[name] = None
            line = self.lines[name]
            if line is None:
                return None
            assignment = assign(self.molecules[name], method)
            if not assignment.complete:
                return None
            counts.append(assignment.counts)
            lines.append(line)
        try:
            return System(activity_model(counts, method), tuple(lines))
        except MixwrightError:
            return None


def cases(count: int, first: int = 0, most: int = 8) -> Iterator[Case]:
    """Cases number `first` and on; each has its own seed, so any part can be run alone."""
    pool = Pool.read()
    for number in range(first, first + count):
        random = np.random.default_rng(number)
        while True:
            n = int(random.integers(2, most + 1))
            smiles = tuple(str(s) for s in random.choice(pool.smiles, n, replace=False))
            # Half of the mixtures hold water: it is what splits.
            if random.random() < 0.5 and "O" not in smiles:
                smiles = ("O", *smiles[1:])
            method = str(random.choice(METHODS))
            system = pool.system(smiles, method)
            if system is not None:
                break
        T = float(random.uniform(260.0, 480.0))
        P = float(np.exp(random.uniform(np.log(1.0), np.log(2000.0))))
        # From even mixtures to traces.
        feed = random.dirichlet(np.full(n, float(random.choice([0.15, 0.5, 2.0]))))
        feed = np.maximum(feed, 1e-12)
        yield Case(number, method, smiles, system, T, P, feed / feed.sum())
