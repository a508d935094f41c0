"""The groups of molecules by several tables at once."""

from collections.abc import Sequence

from groups.errors import UnknownMethodError
from groups.parameters import METHODS
from groups.structure.assignment import Assignment, assign
from groups.structure.molecule import Molecule


def assign_groups(
    molecules: Sequence[Molecule], methods: Sequence[str] = METHODS
) -> tuple[dict[str, Assignment], ...]:
    """Split molecules into the groups of each method.

    Parameters
    ----------
    molecules : sequence of Molecule
    methods : sequence of str
        Identifiers of tables, that is all but "ideal" and "auto".

    Returns
    -------
    tuple of dict of str to Assignment
        One dictionary a molecule, in order.

    Raises
    ------
    UnknownMethodError
        If an identifier is not that of a table.

    Source
    ------
    See `groups.structure.assignment`.
    """
    for method in methods:
        if method not in METHODS:
            raise UnknownMethodError(method, METHODS)
    return tuple({method: assign(one, method) for method in methods} for one in molecules)
