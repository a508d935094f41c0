"""The NRTL equation for any number of components, with every derivative a fit or a flash needs.

Symbols of the paper: tau_ij and alpha_ij = alpha_ji; G_ij = exp(-alpha_ij tau_ij);
C_j = sum_k x_k G_kj; R_j = sum_k x_k tau_kj G_kj / C_j; A_ij = G_ij / C_j; E_ij = tau_ij - R_j.
Then gE/RT = sum_j x_j R_j and ln gamma_i = R_i + sum_j x_j A_ij E_ij.

Source: Renon & Prausnitz, AIChE J. 14 (1968) 135, equations 22 and 23 (multicomponent form).
The derivatives are our own differentiation of them.
"""

from dataclasses import dataclass, replace

import numpy as np

from groups.arrays import FloatArray

TEXT = (
    "ln gamma_i = sum_j x_j tau_ji G_ji / sum_k x_k G_ki"
    " + sum_j [x_j G_ij / sum_k x_k G_kj]"
    " (tau_ij - sum_m x_m tau_mj G_mj / sum_k x_k G_kj);"
    " G_ij = exp(-alpha_ij tau_ij), alpha_ij = alpha_ji, tau_ii = 0"
)


@dataclass(frozen=True, slots=True)
class Nrtl:
    """NRTL at given non-randomness; the interactions u_ij are tau_ij.

    Parameters
    ----------
    alpha : FloatArray of shape (n_components, n_components)
        Non-randomness, symmetric, dimensionless; the diagonal is not used.
    """

    alpha: FloatArray

    @property
    def name(self) -> str:
        """Identifier of the equation."""
        return "nrtl"

    def with_alpha(self, alpha: float) -> "Nrtl":
        """The same with one non-randomness for all pairs."""
        return replace(self, alpha=np.full_like(self.alpha, alpha))

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma (t, m, n) for tau (t, n, n) and x (t or 1, m, n)."""
        G = np.exp(-self.alpha * u)
        C = x @ G
        R = (x @ (u * G)) / C
        share = x / C
        transposed = G.swapaxes(1, 2)
        return R + share @ (u * G).swapaxes(1, 2) - (share * R) @ transposed

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """Zeros: NRTL has no part for size and shape."""
        return np.zeros_like(x)

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d tau_jk of shape (t, m, n, n, n)."""
        A, E = self._local(u, x)
        D = A * (1.0 - self.alpha * E)
        both = E[..., :, None, :] + E[..., None, :, :]
        weight = x[..., :, None] * A * x[..., None, :]
        J = -weight[..., None, :, :] * A[..., :, None, :] * (1.0 - self.alpha * both)
        return _with_own_terms(J, D, x)

    def alpha_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d alpha_jk, as if alpha_jk and alpha_kj were free, (t, m, n, n, n)."""
        A, E = self._local(u, x)
        tau = u[:, None]
        F = -A * tau * E
        both = E[..., :, None, :] + E[..., None, :, :]
        weight = x[..., :, None] * tau * A * x[..., None, :]
        J = weight[..., None, :, :] * A[..., :, None, :] * both
        return _with_own_terms(J, F, x)

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, n, n)."""
        A, E = self._local(u, x)
        B = A * E
        crossed = (x[..., None, :] * B) @ A.swapaxes(-1, -2)
        return B + B.swapaxes(-1, -2) - crossed - crossed.swapaxes(-1, -2)

    def _local(self, u: FloatArray, x: FloatArray) -> tuple[FloatArray, FloatArray]:
        """A and E of shape (t, m, n, n)."""
        G = np.exp(-self.alpha * u)
        C = x @ G
        R = (x @ (u * G)) / C
        return G[:, None] / C[..., None, :], u[:, None] - R[..., None, :]


def _with_own_terms(J: FloatArray, D: FloatArray, x: FloatArray) -> FloatArray:
    """Add delta_ik x_j D_jk + delta_ij x_k D_jk to J_ijk."""
    i = np.arange(x.shape[-1])
    J[..., i, :, i] += np.moveaxis(x[..., :, None] * D, -1, 0)
    J[..., i, i, :] += x[..., None, :] * D
    return J
