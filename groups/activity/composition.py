"""From group counts and a published table to the arrays of the equations."""

from collections.abc import Mapping, Sequence

import numpy as np

from groups.activity.kernel import MixtureGroups
from groups.arrays import BoolArray, FloatArray, IntArray
from groups.errors import InvalidInputError, MissingParameterError
from groups.parameters import MethodTable


def group_entries(
    parameters: MethodTable, assignments: Sequence[Mapping[int, int]]
) -> tuple[IntArray, IntArray, FloatArray]:
    """Return the group counts of several molecules as flat columns.

    Parameters
    ----------
    parameters : MethodTable
        Published table.
    assignments : sequence of mapping
        One mapping a molecule: subgroup number to count.

    Returns
    -------
    tuple of IntArray, IntArray, FloatArray, each of shape (n_entries,)
        Index of the molecule, index of the subgroup in the table, count.

    Raises
    ------
    InvalidInputError
        For a subgroup number that the table lacks.
    """
    column = {int(number): k for k, number in enumerate(parameters.subgroup_numbers)}
    owners, columns, counts = [], [], []
    for i, assignment in enumerate(assignments):
        for number, count in assignment.items():
            if number not in column:
                raise InvalidInputError(
                    f"Method '{parameters.method}' has no subgroup {number} (component {i}).",
                    cure="Use the subgroup numbers of GET /v1/methods/{id}.",
                    field=f"components[{i}]",
                )
            if not count >= 0:
                raise InvalidInputError(
                    f"A group count must be 0 or more. Got {count} of subgroup {number} "
                    f"(component {i}).",
                    cure="Give each group as often as it occurs in the molecule.",
                    field=f"components[{i}]",
                )
            owners.append(i)
            columns.append(column[number])
            counts.append(count)
    return (
        np.array(owners, dtype=np.int64),
        np.array(columns, dtype=np.int64),
        np.array(counts, dtype=np.float64),
    )


def counts_matrix(parameters: MethodTable, assignments: Sequence[Mapping[int, int]]) -> FloatArray:
    """Return nu, how often each subgroup occurs in each component.

    Parameters
    ----------
    parameters : MethodTable
        Published table.
    assignments : sequence of mapping
        One mapping a component: subgroup number to count.

    Returns
    -------
    FloatArray of shape (n_components, n_subgroups of the table)
        Counts, 1.

    Raises
    ------
    InvalidInputError
        For no component at all, or a subgroup number that the table lacks.
    """
    if not assignments:
        raise InvalidInputError(
            "A mixture needs at least one component. Got none.",
            cure="Give at least one component.",
            field="components",
        )
    owner, column, count = group_entries(parameters, assignments)
    nu = np.zeros((len(assignments), parameters.subgroup_numbers.size))
    nu[owner, column] = count
    return nu


def check_components(volume: FloatArray, area: FloatArray) -> None:
    """Raise for a component without groups, or whose groups all lack a volume or a surface."""
    empty = np.flatnonzero(~((volume > 0.0) & (area > 0.0)))
    if empty.size:
        raise InvalidInputError(
            f"Component {empty[0]} has no groups with a volume and a surface.",
            cure="Give the groups of every component, with counts of at least 1.",
            field=f"components[{empty[0]}]",
        )


def missing_parameters(parameters: MethodTable) -> BoolArray:
    """Return (n_main, n_main), True where a pair lacks a parameter in either direction."""
    absent = np.isnan(parameters.a)
    missing: BoolArray = absent | absent.T
    return missing


def mixture_groups(
    parameters: MethodTable, nu: FloatArray
) -> tuple[MixtureGroups, tuple[int, ...]]:
    """Reduce a table to the main groups that a mixture has.

    A main group whose subgroups here all have Q = 0 (a carbon without hydrogen, say) carries no
    surface: its parameters enter the equations with weight zero, so they are not asked for.

    Parameters
    ----------
    parameters : MethodTable
        Published table.
    nu : FloatArray of shape (n_components, n_subgroups)
        Group counts.

    Returns
    -------
    MixtureGroups
        The arrays of the equations.
    tuple of int
        The main-group numbers, in the order of the arrays.

    Raises
    ------
    MissingParameterError
        Naming every pair of main groups without a published parameter.
    InvalidInputError
        For a component without groups or without surface.
    """
    main_of_subgroup = np.equal.outer(parameters.subgroup_main, np.arange(parameters.a.shape[0]))
    surface = (nu * parameters.Q) @ main_of_subgroup
    volume, area = nu @ parameters.R, surface.sum(axis=1)
    check_components(volume, area)
    present = np.flatnonzero(surface.any(axis=0))
    _check_parameters(parameters, present)
    square = np.ix_(present, present)
    groups = MixtureGroups(
        volume=volume,
        area=area,
        surface=np.ascontiguousarray(surface[:, present]),
        a=parameters.a[square],
        b=parameters.b[square],
        c=parameters.c[square],
        psi=parameters.psi,
        exponent=parameters.combinatorial_exponent,
        staverman_guggenheim=parameters.staverman_guggenheim,
    )
    return groups, tuple(int(number) for number in parameters.main_numbers[present])


def _check_parameters(parameters: MethodTable, present: IntArray) -> None:
    """Raise for the pairs of main groups present that have no published parameter."""
    missing = np.triu(missing_parameters(parameters)[np.ix_(present, present)])
    if not missing.any():
        return
    lower, upper = np.nonzero(missing)
    pairs, words = [], []
    for i, j in zip(present[lower], present[upper], strict=True):
        pairs.append((int(parameters.main_numbers[i]), int(parameters.main_numbers[j])))
        words.append(
            f"{parameters.main_numbers[i]} ({parameters.main_names[i]}) with "
            f"{parameters.main_numbers[j]} ({parameters.main_names[j]})"
        )
    raise MissingParameterError(
        f"Method '{parameters.method}' publishes no parameter for main groups {'; '.join(words)}.",
        method=parameters.method,
        pairs=pairs,
    )
