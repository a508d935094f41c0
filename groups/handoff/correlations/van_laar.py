"""The van Laar equation of a binary.

    gE/RT = A12 A21 x1 x2 / (A12 x1 + A21 x2)

u_12 = A12 is ln gamma_1 at infinite dilution, u_21 = A21 that of component 2. They must have one
sign, else the denominator vanishes at a composition in between.

Source: van Laar, Z. Phys. Chem. 72 (1910) 723; as printed in Smith, Van Ness & Abbott, Introduction
to Chemical Engineering Thermodynamics, 7th ed. (2005), equations 12.16 and 12.17.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.handoff.correlations.margules import binary_mole_derivatives

TEXT = (
    "ln gamma_1 = A12 [A21 x2 / (A12 x1 + A21 x2)]^2;"
    " ln gamma_2 = A21 [A12 x1 / (A12 x1 + A21 x2)]^2"
)


@dataclass(frozen=True, slots=True)
class VanLaar:
    """Van Laar's equation of two components."""

    @property
    def name(self) -> str:
        """Identifier of the equation."""
        return "van-laar"

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma (t, m, 2) for A (t, 2, 2) and x (t or 1, m, 2)."""
        A, B, first, second = _shares(u, x)
        return np.stack([A * second**2, B * first**2], axis=-1)

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """Zeros: no separate part for size and shape."""
        return np.zeros_like(x)

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d A_jk of shape (t, m, 2, 2, 2)."""
        _, _, first, second = _shares(u, x)
        J = np.zeros((*first.shape, 2, 2, 2))
        J[..., 0, 0, 1] = second**2 * (1.0 - 2.0 * first)
        J[..., 0, 1, 0] = 2.0 * first**2 * _over(x[..., 1], x[..., 0]) * second
        J[..., 1, 1, 0] = first**2 * (1.0 - 2.0 * second)
        J[..., 1, 0, 1] = 2.0 * second**2 * _over(x[..., 0], x[..., 1]) * first
        return J

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, 2, 2)."""
        A, B, _, _ = _shares(u, x)
        D = A * x[..., 0] + B * x[..., 1]
        curvature = np.zeros_like(D)
        np.divide(-2.0 * (A * B) ** 2, D**3, out=curvature, where=D != 0.0)
        return binary_mole_derivatives(curvature, x)


def _shares(u: FloatArray, x: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """A12 and A21 of shape (t, 1), and the shares A12 x1/D and A21 x2/D of shape (t, m)."""
    A, B = u[:, 0, 1][:, None], u[:, 1, 0][:, None]
    D = A * x[..., 0] + B * x[..., 1]
    first, second = np.zeros_like(D), np.zeros_like(D)
    np.divide(A * x[..., 0], D, out=first, where=D != 0.0)
    np.divide(B * x[..., 1], D, out=second, where=D != 0.0)
    return A, B, first, second


def _over(upper: FloatArray, lower: FloatArray) -> FloatArray:
    """A ratio that is multiplied by something vanishing faster where its lower part is zero."""
    ratio = np.zeros_like(upper)
    np.divide(upper, lower, out=ratio, where=lower != 0.0)
    return ratio
