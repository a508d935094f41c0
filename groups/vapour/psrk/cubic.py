"""Roots of the Soave-Redlich-Kwong equation, for whole arrays.

With B = b P / (R T), q = a / (b R T) and the reduced volume u = v / b = Z / B the equation reads

    Z^3 - Z^2 + (q B - B - B^2) Z - q B^2 = 0
    B (u^3 - u) - u^2 + (q - 1) u - q = 0

The first form serves the vapour, the second the liquid, whose Z would lose its digits at low
pressure.

Source: G. Soave, Chem. Eng. Sci. 27 (1972) 1197, eqs. 3 to 5; roots by Viete's and Cardano's
formulas, polished by Newton's method.
"""

import numpy as np

from groups.arrays import FloatArray

#: Newton steps after the closed form; each doubles the digits.
POLISH = 4
#: B below which the liquid is found at zero pressure first; the error of that is of the order of B.
TINY = 1e-6
#: q and B at the critical point, where all three roots coincide in u = CRITICAL_VOLUME.
CRITICAL_B = 0.08664034996495773
CRITICAL_Q = 0.42748023354034137 / CRITICAL_B
CRITICAL_VOLUME = 1.0 / 3.0 / CRITICAL_B


def compressibility_roots(q: FloatArray, B: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Smallest and largest compressibility factor above B; equal where there is one root.

    Parameters
    ----------
    q, B : array of shape (n,)
        Above zero.

    Returns
    -------
    smallest, largest : array of shape (n,)

    Source
    ------
    See the head of this module.
    """
    c, d = (q - 1.0 - B) * B, q * B**2
    p, r = c - 1.0 / 3.0, c / 3.0 - d - 2.0 / 27.0
    discriminant = 0.25 * r**2 + p**3 / 27.0
    # The two liquid-like roots differ by B; the discriminant sees B^2, which drowns in rounding.
    tiny = B < TINY
    three = np.where(tiny, (q > 1.0) & ((q - 1.0) ** 2 > 4.0 * q), discriminant < 0.0)
    radius = 2.0 * np.sqrt(np.where(three, -p / 3.0, 1.0))
    cosine = np.where(three, -4.0 * r / np.where(three, radius**3, 1.0), 0.0)
    angle = np.arccos(np.clip(cosine, -1.0, 1.0)) / 3.0
    largest = radius * np.cos(angle) + 1.0 / 3.0
    smallest = radius * np.cos(angle + 2.0 * np.pi / 3.0) + 1.0 / 3.0
    root = np.sqrt(np.where(three, 0.0, np.maximum(discriminant, 0.0)))
    # The larger of the two cubic roots is summed without cancellation; the other follows from p.
    larger = np.cbrt(-0.5 * r - np.where(r > 0.0, root, -root))
    other = np.where(larger == 0.0, 0.0, -p / (3.0 * np.where(larger == 0.0, 1.0, larger)))
    single = larger + other + 1.0 / 3.0
    largest = np.where(three, largest, single)
    u = np.where(three, smallest, single) / B
    u = np.where(three & tiny, _zero_pressure_volume(q), u)
    return _polished_volume(u, q, B) * B, _polished_factor(largest, c, d, B)


def _zero_pressure_volume(q: FloatArray) -> FloatArray:
    """Smaller root of u^2 + (1 - q) u + q = 0."""
    half = 0.5 * (q - 1.0)
    root = np.sqrt(np.maximum(half**2 - q, 0.0))
    return np.asarray(q / (half + root))


def _polished_volume(u: FloatArray, q: FloatArray, B: FloatArray) -> FloatArray:
    u = np.maximum(u, 1.0 + 1e-9)
    for _ in range(POLISH):
        value = B * (u**3 - u) - u**2 + (q - 1.0) * u - q
        slope = B * (3.0 * u**2 - 1.0) - 2.0 * u + q - 1.0
        step = value / np.where(slope == 0.0, np.inf, slope)
        u = np.where(np.abs(step) < 0.1 * (u - 1.0), u - step, u)
    return u


def _polished_factor(Z: FloatArray, c: FloatArray, d: FloatArray, B: FloatArray) -> FloatArray:
    Z = np.maximum(Z, B * (1.0 + 1e-9))
    for _ in range(POLISH):
        value = ((Z - 1.0) * Z + c) * Z - d
        slope = (3.0 * Z - 2.0) * Z + c
        step = value / np.where(slope == 0.0, np.inf, slope)
        Z = np.where(np.abs(step) < 0.1 * (Z - B), Z - step, Z)
    return Z


def pure_ln_phi(q: FloatArray, B: FloatArray, Z: FloatArray) -> FloatArray:
    """ln phi of a pure fluid, and of a mixture the residual Gibbs energy over RT."""
    return np.asarray(Z - 1.0 - np.log(Z - B) - q * np.log1p(B / Z))
