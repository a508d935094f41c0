"""Speed of the assignment, as ratios measured in one run.

    python tests/bench/bench_assignment.py

For each table: molecules a second, the rate at which RDKit alone matches the same patterns on the
same molecules, and their ratio. Then the time of batches of growing size, per molecule, and the
memory that the largest of them adds. Every molecule is new to the memory of `assign`. Time is that
of the processor, so that what else the machine does counts less. Molecules that a table does not
cover cost more, since the missing functional group is put into words.
"""

import csv
import time
import tracemalloc
from collections.abc import Callable
from pathlib import Path

from groups.structure import assignment
from groups.structure.assignment import assign, assign_many
from groups.structure.molecule import Molecule, molecule_from_smiles
from groups.structure.patterns import ASSIGNED_METHODS, SAME_GROUPS, pattern_set

EXAMPLES = Path(__file__).parents[1] / "reference" / "assignments"


def examples() -> list[Molecule]:
    """Every molecule of the reference lists, once."""
    found: dict[str, Molecule] = {}
    for name in ("remembered", "published_examples"):
        with (EXAMPLES / f"{name}.csv").open(encoding="utf-8") as lines:
            for row in csv.DictReader(lines):
                molecule = molecule_from_smiles(row["smiles"])
                found.setdefault(molecule.canonical_smiles, molecule)
    return list(found.values())


def best_seconds(run: Callable[[], object], repeats: int = 7) -> float:
    """The shortest of several runs: the one least disturbed by the rest of the machine."""
    times = []
    for _ in range(repeats):
        assignment._remembered.cache_clear()
        assignment._functional_groups.cache_clear()
        start = time.process_time()
        run()
        times.append(time.process_time() - start)
    return min(times)


def match_alone(molecules: list[Molecule], method: str) -> None:
    queries = [pattern.fragment.query for pattern in pattern_set(method).patterns]
    for molecule in molecules:
        for query in queries:
            molecule.mol.GetSubstructMatches(query)


def rates(molecules: list[Molecule]) -> None:
    print(f"{len(molecules)} molecules: split, and matched by RDKit alone, molecules/s")
    for method in ASSIGNED_METHODS:
        if method in SAME_GROUPS:
            continue
        assign_many(molecules, method)  # reads the patterns
        ours = len(molecules) / best_seconds(lambda method=method: assign_many(molecules, method))
        covered = [m for m in molecules if assign(m, method).complete]
        whole = len(covered) / best_seconds(lambda m=method, c=covered: assign_many(c, m))
        alone = len(covered) / best_seconds(lambda m=method, c=covered: match_alone(c, m), 3)
        print(
            f"  {method:16s} all {ours:6.0f}  the {len(covered):3d} covered ones {whole:6.0f}"
            f"  matched alone {alone:6.0f}  ratio {whole / alone:.2f}"
        )


def batches() -> None:
    """Alkanols of one size with the hydroxyl group and a branch moved about: all different."""
    print("batches of unifac-dortmund")
    chains = [
        "C" * i + "C(O)" + "C" * j + "C(C)" + "C" * k
        for i in range(1, 21)
        for j in range(20)
        for k in range(1, 21)
    ]
    unique = {m.canonical_smiles: m for m in map(molecule_from_smiles, chains)}
    molecules = list(unique.values())
    for size in (1_000, 2_000, 4_000, len(molecules)):
        batch = molecules[:size]
        atoms = sum(m.mol.GetNumAtoms() for m in batch)
        seconds = best_seconds(lambda b=batch: assign_many(b, "unifac-dortmund"), 3)
        each, an_atom = 1e6 * seconds / size, 1e6 * seconds / atoms
        print(f"  {size:6d} molecules  {each:6.1f} us each  {an_atom:5.2f} us an atom")
    assignment._remembered.cache_clear()
    tracemalloc.start()
    answers = assign_many(molecules, "unifac-dortmund")
    kept, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    print(f"  {len(answers)} answers: {kept / 1e6:.1f} MB kept, {peak / 1e6:.1f} MB at most")


if __name__ == "__main__":
    rates(examples())
    batches()
