"""Reasons that come from the molecules themselves, whatever the table.

The calibrated interval is wider for such molecules as far as measurements show it, so these
reasons cap no grade: they say why the interval is as wide as it is.
"""

from collections import Counter
from collections.abc import Mapping, Sequence
from itertools import combinations

from groups.confidence.confidence import Reason
from groups.confidence.labels import label
from groups.structure.assignment import Assignment
from groups.structure.facts import molecule_facts
from groups.structure.functional import FunctionalGroup
from groups.structure.molecule import Molecule

LONG_CHAIN_ATOMS = 10  # common practice, no source
SIZE_RATIO = 4.0  # ratio of heavy atoms; common practice, no source
WATER = "O"
CARBON = 6


def polar_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """Neighbouring polar groups and polyfunctional molecules."""
    reasons = []
    for molecule in molecules:
        polar = molecule_facts(molecule).polar_groups
        if molecule_facts(molecule).has_neighbouring_polar_groups:
            reasons.append(
                Reason(
                    "neighbouring_polar_groups",
                    f"In {label(molecule)} polar groups ({_named(polar)}) sit next to each other "
                    "and change one another (induction, internal hydrogen bonds), which group "
                    "methods do not see.",
                    label(molecule),
                )
            )
        elif len(polar) > 1:
            reasons.append(
                Reason(
                    "polyfunctional",
                    f"{label(molecule)} carries {len(polar)} polar groups; most parameters were "
                    "fitted to molecules with one.",
                    label(molecule),
                )
            )
    return reasons


def _named(groups: Sequence[FunctionalGroup]) -> str:
    """The groups by name, each once, with their number where there are several."""
    counts = Counter(group.name for group in groups)
    return ", ".join(name if n == 1 else f"{n} x {name}" for name, n in counts.items())


def polyol_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """Molecules with two or more hydroxyl groups, where every table errs."""
    return [
        Reason(
            "polyol",
            f"{label(molecule)} is a polyol; with every published table such mixtures, above all "
            "with water, can be off by a quarter to two thirds in pressure.",
            label(molecule),
        )
        for molecule in molecules
        if molecule_facts(molecule).is_polyol
    ]


def size_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """Long chains and strong size asymmetry."""
    reasons = [
        Reason(
            "long_chain",
            f"{label(molecule)} has a chain of {molecule_facts(molecule).longest_chain} carbon "
            "atoms; the combinatorial part is uncertain there and the original form overstates "
            "the negative deviation.",
            label(molecule),
        )
        for molecule in molecules
        if molecule_facts(molecule).longest_chain > LONG_CHAIN_ATOMS
    ]
    sizes = [max(1, molecule.mol.GetNumHeavyAtoms()) for molecule in molecules]  # hydrogen has none
    largest, smallest = max(sizes), min(sizes)
    if largest >= SIZE_RATIO * smallest and largest > LONG_CHAIN_ATOMS:
        big, small = molecules[sizes.index(largest)], molecules[sizes.index(smallest)]
        reasons.append(
            Reason(
                "size_asymmetry",
                f"{label(big)} is {largest / smallest:.0f} times the size of {label(small)}; "
                "free-volume effects that no group method holds become felt.",
                f"{label(big)} / {label(small)}",
            )
        )
    return reasons


def water_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """Hydrophobes in water, at whatever dilution the mixture reaches."""
    if all(molecule.canonical_smiles != WATER for molecule in molecules):
        return []
    return [
        Reason(
            "hydrophobe_in_water",
            f"{label(molecule)} and water barely dissolve in each other, and a dilute activity "
            f"coefficient there is the hardest number for a group method. "
            f"{_error_in_water(molecule)}",
            label(molecule),
        )
        for molecule in molecules
        if molecule_facts(molecule).is_hydrophobe
    ]


def _error_in_water(molecule: Molecule) -> str:
    """How far the tables are out for a hydrophobe in water, measured."""
    hydrocarbon = all(atom.GetAtomicNum() == CARBON for atom in molecule.mol.GetAtoms())
    if hydrocarbon and not any(atom.GetIsAromatic() for atom in molecule.mol.GetAtoms()):
        # Against solubilities of pentane, hexane and cyclohexane (tests/reference/prediction).
        return "An alkane's in water comes out too low with every table, by a factor of 10 to 150."
    # Against some 620 open measurements of aromatics, halides and long polar molecules.
    return (
        "In water every table is off by a factor 1.4 or more in half of the open measurements and "
        "by 3 to 9 in every tenth, more often too low than too high."
    )


def isomer_reasons(
    molecules: Sequence[Molecule], assignments: Sequence[Assignment]
) -> list[Reason]:
    """Components of one mixture that the table sees as the same groups."""
    return [
        Reason(
            "isomers_not_told_apart",
            f"{label(first)} and {label(second)} consist of the same groups; the method sees no "
            "difference between them but their vapour pressures.",
            f"{label(first)} / {label(second)}",
        )
        for (first, a), (second, b) in combinations(zip(molecules, assignments, strict=True), 2)
        if a.counts == b.counts
    ]


def ambiguity_reasons(
    molecules: Sequence[Molecule], changes_ln_gamma: Mapping[str, float]
) -> list[Reason]:
    """Molecules whose other, equally good group covers change ln gamma.

    Parameters
    ----------
    molecules : sequence of Molecule
    changes_ln_gamma : mapping of str to float
        Canonical SMILES to the largest change in ln gamma that another cover brings.
    """
    return [
        Reason(
            "ambiguous_assignment",
            f"{label(molecule)} can be split into groups in another, equally good way, which "
            f"changes ln gamma by {changes_ln_gamma[molecule.canonical_smiles]:.2f}.",
            label(molecule),
        )
        for molecule in molecules
        if changes_ln_gamma.get(molecule.canonical_smiles, 0.0) > 0.1
    ]
