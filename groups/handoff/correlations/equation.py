"""What every correlative equation offers: whole arrays in, whole arrays out.

Shapes: interactions u (t, n, n), one matrix a temperature, diagonal zero; mole fractions x of
(t, m, n) or (1, m, n); answers (t, m, ...).
"""

from typing import Protocol

from groups.arrays import FloatArray


class Equation(Protocol):
    """An excess Gibbs energy with pairwise interactions u_ij, and its derivatives."""

    @property
    def name(self) -> str:
        """Identifier of the equation."""

    def ln_gamma(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """ln gamma of shape (t, m, n)."""

    def combinatorial(self, x: FloatArray) -> FloatArray:
        """The part that no interaction enters, of the shape of x."""

    def interaction_jacobian(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """d ln gamma_i / d u_jk of shape (t, m, n, n, n)."""

    def mole_derivatives(self, u: FloatArray, x: FloatArray) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (t, m, n, n)."""
