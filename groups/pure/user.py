"""The caller's own vapour pressure: coefficients or measured points, checked before use."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import FloatArray
from groups.errors import InvalidInputError
from groups.pure.corresponding_states import ATMOSPHERE_KPA
from groups.pure.equations import LN_10, Antoine, Dippr101, SaturationEquation
from groups.pure.saturation import VapourPressure

PressureUnit = Literal["kPa", "Pa", "bar", "mmHg", "atm"]
TemperatureUnit = Literal["K", "C"]

KPA_PER = {"kPa": 1.0, "Pa": 1e-3, "bar": 100.0, "mmHg": 101.325 / 760.0, "atm": 101.325}

_USUAL_KPA = (1.0, 500.0)
"""Pressures over which coefficients without a range are taken; common practice, no source."""

_SENSIBLE_K = (50.0, 1500.0)
_TROUTON = (4.0, 40.0)
"""-d ln P/d(1/T) over the boiling temperature: entropy of vaporisation over R.

Trouton's rule puts it near 10.5; hydrogen has 5.3, glycols 15. The bounds only part liquids from
wrong units and bases; common practice, no source.
"""

_FIVE_POINTS = 5
_LARGEST_MISS_LN = 0.35
"""A measured point further from the fitted line than this (a factor of 1.4) is taken for a slip."""

_SMALLEST_UNCERTAINTY_LN = 0.01


@dataclass(frozen=True, slots=True)
class AntoineInput:
    """log P = A - B / (T + C).

    Parameters
    ----------
    A, B, C : float
    log_base : {"10", "e"}
    pressure_unit : {"kPa", "Pa", "bar", "mmHg", "atm"}
    temperature_unit : {"K", "C"}
    range_K : tuple of float, optional
        Lowest and highest temperature of the data behind the coefficients, K. Where not given, the
        temperatures at which the equation gives 1 to 500 kPa.
    """

    A: float
    B: float
    C: float
    log_base: Literal["10", "e"]
    pressure_unit: PressureUnit
    temperature_unit: TemperatureUnit
    range_K: tuple[float, float] | None = None


@dataclass(frozen=True, slots=True)
class Dippr101Input:
    """ln P = C1 + C2/T + C3 ln T + C4 T^C5, T in K.

    Parameters
    ----------
    C1, C2, C3, C4, C5 : float
    pressure_unit : {"Pa", "kPa", "bar", "mmHg", "atm"}
    range_K : tuple of float, optional
        As in `AntoineInput`.
    """

    C1: float
    C2: float
    C3: float = 0.0
    C4: float = 0.0
    C5: float = 1.0
    pressure_unit: PressureUnit = "Pa"
    range_K: tuple[float, float] | None = None


@dataclass(frozen=True, slots=True)
class PointsInput:
    """Measured points, fitted.

    Parameters
    ----------
    temperature_K : tuple of float
        K, at least two different ones.
    pressure_kPa : tuple of float
        kPa, one for each temperature.
    """

    temperature_K: tuple[float, ...]
    pressure_kPa: tuple[float, ...]


UserVapourPressure = AntoineInput | Dippr101Input | PointsInput


def user_vapour_pressure(given: UserVapourPressure) -> VapourPressure:
    """Check the caller's own data and turn them into a curve.

    Parameters
    ----------
    given : AntoineInput, Dippr101Input or PointsInput

    Returns
    -------
    VapourPressure
        With source "user". Points: two to four are fitted by ln P = A - B/T, five or more by the
        Antoine equation, by least squares in ln P; `equation` says which and to how many.

    Raises
    ------
    InvalidInputError
        Not finite, pressure that does not rise with temperature, a pole within the range, or
        numbers that no liquid has (mostly a wrong unit or base of the logarithm).
    """
    if isinstance(given, PointsInput):
        return _sensible(_fitted(given))
    return _sensible(_antoine(given) if isinstance(given, AntoineInput) else _dippr101(given))


def _antoine(given: AntoineInput) -> VapourPressure:
    _require_finite(given.A, given.B, given.C)
    scale = LN_10 if given.log_base == "10" else 1.0
    shift = -273.15 if given.temperature_unit == "C" else 0.0
    A = given.A * scale + float(np.log(KPA_PER[given.pressure_unit]))
    curve = Antoine(A, given.B * scale, given.C + shift)
    range_K = _checked_range(curve, given.range_K)
    if range_K[0] + curve.C <= 0.0:
        raise _refused(f"The Antoine equation has its pole within the range, at {-curve.C:.1f} K.")
    form = f"Antoine, log base {given.log_base}, {given.pressure_unit}, {given.temperature_unit}"
    coefficients = (("A", given.A), ("B", given.B), ("C", given.C))
    return _curve(form, coefficients, range_K, curve, given.range_K is None)


def _dippr101(given: Dippr101Input) -> VapourPressure:
    values = (given.C1, given.C2, given.C3, given.C4, given.C5)
    _require_finite(*values)
    unit = float(np.log(KPA_PER[given.pressure_unit]))
    curve = Dippr101(given.C1 + unit, *values[1:])
    range_K = _checked_range(curve, given.range_K)
    coefficients = tuple((f"C{k + 1}", value) for k, value in enumerate(values))
    form = f"DIPPR equation 101, {given.pressure_unit}, K"
    return _curve(form, coefficients, range_K, curve, given.range_K is None)


def _curve(
    form: str,
    coefficients: tuple[tuple[str, float], ...],
    range_K: tuple[float, float],
    curve: SaturationEquation,
    range_taken: bool,
) -> VapourPressure:
    note = "no range was given: taken as the temperatures at which the equation gives 1 to 500 kPa"
    return VapourPressure(
        source="user",
        equation=form,
        citation="given by the caller",
        coefficients=coefficients,
        range_K=range_K,
        curve=curve,
        uncertainty_ln=_SMALLEST_UNCERTAINTY_LN,
        notes=(note,) if range_taken else (),
    )


def _checked_range(
    curve: SaturationEquation, range_K: tuple[float, float] | None
) -> tuple[float, float]:
    """The range given, or the usual pressures, once the curve is seen to be a liquid's there."""
    low, high = range_K if range_K is not None else _usual_range(curve)
    if not (0.0 < low < high < np.inf):
        raise _refused(f"The range must be two rising temperatures in K. Got {low:g} to {high:g}.")
    grid = np.linspace(low, high, 201)
    with np.errstate(all="ignore"):
        ln_P, slope = curve.ln_kPa(grid), curve.slope(grid)
    if not np.all(np.isfinite(ln_P)):
        raise _refused("The coefficients give no finite pressure everywhere in the range.")
    if not np.all(slope > 0.0):
        raise _refused("The coefficients give a pressure that falls as the temperature rises.")
    if np.max(ln_P) > np.log(1e5) or np.max(ln_P) < np.log(1e-6):
        raise _refused("The coefficients give pressures that no liquid has in the range.")
    return low, high


