"""What intervals cost: the batch door of dilute pairs with them against plain predictions.

    python -m tests.bench.bench_intervals

Runs the whole open set through each way and prints seconds (best of three, caches warm, as in a
service that has met the molecules) and ratios. "Plain" is one published table asked for all pairs
and for nothing else; the same for all tables that `auto` weighs is the plain prediction of `auto`.
"""

import time
from collections.abc import Callable

import numpy as np

from groups.activity import ln_gamma_infinite_pairs
from groups.confidence.calibration import TABLES, dilute_answers, dilute_tables
from groups.errors import MixwrightError
from groups.prediction import infinite_dilution
from groups.prediction.infinite_dilution import DilutePair
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule, molecule_from_smiles
from tests.bench.open_data import gamma_infinity

TABLE = "unifac-dortmund-2.0"  # completed: no pair of groups lacks a parameter
REPEATS = 3


def open_pairs() -> list[DilutePair]:
    """All pairs of the open set that are two different molecules."""
    data = gamma_infinity()
    known = {smiles: _molecule(smiles) for smiles in {*data.solute, *data.solvent}}
    rows = zip(data.solute, data.solvent, data.temperature_K, strict=True)
    found = [(known[u], known[v], float(T)) for u, v, T in rows]
    return [(u, v, T) for u, v, T in found if u and v and u.canonical_smiles != v.canonical_smiles]


def _molecule(smiles: str) -> Molecule | None:
    try:
        return molecule_from_smiles(smiles)
    except MixwrightError:
        return None


def plain(pairs: list[DilutePair]) -> None:
    """One table, for the pairs that it covers."""
    covered = [pair for pair in pairs if all(assign(one, TABLE).complete for one in pair[:2])]
    ln_gamma_infinite_pairs(
        TABLE,
        [assign(u, TABLE).counts for u, _, _ in covered],
        [assign(v, TABLE).counts for _, v, _ in covered],
        np.array([T for _, _, T in covered]),
    )


def seconds(call: Callable[[], object]) -> float:
    """Best of a few, in time of the processor: others may be at work beside."""
    call()
    times = []
    for _ in range(REPEATS):
        start = time.process_time()
        call()
        times.append(time.process_time() - start)
    return min(times)


def main() -> None:
    """Print seconds and ratios."""
    pairs = open_pairs()
    one = seconds(lambda: plain(pairs))
    tables = seconds(lambda: dilute_tables(pairs))
    ways: dict[str, float] = {
        f"one table, {TABLE}, numbers alone": one,
        f"all {len(TABLES)} tables, numbers alone (also at 298.15 K)": tables,
        "auto with its widths, in arrays": seconds(lambda: dilute_answers(pairs)),
        f"door, {TABLE}: interval, reasons, evidence": seconds(
            lambda: infinite_dilution(pairs, TABLE)
        ),
        "door, auto: interval, reasons, evidence": seconds(lambda: infinite_dilution(pairs)),
    }
    print(f"{len(pairs)} pairs")
    for name, took in ways.items():
        print(f"{name:58s} {took:7.3f} s  {took / one:5.1f} x one, {took / tables:5.2f} x all")


if __name__ == "__main__":
    main()
