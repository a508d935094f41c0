"""Temperature dependence of the attraction: Mathias and Copeman's form, fitted to vapour pressure.

    sqrt(alpha) = 1 + c1 t + c2 t^2 + c3 t^3,    t = 1 - sqrt(T / Tc)         below Tc
    sqrt(alpha) = 1 + c1 t                                                    above Tc

Below the temperatures of the fit sqrt(alpha) goes on straight in t, because a cubic would not.

The coefficients are this project's own: alpha of every temperature is the one that reproduces the
vapour-pressure curve of `groups.pure` exactly, and the c are the least-squares fit to ln P.
Where there is no curve, c1 is Soave's function of the acentric factor.

Source: P. M. Mathias, T. W. Copeman, Fluid Phase Equilib. 13 (1983) 91 (form); T. Holderbaum, J.
Gmehling, Fluid Phase Equilib. 70 (1991) 251, eqs. 4 and 5 (use in PSRK); G. Soave, Chem. Eng. Sci.
27 (1972) 1197 (c1 = 0.480 + 1.574 omega - 0.176 omega^2).
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.pure import VapourPressure
from groups.vapour.psrk.cubic import CRITICAL_B, CRITICAL_Q
from groups.vapour.psrk.saturation_line import attraction_at_saturation, saturation_slope

#: The fit spans these reduced temperatures, as far as the curve goes.
FITTED_REDUCED = (0.45, 0.985)
FIT_POINTS = 60
#: Three coefficients need a curve from below to above these; two need the span; else one.
FULL_SPAN, HALF_SPAN = (0.75, 0.90), 0.12
NARROWEST = 0.02


@dataclass(frozen=True, slots=True)
class Attraction:
    """Coefficients c1, c2, c3 of one substance.

    Parameters
    ----------
    critical_temperature_K, critical_pressure_kPa : float
        The critical point that the coefficients belong to.
    coefficients : tuple of three floats
    source : str
    range_K : tuple of float or None
        Temperatures of the vapour pressures behind them; None where generalised.
    deviation_ln : float
        Root mean square difference of ln P of the equation from the curve, an estimate from the
        fit of alpha.
    """

    critical_temperature_K: float
    critical_pressure_kPa: float
    coefficients: tuple[float, float, float]
    source: str
    range_K: tuple[float, float] | None
    deviation_ln: float

    @property
    def coldest(self) -> float:
        """The t of the lowest temperature fitted; infinite where nothing was fitted."""
        if self.range_K is None:
            return np.inf
        return float(1.0 - np.sqrt(self.range_K[0] / self.critical_temperature_K))


def attraction(
    critical_temperature_K: float,
    critical_pressure_kPa: float,
    acentric_factor: float,
    line: VapourPressure | None,
) -> Attraction:
    """Fit the coefficients to a vapour-pressure curve, or generalise them.

    Parameters
    ----------
    critical_temperature_K, critical_pressure_kPa, acentric_factor : float
    line : VapourPressure or None

    Returns
    -------
    Attraction

    Source
    ------
    See the head of this module.
    """
    own = (critical_temperature_K, critical_pressure_kPa)
    if line is not None:
        # A curve that comes with another critical point than the tables may fit only its own.
        other = (line.critical_temperature_K or own[0], line.critical_pressure_kPa or own[1])
        points = [own] if other == own else [own, other]
        fits = [fit for point in points if (fit := _fitted(*point, line)) is not None]
        if fits:
            return min(fits, key=lambda fit: fit.deviation_ln)
    c1 = 0.480 + 1.574 * acentric_factor - 0.176 * acentric_factor**2
    return Attraction(*own, (c1, 0.0, 0.0), "Soave (1972), from the acentric factor", None, np.nan)


def _fitted(Tc: float, Pc: float, line: VapourPressure) -> Attraction | None:
    low, high = FITTED_REDUCED
    span_K = max(line.range_K[0], low * Tc), min(line.range_K[1], high * Tc)
    if span_K[1] - span_K[0] < NARROWEST * Tc:
        return None
    T = np.linspace(*span_K, FIT_POINTS)
    ln_B = line.ln_kPa(T) - np.log(Pc) + np.log(CRITICAL_B * Tc / T)
    q = attraction_at_saturation(ln_B)
    usable = np.isfinite(q)
    if usable.sum() < FIT_POINTS // 2:
        return None
    T, q = T[usable], q[usable]
    root = np.sqrt(q * T / (CRITICAL_Q * Tc))
    t = 1.0 - np.sqrt(T / Tc)
    reduced = span_K[0] / Tc, span_K[1] / Tc
    full = reduced[0] <= FULL_SPAN[0] and reduced[1] >= FULL_SPAN[1]
    terms = 3 if full else 2 if reduced[1] - reduced[0] >= HALF_SPAN else 1
    powers = t[:, None] ** np.arange(1, terms + 1)
    steepness = 2.0 * q / saturation_slope(q) / root  # of ln P against sqrt(alpha)
    c = np.linalg.lstsq(powers * steepness[:, None], (root - 1.0) * steepness, rcond=None)[0]
    miss = powers @ c + 1.0 - root
    deviation = float(np.sqrt(np.mean((miss * steepness) ** 2)))
    c1, c2, c3 = (*c.tolist(), 0.0, 0.0)[:3]
    text = f"fitted here to the vapour pressure of {line.citation}"
    return Attraction(Tc, Pc, (c1, c2, c3), text, span_K, deviation)


def root_alpha(
    attractions: Sequence[Attraction], temperature_K: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """sqrt(alpha) and its temperature derivative in 1/K, each of shape (n, n_components).

    Parameters
    ----------
    attractions : sequence of Attraction
    temperature_K : array of shape (n,)
    """
    Tc = np.array([a.critical_temperature_K for a in attractions])
    c1, c2, c3 = np.array([a.coefficients for a in attractions]).T
    reduced = np.sqrt(temperature_K[:, None] / Tc)
    t = 1.0 - reduced
    inside = np.minimum(t, np.array([a.coldest for a in attractions]))
    cold = t > 0.0
    c2, c3 = np.where(cold, c2, 0.0), np.where(cold, c3, 0.0)
    by_t = c1 + inside * (2.0 * c2 + 3.0 * inside * c3)
    value = 1.0 + inside * (c1 + inside * (c2 + inside * c3)) + by_t * (t - inside)
    slope = by_t * (-0.5 * reduced / temperature_K[:, None])
    # Far above Tc the line would cross zero and alpha rise again; it stays at zero instead.
    positive = value > 0.0
    return np.where(positive, value, 0.0), np.where(positive, slope, 0.0)