def _usual_range(curve: SaturationEquation) -> tuple[float, float]:
    """Where the equation gives the usual pressures while rising."""
    grid = np.linspace(*_SENSIBLE_K, 2901)
    with np.errstate(all="ignore"):
        ln_P, slope = curve.ln_kPa(grid), curve.slope(grid)
        within = (ln_P >= np.log(_USUAL_KPA[0])) & (ln_P <= np.log(_USUAL_KPA[1])) & (slope > 0.0)
    places = np.flatnonzero(within)
    if places.size < 2:
        raise _refused("The coefficients give 1 to 500 kPa at no temperature from 50 to 1500 K.")
    breaks = np.flatnonzero(np.diff(places) > 1)
    last = places[breaks[0]] if breaks.size else places[-1]
    if last == places[0]:
        raise _refused("The coefficients rise from 1 to 500 kPa within half a kelvin.")
    return float(grid[places[0]]), float(grid[last])


def _fitted(given: PointsInput) -> VapourPressure:
    T, P = _checked_points(given)
    ln_P = np.log(P)
    curve = _least_squares(T, ln_P)
    miss = ln_P - curve.ln_kPa(T)
    worst = int(np.argmax(np.abs(miss)))
    if abs(miss[worst]) > _LARGEST_MISS_LN:
        raise _refused(
            f"The point at {T[worst]:g} K, {P[worst]:g} kPa lies a factor of "
            f"{np.exp(abs(miss[worst])):.2f} off the line through all points."
        )
    n_fitted = 3 if T.size >= _FIVE_POINTS else 2
    scatter = float(np.sqrt(np.sum(miss**2) / max(T.size - n_fitted, 1)))
    name = "Antoine" if n_fitted == 3 else "ln P = A - B/T"
    return VapourPressure(
        source="user",
        equation=f"{name}, ln, kPa, K, fitted to {T.size} measured points",
        citation="measured points given by the caller",
        coefficients=(("A", curve.A), ("B", curve.B), ("C", curve.C)),
        range_K=(float(T.min()), float(T.max())),
        curve=curve,
        uncertainty_ln=max(scatter, _SMALLEST_UNCERTAINTY_LN),
    )


