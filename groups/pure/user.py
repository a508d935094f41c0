"""The caller's own vapour pressure: coefficients or measured points, checked before use."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.pure.corresponding_states import ATMOSPHERE_KPA
from groups.pure.equations import LN_10, Antoine, Dippr101, SaturationEquation
from groups.pure.points import (
    SMALLEST_UNCERTAINTY_LN,
    PointsInput,
    fitted_points,
    refused,
    require_finite,
)
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
        return _sensible(fitted_points(given))
    return _sensible(_antoine(given) if isinstance(given, AntoineInput) else _dippr101(given))


def _antoine(given: AntoineInput) -> VapourPressure:
    require_finite(given.A, given.B, given.C)
    scale = LN_10 if given.log_base == "10" else 1.0
    shift = -273.15 if given.temperature_unit == "C" else 0.0
    A = given.A * scale + float(np.log(KPA_PER[given.pressure_unit]))
    curve = Antoine(A, given.B * scale, given.C + shift)
    range_K = _checked_range(curve, given.range_K)
    if range_K[0] + curve.C <= 0.0:
        raise refused(f"The Antoine equation has its pole within the range, at {-curve.C:.1f} K.")
    form = f"Antoine, log base {given.log_base}, {given.pressure_unit}, {given.temperature_unit}"
    coefficients = (("A", given.A), ("B", given.B), ("C", given.C))
    return _curve(form, coefficients, range_K, curve, given.range_K is None)


def _dippr101(given: Dippr101Input) -> VapourPressure:
    values = (given.C1, given.C2, given.C3, given.C4, given.C5)
    require_finite(*values)
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
        uncertainty_ln=SMALLEST_UNCERTAINTY_LN,
        notes=(note,) if range_taken else (),
    )


def _checked_range(
    curve: SaturationEquation, range_K: tuple[float, float] | None
) -> tuple[float, float]:
    """The range given, or the usual pressures, once the curve is seen to be a liquid's there."""
    low, high = range_K if range_K is not None else _usual_range(curve)
    if not (0.0 < low < high < np.inf):
        raise refused(f"The range must be two rising temperatures in K. Got {low:g} to {high:g}.")
    grid = np.linspace(low, high, 201)
    with np.errstate(all="ignore"):
        ln_P, slope = curve.ln_kPa(grid), curve.slope(grid)
    if not np.all(np.isfinite(ln_P)):
        raise refused("The coefficients give no finite pressure everywhere in the range.")
    if not np.all(slope > 0.0):
        raise refused("The coefficients give a pressure that falls as the temperature rises.")
    if np.max(ln_P) > np.log(1e5) or np.max(ln_P) < np.log(1e-6):
        raise refused("The coefficients give pressures that no liquid has in the range.")
    return low, high


def _usual_range(curve: SaturationEquation) -> tuple[float, float]:
    """Where the equation gives the usual pressures while rising."""
    grid = np.linspace(*_SENSIBLE_K, 2901)
    with np.errstate(all="ignore"):
        ln_P, slope = curve.ln_kPa(grid), curve.slope(grid)
        within = (ln_P >= np.log(_USUAL_KPA[0])) & (ln_P <= np.log(_USUAL_KPA[1])) & (slope > 0.0)
    places = np.flatnonzero(within)
    if places.size < 2:
        raise refused("The coefficients give 1 to 500 kPa at no temperature from 50 to 1500 K.")
    breaks = np.flatnonzero(np.diff(places) > 1)
    last = places[breaks[0]] if breaks.size else places[-1]
    if last == places[0]:
        raise refused("The coefficients rise from 1 to 500 kPa within half a kelvin.")
    return float(grid[places[0]]), float(grid[last])


def _sensible(curve: VapourPressure) -> VapourPressure:
    """Refuse an entropy of vaporisation that no liquid has."""
    Tb = curve.inverse(ATMOSPHERE_KPA)
    trouton = float(curve.slope(Tb) * Tb)
    low, high = _TROUTON
    if not low < trouton < high:
        raise refused(
            f"The slope -d ln P/d(1/T) at one atmosphere is {trouton:.3g} times the boiling "
            f"temperature; a liquid has {low:g} to {high:g} times (Trouton's rule: 10.5)."
        )
    return curve
