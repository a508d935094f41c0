"""The Wilson equation for any number of components, with its derivatives.

Symbols of the paper: Lambda_ij, C_i = sum_j x_j Lambda_ij, A_ij = Lambda_ij / C_i. Then
gE/RT = -sum_i x_i ln C_i and ln gamma_i = 1 - ln C_i - sum_k x_k A_ki. The interactions are
u_ij = ln Lambda_ij, so that Lambda stays positive whatever a fit does.

Source: Wilson, J. Am. Chem. Soc. 86 (1964) 127; multicomponent form: Orye & Prausnitz, Ind. Eng.
Chem. 57(5) (1965) 18. The derivatives are our own differentiation.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray

TEXT = (
    "ln gamma_i = 1 - ln(sum_j x_j Lambda_ij) - sum_k x_k Lambda_ki / sum_j x_j Lambda_kj;"
    " Lambda_ii = 1"
)


@dataclass(frozen=True, slots=True)
class Wilson:
    """Wilson's equation; it has no parameters besides its interactions."""

    @property
    def name(self) -> str:
        """Identifier of the equation."""
        return "wilson"

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma (t, m, n) for ln Lambda (t, n, n) and x (t or 1, m, n)."""
        Lambda = np.exp(u)
        C = x @ Lambda.swapaxes(1, 2)
        return 1.0 - np.log(C) - (x / C) @ Lambda

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """Zeros: no separate part for size and shape."""
        return np.zeros_like(x)

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d ln Lambda_jk of shape (t, m, n, n, n)."""
        A = local_ratios(u, x)
        own = x[..., None, :] * A  # x_k A_jk
        J = (x[..., :, None] * own)[..., None, :, :] * A.swapaxes(-1, -2)[..., :, :, None]
        i = np.arange(x.shape[-1])
        J[..., i, i, :] -= own
        J[..., i, :, i] -= np.moveaxis(x[..., :, None] * A, -1, 0)
        return J

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, n, n)."""
        A = local_ratios(u, x)
        transposed = A.swapaxes(-1, -2)
        return 1.0 - A - transposed + transposed @ (x[..., :, None] * A)


def local_ratios(u: FloatArray, x: FloatArray) -> FloatArray:
    """A_ij = Lambda_ij / sum_k x_k Lambda_ik of shape (t, m, n, n)."""
    Lambda = np.exp(u)
    C = x @ Lambda.swapaxes(1, 2)
    return Lambda[:, None] / C[..., :, None]
