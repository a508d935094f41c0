"""From assignments to the schemas."""

from collections.abc import Mapping

from api.answers import identity
from api.molecules_in import Refused
from api.problems import problem_of_error
from api.schemas.molecule import (
    AlternativeGroup,
    GroupAssignment,
    GroupOccurrence,
    MoleculeResult,
)
from groups.structure.assignment import Assignment
from groups.structure.molecule import Molecule


def molecule_result(molecule: Molecule, assignments: Mapping[str, Assignment]) -> MoleculeResult:
    """One molecule and its groups by method."""
    return MoleculeResult(
        **dict(identity(molecule)),
        assignments={method: assignment_out(found) for method, found in assignments.items()},
    )


def refused_result(refused: Refused) -> MoleculeResult:
    """The place of a molecule that cannot be taken."""
    return MoleculeResult(
        canonical_smiles=None,
        name=None,
        cas=None,
        formula=None,
        molar_mass_g_mol=None,
        assignments={},
        problem=problem_of_error(refused.error, refused.field),
    )


def assignment_out(found: Assignment) -> GroupAssignment:
    """The groups of one molecule in one method."""
    return GroupAssignment(
        complete=found.complete,
        groups=[
            GroupOccurrence(
                subgroup=group.subgroup,
                number=group.number,
                main_group=group.main_group,
                main_number=group.main_number,
                count=group.count,
                atoms=[list(atoms) for atoms in group.atoms],
            )
            for group in found.groups
        ],
        unassigned_atoms=list(found.unassigned_atoms),
        explanation=found.explanation,
        alternatives=[
            [AlternativeGroup(number=number, count=count) for number, count in cover]
            for cover in found.alternatives
        ],
    )
