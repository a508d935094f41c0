"""The Margules equations of a binary: two-suffix (one constant) and three-suffix (two constants).

    gE/RT = x1 x2 (A21 x1 + A12 x2)

u_12 = A12 is ln gamma_1 at infinite dilution, u_21 = A21 that of component 2; the two-suffix
equation has A12 = A21.

Source: Margules, Sitzungsber. Akad. Wiss. Wien 104 (1895) 1243; as printed in Smith, Van Ness &
Abbott, Introduction to Chemical Engineering Thermodynamics, 7th ed. (2005), equations 12.9 and
12.10.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray

TEXT = {
    "margules-2": "ln gamma_1 = A x2^2; ln gamma_2 = A x1^2",
    "margules-3": (
        "ln gamma_1 = x2^2 [A12 + 2 (A21 - A12) x1]; ln gamma_2 = x1^2 [A21 + 2 (A12 - A21) x2]"
    ),
}


@dataclass(frozen=True, slots=True)
class Margules:
    """Margules equation of two components.

    Parameters
    ----------
    suffixes : int
        3 with two constants; 2 says that both are one. The equation is the same.
    """

    suffixes: int = 3

    @property
    def name(self) -> str:
        """Identifier of the equation."""
        return f"margules-{self.suffixes}"

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma (t, m, 2) for A (t, 2, 2) and x (t or 1, m, 2)."""
        first, second = _weights(x)
        A12, A21 = u[:, 0, 1][:, None, None], u[:, 1, 0][:, None, None]
        return A12 * first + A21 * second

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """Zeros: no separate part for size and shape."""
        return np.zeros_like(x)

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d A_jk of shape (t, m, 2, 2, 2); linear, so u only gives the shape."""
        J = np.zeros((len(u), x.shape[1], 2, 2, 2))
        J[..., 0, 1], J[..., 1, 0] = _weights(x)
        return J

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, 2, 2)."""
        x1, x2 = x[..., 0], x[..., 1]
        A12, A21 = u[:, 0, 1][:, None], u[:, 1, 0][:, None]
        curvature = -2.0 * (A12 + 2.0 * (A21 - A12) * x1) + 2.0 * (A21 - A12) * x2
        return binary_mole_derivatives(curvature, x)


def binary_mole_derivatives(curvature: FloatArray, x: FloatArray) -> FloatArray:
    """From d2(gE/RT)/dx1^2 (t, m) to n d ln gamma_i/dn_j (t, m, 2, 2): rank one by Gibbs-Duhem."""
    ends = np.stack([x[..., 1], -x[..., 0]], axis=-1)
    return np.asarray(curvature[..., None, None] * ends[..., :, None] * ends[..., None, :])


def _weights(x: FloatArray) -> tuple[FloatArray, FloatArray]:
    """What multiplies A12 and A21 in (ln gamma_1, ln gamma_2)."""
    x1, x2 = x[..., 0], x[..., 1]
    first = np.stack([x2**2 * (1.0 - 2.0 * x1), 2.0 * x1**2 * x2], axis=-1)
    second = np.stack([2.0 * x1 * x2**2, x1**2 * (1.0 - 2.0 * x2)], axis=-1)
    return first, second
