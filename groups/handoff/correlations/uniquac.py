"""The UNIQUAC equation for any number of components, with its derivatives.

Symbols of the paper: r_i, q_i; V_i = r_i / sum x r, F_i = q_i / sum x q (the ratios Phi_i/x_i and
theta_i/x_i, finite at x_i = 0); theta_i = x_i F_i; tau_ij = exp(u_ij); z = 10. The residual part is
Wilson's equation in the surface fractions theta with Lambda_ij = tau_ji, times q_i.

Source: Abrams & Prausnitz, AIChE J. 21 (1975) 116. The derivatives are our own differentiation.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.handoff.correlations.wilson import Wilson

TEXT = (
    "ln gamma_i = ln(Phi_i/x_i) + 1 - Phi_i/x_i"
    " - 5 q_i [ln(Phi_i/theta_i) + 1 - Phi_i/theta_i]"
    " + q_i [1 - ln(sum_j theta_j tau_ji) - sum_j theta_j tau_ij / sum_k theta_k tau_kj];"
    " Phi_i = x_i r_i / sum_k x_k r_k, theta_i = x_i q_i / sum_k x_k q_k, tau_ii = 1"
)

_HALF_Z = 5.0
_WILSON = Wilson()


@dataclass(frozen=True, slots=True)
class Uniquac:
    """UNIQUAC of components with given volume r and surface q; u_ij = ln tau_ij.

    Parameters
    ----------
    r, q : FloatArray of shape (n_components,)
        Relative van der Waals volume and surface, dimensionless, positive.
    """

    r: FloatArray
    q: FloatArray

    @property
    def name(self) -> str:
        """Identifier of the equation."""
        return "uniquac"

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma (t, m, n) for ln tau (t, n, n) and x (t or 1, m, n)."""
        residual = _WILSON.ln_gamma(u.swapaxes(1, 2), self._theta(x))
        return np.asarray(self.combinatorial(x) + self.q * residual)

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """The part for size and shape, of the shape of x."""
        V, F = self._ratios(x)
        ratio = V / F
        surface = self.q * (np.log(ratio) + 1.0 - ratio)
        return np.asarray(np.log(V) + 1.0 - V - _HALF_Z * surface)

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d ln tau_jk of shape (t, m, n, n, n)."""
        J = _WILSON.interaction_jacobian(u.swapaxes(1, 2), self._theta(x))
        jacobian: FloatArray = self.q[:, None, None] * J.swapaxes(-1, -2)
        return jacobian

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, n, n)."""
        V, F = self._ratios(x)
        surface = (x @ self.q)[..., None, None]
        short, long = 1.0 - V, F - V
        combinatorial = short[..., :, None] * short[..., None, :]
        combinatorial = combinatorial - _HALF_Z * surface * long[..., :, None] * long[..., None, :]
        residual = _WILSON.mole_derivatives(u.swapaxes(1, 2), self._theta(x))
        return np.asarray(combinatorial + (self.q[:, None] * self.q) * residual / surface)

    def _ratios(self, x: FloatArray) -> tuple[FloatArray, FloatArray]:
        V, F = self.r / (x @ self.r)[..., None], self.q / (x @ self.q)[..., None]
        return np.asarray(V), np.asarray(F)

    def _theta(self, x: FloatArray) -> FloatArray:
        surface = x * self.q
        return np.asarray(surface / surface.sum(axis=-1, keepdims=True))
