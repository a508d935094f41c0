"""Points in, blocks out: how temperatures and compositions meet without filling the memory."""

from collections.abc import Callable, Iterator

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.errors import FractionSumError, OutOfRangeError, ShapeError

# Common practice, no source: input rounded to six digits still passes, a forgotten component fails.
FRACTION_SUM_TOLERANCE = 1e-6
# Numbers in one block's working array. 2^15 doubles (256 KiB) stay within a core's second cache.
BLOCK_NUMBERS = 2**15

Kernel = Callable[[FloatArray, FloatArray], FloatArray]


def checked_points(
    temperature_K: ArrayLike, mole_fractions: ArrayLike, n_components: int
) -> tuple[FloatArray, FloatArray]:
    """Return both as arrays of float; NaN is let through and comes out as NaN.

    Parameters
    ----------
    temperature_K : array_like
        Temperatures, K, positive; any shape that broadcasts with the shape of the points.
    mole_fractions : array_like of shape (..., n_components)
        Mole fractions, 0 to 1, each row summing to 1 within 1e-6.
    n_components : int
        Components the model was built for.

    Returns
    -------
    tuple of FloatArray
        Temperatures and mole fractions.

    Raises
    ------
    ShapeError
        Where the last axis is not the components, or the shapes do not broadcast.
    OutOfRangeError
        For a temperature or mole fraction that is infinite or outside its range.
    FractionSumError
        Where a row does not sum to 1.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    x = np.asarray(mole_fractions, dtype=np.float64)
    if x.ndim == 0 or x.shape[-1] != n_components:
        raise ShapeError(
            f"The last axis of 'mole_fractions' must hold {n_components} components. "
            f"Got shape {x.shape} instead.",
            cure="Give one mole fraction for each component.",
            field="mole_fractions",
        )
    _check_ranges(T, x)
    return T, x


def _check_ranges(T: FloatArray, x: FloatArray) -> None:
    wrong_T = (T <= 0.0) | np.isinf(T)
    if wrong_T.any():
        raise OutOfRangeError("temperature_K", float(T[wrong_T].flat[0]), 0.0, np.inf)
    wrong_x = x < 0.0
    if wrong_x.any():
        raise OutOfRangeError("mole_fractions", float(x[wrong_x].flat[0]), 0.0, 1.0)
    total = x.sum(axis=-1)
    wrong_sum = np.abs(total - 1.0) > FRACTION_SUM_TOLERANCE
    if wrong_sum.any():
        raise FractionSumError(float(total[wrong_sum].flat[0]), field="mole_fractions")


def evaluate(
    kernel: Kernel,
    T: FloatArray,
    x: FloatArray,
    tail: tuple[int, ...],
    widths: tuple[int, int],
) -> FloatArray:
    """Run a kernel over all points, a cache-sized block at a time.

    Parameters
    ----------
    kernel : callable
        Takes T of shape (t,) and x of shape (t, m, C) or (1, m, C); gives (t, m, *tail).
    T : FloatArray
        Temperatures, K, broadcasting with x.shape[:-1].
    x : FloatArray of shape (..., C)
        Mole fractions.
    tail : tuple of int
        Shape of the answer at one point.
    widths : tuple of int
        Numbers that the kernel's largest working array needs for one temperature, and those it
        needs for one point.

    Returns
    -------
    FloatArray of shape (..., *tail)
        The kernel's answer over the broadcast shape of the points.

    Raises
    ------
    ShapeError
        Where temperatures and points do not broadcast.
    """
    try:
        points = np.broadcast_shapes(T.shape, x.shape[:-1])
    except ValueError as error:
        raise ShapeError(
            f"Temperatures of shape {T.shape} do not fit points of shape {x.shape[:-1]}.",
            cure="Give one temperature, one for each point, or a column of them for a grid.",
            field="temperature_K",
        ) from error
    flat_T, flat_x = _as_grid(T, x, points)
    answer = np.empty((flat_T.size, flat_x.shape[1], *tail))
    for rows, columns in _blocks(flat_T.size, flat_x.shape[1], widths):
        shared = flat_x[:, columns] if flat_x.shape[0] == 1 else flat_x[rows, columns]
        answer[rows, columns] = kernel(flat_T[rows], shared)
    return answer.reshape(*points, *tail)


def _as_grid(
    T: FloatArray, x: FloatArray, points: tuple[int, ...]
) -> tuple[FloatArray, FloatArray]:
    """T as (t,) and x as (1, m, C) for one temperature or a grid, else x as (t, 1, C)."""
    n_components = x.shape[-1]
    axes = len(points)
    T_shape = (1,) * (axes - T.ndim) + T.shape
    x_shape = (1,) * (axes - x.ndim + 1) + x.shape[:-1]
    first_x = next((k for k in range(axes) if x_shape[k] != 1), axes)
    if all(size == 1 for size in T_shape[first_x:]):
        return T.reshape(-1), x.reshape(1, -1, n_components)
    if T.size > 1 and bool(np.all(T.flat[0] == T)) and x_shape == points:
        return T.reshape(-1)[:1], x.reshape(1, -1, n_components)
    every_T = np.broadcast_to(T, points).reshape(-1)
    return every_T, np.broadcast_to(x, (*points, n_components)).reshape(-1, 1, n_components)


def _blocks(n_rows: int, n_columns: int, widths: tuple[int, int]) -> Iterator[tuple[slice, slice]]:
    of_row, of_point = widths
    columns = max(1, min(n_columns, BLOCK_NUMBERS // of_point))
    rows = max(1, BLOCK_NUMBERS // max(of_row, of_point * columns))
    for row in range(0, n_rows, rows):
        for column in range(0, n_columns, columns):
            yield slice(row, row + rows), slice(column, column + columns)
