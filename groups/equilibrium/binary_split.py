"""Binary liquid splits by common tangents, searched in the logit of the mole fraction.

With s = ln(x1/x2) the difference h(s) = ln a1 - ln a2 = s + ln gamma1 - ln gamma2 rises with s in
a stable liquid and falls between the spinodal points. In s a solubility of 1e-12 is as easy to see
as one of 0.1, which no grid in x1 can say.
"""

from dataclasses import dataclass
from itertools import product

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.activity_curve import (
    SUSPICIOUS_SLOPE,
    TOLERANCE,
    ActivityCurve,
    activity_difference_slope,
    equal_areas,
    fractions,
    ln_activity,
    logit_grid,
)
from groups.equilibrium.conditions import checked_temperature
from groups.equilibrium.system import LiquidModel

#: Step of s in the middle; structure in s is about two units wide, narrow only near a consolute
NEWTON_STEPS = 40


@dataclass(frozen=True, slots=True)
class BinarySplit:
    """Two liquids in equilibrium, at one temperature; each composition holds both fractions."""

    temperature_K: float
    first: FloatArray
    second: FloatArray


def binary_split(liquid: LiquidModel, temperature_K: float) -> tuple[FloatArray, FloatArray] | None:
    """The two liquids of a binary that splits; the widest gap where there are several.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    temperature_K : float
        In K, 40 to 2000.

    Returns
    -------
    tuple of two arrays of shape (2,), or None
        Mole fractions (x1, x2) of the liquid poor in component 1 and of the one rich in it;
        None where the liquid is stable throughout.

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    Common tangent to the Gibbs energy of mixing: Prausnitz, Lichtenthaler & de Azevedo, Molecular
    Thermodynamics of Fluid-Phase Equilibria, 3rd ed. (1999), section 6.13.
    """
    splits = binary_splits(liquid, temperature_K)
    if not splits:
        return None
    widest = max(splits, key=lambda split: float(split.second[0] - split.first[0]))
    return widest.first, widest.second


def binary_splits(liquid: LiquidModel, temperature_K: float) -> tuple[BinarySplit, ...]:
    """Every miscibility gap of a binary at one temperature, in the order of x1.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    temperature_K : float
        In K, 40 to 2000.

    Returns
    -------
    tuple of BinarySplit
        Empty where the liquid is stable throughout.

    Raises
    ------
    ShapeError, OutOfRangeError
        As `binary_split`.

    Source
    ------
    As `binary_split`.
    """
    T = float(checked_temperature(temperature_K)[0])
    curve = ActivityCurve.trace(liquid, T)
    tops, bottoms = curve.spinodals()
    found: list[BinarySplit] = []
    for top, bottom in product(tops, bottoms):
        if bottom < top:
            continue
        pair = _common_tangent(liquid, T, curve, int(top), int(bottom))
        if pair is not None and curve.above_tangent(liquid, pair[0]):
            found.append(BinarySplit(T, fractions(pair[0]), fractions(pair[1])))
    return tuple(sorted(found, key=lambda split: float(split.first[0])))


def may_split(liquid: LiquidModel, temperature_K: FloatArray) -> bool:
    """False where dh/ds stays well above zero at all these temperatures: one quick look at many."""
    s = logit_grid(liquid, temperature_K)
    x = fractions(s)
    ln_gamma = liquid.ln_gamma(temperature_K[:, None], x)
    h = s + ln_gamma[..., 0] - ln_gamma[..., 1]
    return bool((np.diff(h, axis=1) < SUSPICIOUS_SLOPE * np.diff(s)).any())


def _common_tangent(
    liquid: LiquidModel, T: float, curve: ActivityCurve, top: int, bottom: int
) -> tuple[float, float] | None:
    """s of both liquids around a fall of h, by equal areas on the grid and then by Newton."""
    guess = equal_areas(curve, top, bottom)
    return None if guess is None else polish_tangent(liquid, T, *guess)


def polish_tangent(
    liquid: LiquidModel, T: float, s_left: float, s_right: float
) -> tuple[float, float] | None:
    """Newton on equal activities of both components; None where it does not arrive."""
    s = np.array([s_left, s_right])
    for _ in range(NEWTON_STEPS):
        ln_a = ln_activity(liquid, T, s)
        gap = ln_a[1] - ln_a[0]  # right less left: (ln a1, ln a2)
        if np.abs(gap).max() <= TOLERANCE * 0.01:
            break
        slope = activity_difference_slope(liquid, T, s)
        change = _tangent_step(gap, slope, fractions(s))
        size = float(np.abs(change).max())
        if not np.isfinite(size):
            return None
        s = s + change * min(1.0, 1.0 / max(size, 1e-300))
        if size < 1e-13 * (1.0 + float(np.abs(s).max())):
            break
    distinct = s[1] - s[0] > 1e-6
    close = np.abs(gap).max() <= TOLERANCE
    return (float(s[0]), float(s[1])) if distinct and close else None


def _tangent_step(gap: FloatArray, slope: FloatArray, x: FloatArray) -> FloatArray:
    """Changes of s: with Gibbs-Duhem, d ln a1 = x2 dh and d ln a2 = -x1 dh on each branch."""
    matrix = np.array(
        [[-x[0, 1] * slope[0], x[1, 1] * slope[1]], [x[0, 0] * slope[0], -x[1, 0] * slope[1]]]
    )
    determinant = matrix[0, 0] * matrix[1, 1] - matrix[0, 1] * matrix[1, 0]
    if determinant == 0.0:
        return np.full(2, np.nan)
    first = -(gap[0] * matrix[1, 1] - gap[1] * matrix[0, 1]) / determinant
    second = -(gap[1] * matrix[0, 0] - gap[0] * matrix[1, 0]) / determinant
    return np.array([first, second])
