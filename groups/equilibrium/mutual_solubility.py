"""Mutual solubilities of two liquids over temperature, and the consolute points that end them.

At a consolute point the slope dh/ds of h = ln a1 - ln a2 over s = ln(x1/x2) touches zero at its
lowest place. So the lowest slope m(T) is followed over temperature: the liquid splits where m is
negative, and a consolute point lies where m changes sign.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np
import numpy.typing as npt
from scipy.optimize import brentq, minimize_scalar

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.activity_curve import activity_difference_slope, fractions, logit_grid
from groups.equilibrium.binary_split import binary_split
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K, checked_temperature
from groups.equilibrium.system import LiquidModel
from groups.errors import OutOfRangeError

#: Temperatures at which the lowest slope is looked at for consolute points.
NODES = 41
#: Temperature of a consolute point, in K: far closer than any prediction.
TOLERANCE_K = 1e-6


@dataclass(frozen=True, slots=True)
class ConsolutePoint:
    """Where both liquids become one.

    `kind` is "upper" where the liquid splits below this temperature, "lower" where above.
    """

    kind: Literal["upper", "lower"]
    temperature_K: float
    mole_fractions: FloatArray


@dataclass(frozen=True, slots=True)
class MutualSolubility:
    """Two liquids at n temperatures.

    Attributes
    ----------
    temperature_K : array of shape (n,)
    splits : bool array of shape (n,)
    first, second : array of shape (n, 2)
        Mole fractions of the liquid poor in component 1 and of the one rich in it; the widest gap
        where there are several; NaN where there is none.
    consolute_points : tuple of ConsolutePoint
        Between the lowest and the highest temperature asked for.
    """

    temperature_K: FloatArray
    splits: BoolArray
    first: FloatArray
    second: FloatArray
    consolute_points: tuple[ConsolutePoint, ...]


def mutual_solubility(liquid: LiquidModel, temperature_K: npt.ArrayLike) -> MutualSolubility:
    """Mutual solubilities of a binary at given temperatures.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.

    Returns
    -------
    MutualSolubility

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    Prausnitz, Lichtenthaler & de Azevedo (1999), section 6.13.
    """
    T = checked_temperature(temperature_K)
    first, second = np.full((len(T), 2), np.nan), np.full((len(T), 2), np.nan)
    for k, each in enumerate(T.tolist()):
        split = binary_split(liquid, each)
        if split is not None:
            first[k], second[k] = split
    points: tuple[ConsolutePoint, ...] = ()
    if len(T) and T.max() > T.min():
        points = consolute_points(liquid, float(T.min()), float(T.max()))
    return MutualSolubility(T, np.isfinite(first[:, 0]), first, second, points)


def consolute_points(
    liquid: LiquidModel, lowest_K: float, highest_K: float
) -> tuple[ConsolutePoint, ...]:
    """Upper and lower consolute points of a binary between two temperatures.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    lowest_K, highest_K : float
        In K, 40 to 2000.

    Returns
    -------
    tuple of ConsolutePoint
        In the order of temperature.

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    Prausnitz, Lichtenthaler & de Azevedo (1999), section 6.13: both derivatives of the chemical
    potential over the composition vanish.
    """
    if not LOWEST_K <= lowest_K < highest_K <= HIGHEST_K:
        raise OutOfRangeError("lowest_K", lowest_K, LOWEST_K, highest_K)
    nodes = np.linspace(lowest_K, highest_K, NODES)
    slopes = [_lowest_slope(liquid, float(T))[0] for T in nodes]
    found = []
    for k in range(NODES - 1):
        if (slopes[k] < 0.0) == (slopes[k + 1] < 0.0):
            continue
        T = float(
            brentq(
                lambda at: _lowest_slope(liquid, at)[0], nodes[k], nodes[k + 1], xtol=TOLERANCE_K
            )
        )
        kind: Literal["upper", "lower"] = "upper" if slopes[k] < 0.0 else "lower"
        found.append(ConsolutePoint(kind, T, fractions(_lowest_slope(liquid, T)[1])))
    return tuple(found)


def _lowest_slope(liquid: LiquidModel, T: float) -> tuple[float, float]:
    """The lowest dh/ds at a temperature, and where."""
    s = logit_grid(liquid, np.array([T]))
    slope = activity_difference_slope(liquid, T, s)
    k = int(np.clip(slope.argmin(), 1, len(s) - 2))
    best = minimize_scalar(
        lambda at: float(activity_difference_slope(liquid, T, np.array([at]))[0]),
        bounds=(s[k - 1], s[k + 1]),
        method="bounded",
        options={"xatol": 1e-9},
    )
    return float(min(best.fun, slope.min())), float(best.x if best.fun <= slope.min() else s[k])