def _checked_points(given: PointsInput) -> tuple[FloatArray, FloatArray]:
    """The points in order of temperature, each with a higher pressure than the one before."""
    T = np.asarray(given.temperature_K, dtype=np.float64)
    P = np.asarray(given.pressure_kPa, dtype=np.float64)
    if T.shape != P.shape or T.ndim != 1:
        raise _refused(f"There are {T.size} temperatures for {P.size} pressures.")
    _require_finite(*T, *P)
    if np.any(T <= 0.0) or np.any(P <= 0.0):
        raise _refused("Temperatures in K and pressures in kPa must be positive.")
    if np.unique(T).size < 2:
        raise _refused("At least two points at different temperatures are needed.")
    order = np.lexsort((P, T))
    T, P = T[order], P[order]
    falls = np.flatnonzero((np.diff(P) <= 0.0) & (np.diff(T) > 0.0))
    if falls.size:
        k = int(falls[0])
        raise _refused(
            f"The pressure does not rise with temperature: {P[k]:g} kPa at {T[k]:g} K, then "
            f"{P[k + 1]:g} kPa at {T[k + 1]:g} K."
        )
    return T, P


def _least_squares(T: FloatArray, ln_P: FloatArray) -> Antoine:
    """A and B by linear least squares; C by search between 0 and 40 % of the lowest temperature."""
    if T.size < _FIVE_POINTS or np.unique(T).size < _FIVE_POINTS:
        return _line(T, ln_P, 0.0)[1]
    low, high = -0.4 * float(T.min()), 0.0
    for _ in range(6):  # each round narrows C tenfold
        trials = np.linspace(low, high, 21)
        best = min(trials, key=lambda C: _line(T, ln_P, float(C))[0])
        step = trials[1] - trials[0]
        low, high = max(float(best - step), -0.4 * float(T.min())), min(float(best + step), 0.0)
    return _line(T, ln_P, float(best))[1]


def _line(T: FloatArray, ln_P: FloatArray, C: float) -> tuple[float, Antoine]:
    """Sum of squares and the best Antoine equation for one C."""
    x = -1.0 / (T + C)
    centred = x - x.mean()
    B = float(np.sum(centred * ln_P) / np.sum(centred**2))
    A = float(ln_P.mean() - B * x.mean())
    curve = Antoine(A, B, C)
    return float(np.sum((ln_P - curve.ln_kPa(T)) ** 2)), curve


def _require_finite(*values: float) -> None:
    if not np.all(np.isfinite(values)):
        raise _refused("Every number must be finite.")


def _sensible(curve: VapourPressure) -> VapourPressure:
    """Refuse an entropy of vaporisation that no liquid has."""
    Tb = curve.inverse(ATMOSPHERE_KPA)
    trouton = float(curve.slope(Tb) * Tb)
    low, high = _TROUTON
    if not low < trouton < high:
        raise _refused(
            f"The slope -d ln P/d(1/T) at one atmosphere is {trouton:.3g} times the boiling "
            f"temperature; a liquid has {low:g} to {high:g} times (Trouton's rule: 10.5)."
        )
    return curve


def _refused(message: str) -> InvalidInputError:
    cure = "Check the base of the logarithm, the units of pressure and temperature and the order."
    return InvalidInputError(message, cure=cure, field="vapour_pressure")
