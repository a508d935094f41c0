"""A vapour-pressure curve as an equation that can be typed in: kPa, K and natural logarithms."""

from dataclasses import dataclass

import numpy as np

from groups.pure import VapourPressure
from groups.pure.equations import Antoine, Dippr101, ExtendedAntoine, Wagner

_REFIT_POINTS = 101


@dataclass(frozen=True, slots=True)
class VapourPressureText:
    """The equation in words, the numbers it needs, and what must be said about them."""

    equation: str
    numbers: tuple[tuple[str, float], ...]
    note: str


def vapour_pressure_text(line: VapourPressure) -> VapourPressureText:
    """Write a curve down with every number it needs, critical constants of the equation included.

    Parameters
    ----------
    line : VapourPressure

    Returns
    -------
    VapourPressureText
        A curve without a closed form is given as an Antoine equation fitted to it over its range,
        and the note says how far that lies off.
    """
    curve = line.curve
    if isinstance(curve, Antoine):
        abc = (("A", curve.A), ("B", curve.B), ("C", curve.C))
        return VapourPressureText("ln(P/kPa) = A - B/(T + C), T in K", abc, "")
    if isinstance(curve, Wagner):
        return _wagner(curve)
    if isinstance(curve, Dippr101):
        values = (curve.C1, curve.C2, curve.C3, curve.C4, curve.C5)
        numbers = tuple((f"C{k}", value) for k, value in enumerate(values, start=1))
        text = "ln(P/kPa) = C1 + C2/T + C3 ln(T) + C4 T^C5, T in K"
        return VapourPressureText(text, numbers, "")
    if isinstance(curve, ExtendedAntoine):
        return _extended(curve)
    return _refitted(line)


def _wagner(curve: Wagner) -> VapourPressureText:
    terms = " + ".join(f"c{k} tau^{e:g}" for k, e in enumerate(curve.exponents, start=1))
    text = f"ln(P/Pc) = (Tc/T) ({terms}), tau = 1 - T/Tc, T in K"
    numbers = tuple((f"c{k}", c) for k, c in enumerate(curve.coefficients, start=1))
    own = (("Tc_K", curve.critical_temperature_K), ("Pc_kPa", curve.critical_pressure_kPa))
    note = "Tc and Pc here belong to these coefficients; do not exchange them for others."
    return VapourPressureText(text, (*numbers, *own), note)


def _extended(curve: ExtendedAntoine) -> VapourPressureText:
    text = (
        "log10(P/Pa) = A - B/(T + C) + 0.4342944819 x^n + E x^8 + F x^12, "
        "x = max(0, (T - T0)/Tc), T in K"
    )
    names = ("A", "B", "C", "n", "E", "F")
    numbers = tuple((name, float(getattr(curve, name))) for name in names)
    own = (("T0_K", curve.start_K), ("Tc_K", curve.critical_temperature_K))
    return VapourPressureText(text, (*numbers, *own), "")


def _refitted(line: VapourPressure) -> VapourPressureText:
    """Antoine through T ln P = (A C - B) + A T - C ln P, linear in its three unknowns."""
    T = np.linspace(*line.range_K, _REFIT_POINTS)
    ln_P = line.ln_kPa(T)
    columns = np.stack([np.ones_like(T), T, -ln_P], axis=-1)
    constant, A, C = np.linalg.lstsq(columns, T * ln_P, rcond=None)[0].tolist()
    B = A * C - constant
    off = float(np.abs(A - B / (T + C) - ln_P).max())
    note = (
        f"Fitted here to the curve '{line.equation}' over its range; it lies up to "
        f"{100 * np.expm1(off):.2f} % in pressure off it."
    )
    numbers = (("A", A), ("B", B), ("C", C))
    return VapourPressureText("ln(P/kPa) = A - B/(T + C), T in K", numbers, note)
