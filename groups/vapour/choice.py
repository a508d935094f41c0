"""Whether a mixture needs a real vapour at all, decided by what leaving it out would cost."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import FloatArray
from groups.vapour.ideality import Ideality, ideality
from groups.vapour.virial_vapour import VirialVapour

VapourKind = Literal["ideal", "virial", "psrk"]

#: Relative error of P, error of y and of ln relative volatility that an ideal vapour may cause:
#: below the error of any predicted activity coefficient. Common practice, no source.
TOLERATED_PRESSURE, TOLERATED_FRACTION, TOLERATED_VOLATILITY = 0.02, 0.005, 0.03


@dataclass(frozen=True, slots=True)
class VapourChoice:
    """Which vapour a mixture needs over a set of points, and why.

    Attributes
    ----------
    kind : {"ideal", "virial", "psrk"}
        "psrk" where the virial equation is beyond its range: take the equation of state.
    reason : str
        In a chemist's words.
    largest_pressure_error, largest_vapour_error, largest_ln_volatility_error : float
        Sizes of the errors that an ideal vapour would cause at the worst point.
    compressibility_range : tuple of float
        Lowest and highest Z.
    judged : Ideality
        Point by point.
    """

    kind: VapourKind
    reason: str
    largest_pressure_error: float
    largest_vapour_error: float
    largest_ln_volatility_error: float
    compressibility_range: tuple[float, float]
    judged: Ideality


def choose_vapour(
    model: VirialVapour, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
) -> VapourChoice:
    """Choose between an ideal vapour, the virial equation and the equation of state.

    Parameters
    ----------
    model : VirialVapour
    temperature_K, pressure_kPa : array of shape (n,)
        K, kPa; at least one point, no NaN.
    vapour : array of shape (n, n_components)
        Mole fractions of the vapours; each row sums to 1.

    Returns
    -------
    VapourChoice

    Source
    ------
    `groups.vapour.ideality`; the limits are common practice, no source.
    """
    judged = ideality(model, temperature_K, pressure_kPa, vapour)
    P_error = float(np.abs(judged.pressure_error).max())
    y_error = float(np.abs(judged.vapour_error).max())
    both = (vapour[:, :, None] > 1e-6) & (vapour[:, None, :] > 1e-6)
    alpha = float(np.abs(np.where(both, judged.ln_volatility_error, 0.0)).max())
    Z = judged.compressibility
    cost = (
        f"An ideal vapour would miss the pressure by up to {P_error:.1%}, the vapour composition "
        f"by up to {y_error:.3f} and a relative volatility by up to {np.expm1(alpha):.1%} "
        f"(Z from {Z.min():.3f} to {Z.max():.3f})."
    )
    small = P_error <= TOLERATED_PRESSURE and y_error <= TOLERATED_FRACTION
    kind: VapourKind = "virial"
    if not judged.within_range.all():
        kind = "psrk"
        cost = "The vapour is too dense for the virial equation: an equation of state is needed."
    elif small and alpha <= TOLERATED_VOLATILITY:
        kind = "ideal"
    elif bool(model.associating.any()):
        cost += " Carboxylic acid dimers are behind most of it."
    return VapourChoice(
        kind, cost, P_error, y_error, alpha, (float(Z.min()), float(Z.max())), judged
    )
