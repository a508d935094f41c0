"""What every door checks before it computes: ranges, sums, shapes, duplicates."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.errors import (
    DuplicateComponentError,
    FractionSumError,
    InvalidInputError,
    OutOfRangeError,
    ShapeError,
)
from groups.structure.molecule import Molecule

# Wide enough for any liquid mixture of molecules, narrow enough to catch a wrong unit.
TEMPERATURE_RANGE_K = (100.0, 1000.0)
PRESSURE_RANGE_KPA = (1e-3, 1e5)
SUM_TOLERANCE = 1e-6


def check_components(molecules: Sequence[Molecule], *, least: int = 1, most: int = 20) -> None:
    """Refuse too few or too many components and any given twice.

    Parameters
    ----------
    molecules : sequence of Molecule
    least, most : int
        Allowed number of components.

    Raises
    ------
    ShapeError
        If there are too few or too many.
    DuplicateComponentError
        If a molecule stands twice.
    """
    if not least <= len(molecules) <= most:
        allowed = f"{least} to {most}" if least < most else f"exactly {least}"
        raise ShapeError(
            f"There must be {allowed} components. Got {len(molecules)} instead.",
            cure=f"Give a list of {allowed} different molecules.",
            field="components",
        )
    first_seen: dict[str, int] = {}
    for index, molecule in enumerate(molecules):
        first = first_seen.setdefault(molecule.canonical_smiles, index)
        if first != index:
            raise DuplicateComponentError(molecule.canonical_smiles, first, index)


def check_temperatures(temperature_K: ArrayLike) -> FloatArray:
    """Temperatures as a float array, each finite and within `TEMPERATURE_RANGE_K`.

    Parameters
    ----------
    temperature_K : array_like, K
        One or many.

    Returns
    -------
    FloatArray of shape (n,)

    Raises
    ------
    OutOfRangeError
        For the first value outside; NaN and infinities are outside.
    ShapeError
        If there is none.
    """
    return _check_range("temperature_K", temperature_K, TEMPERATURE_RANGE_K)


def check_pressures(pressure_kPa: ArrayLike) -> FloatArray:
    """Pressures as a float array, each finite and within `PRESSURE_RANGE_KPA`.

    Parameters
    ----------
    pressure_kPa : array_like, kPa
        One or many.

    Returns
    -------
    FloatArray of shape (n,)

    Raises
    ------
    OutOfRangeError
        For the first value outside; NaN and infinities are outside.
    ShapeError
        If there is none.
    """
    return _check_range("pressure_kPa", pressure_kPa, PRESSURE_RANGE_KPA)


def check_one_of(temperature_K: float | None, pressure_kPa: float | None) -> None:
    """Refuse both or neither of temperature and pressure.

    Parameters
    ----------
    temperature_K, pressure_kPa : float or None

    Raises
    ------
    InvalidInputError
    """
    if (temperature_K is None) == (pressure_kPa is None):
        raise InvalidInputError(
            "Exactly one of 'temperature_K' and 'pressure_kPa' must be given. Got "
            + ("neither" if temperature_K is None else "both")
            + " instead.",
            cure="Give the one that is fixed; the other is the answer.",
            field="temperature_K",
        )


def check_fractions(mole_fractions: ArrayLike, n_components: int) -> FloatArray:
    """Mole fractions of shape (n_points, n_components), each 0..1, each row summing to one.

    Parameters
    ----------
    mole_fractions : array_like of shape (n_points, n_components) or (n_components,)
    n_components : int

    Returns
    -------
    FloatArray of shape (n_points, n_components)
        Rows that sum to one exactly.

    Raises
    ------
    ShapeError, OutOfRangeError, FractionSumError
        With the `field` as the sender wrote it.
    """
    try:
        given = np.asarray(mole_fractions, dtype=float)
    except ValueError as error:
        raise ShapeError(
            "The 'mole_fractions' must be lists of equal length. Got ragged lists instead.",
            cure=f"Give {n_components} numbers for each point.",
            field="mole_fractions",
        ) from error
    fractions = np.atleast_2d(given)
    if fractions.ndim != 2 or fractions.shape[1] != n_components or fractions.shape[0] == 0:
        got = "lists in lists in lists" if fractions.ndim > 2 else fractions.shape[-1]
        raise ShapeError(
            f"Each point of 'mole_fractions' must have {n_components} numbers, one a component. "
            f"Got {got} instead.",
            cure="Give one mole fraction a component, in the order of 'components'.",
            field="mole_fractions",
        )
    _refuse_outside("mole_fractions", given, (0.0, 1.0))
    totals = fractions.sum(axis=1)
    worst = int(np.argmax(np.abs(totals - 1.0)))
    if abs(totals[worst] - 1.0) > SUM_TOLERANCE:
        row = f"mole_fractions[{worst}]" if given.ndim == 2 else "mole_fractions"
        raise FractionSumError(float(totals[worst]), field=row)
    normalised: FloatArray = fractions / totals[:, np.newaxis]
    return normalised


def _check_range(name: str, values: ArrayLike, bounds: tuple[float, float]) -> FloatArray:
    array = np.atleast_1d(np.asarray(values, dtype=float))
    if array.size == 0:
        raise ShapeError(
            f"The '{name}' must hold at least one number. Got an empty list instead.",
            cure=f"Give one '{name}', or one a point.",
            field=name,
        )
    _refuse_outside(name, array, bounds)
    return array


def _refuse_outside(name: str, array: FloatArray, bounds: tuple[float, float]) -> None:
    """Raise for the first value outside the bounds; NaN and infinities are outside."""
    bad = np.argwhere(~((array >= bounds[0]) & (array <= bounds[1])))
    if len(bad):
        place = tuple(int(k) for k in bad[0])
        field = name if array.size == 1 else name + "".join(f"[{k}]" for k in place)
        raise OutOfRangeError(name, float(array[place]), *bounds, field=field)
