"""What an azeotrope is: its place, its kind, and how the still sees it."""

from dataclasses import dataclass, field
from typing import Literal

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.system import System

Kind = Literal["minimum-boiling", "maximum-boiling", "saddle"]


@dataclass(frozen=True, slots=True)
class Azeotrope:
    """A liquid that boils without changing composition.

    Attributes
    ----------
    components : tuple of int
        Indices of the components present.
    mole_fractions : array of shape (n_components,)
        Of all components of the mixture; of both liquids together where there are two.
    temperature_K, pressure_kPa : float
    kind : str
        "minimum-boiling" (lowest temperature at constant pressure, highest pressure at constant
        temperature), "maximum-boiling" or "saddle", among mixtures of the components present.
    stable_liquid : bool
        False where the liquid splits in two: a heterogeneous azeotrope.
    liquids : tuple of arrays of shape (n_components,)
        The liquid, or both liquids.
    """

    components: tuple[int, ...]
    mole_fractions: FloatArray
    temperature_K: float
    pressure_kPa: float
    kind: Kind
    stable_liquid: bool = True
    liquids: tuple[FloatArray, ...] = field(default=())

    @property
    def heterogeneous(self) -> bool:
        """True where two liquids boil together."""
        return not self.stable_liquid


def homogeneous_kind(system: System, temperature_K: float, x: FloatArray) -> Kind:
    """The kind of a homogeneous azeotrope, from the curvature of ln P over the composition.

    At constant temperature ln P = gE/RT + sum x_i ln Psat_i is stationary at an azeotrope. Its
    second derivative N = n d ln gamma_i/dn_j on steps that sum to zero has, in a stable liquid, the
    signs of that of the bubble pressure, which is N + N diag(x) N (differentiate the sum of partial
    pressures twice, with Gibbs-Duhem). A maximum of the pressure is a minimum of the temperature.
    """
    derivative = system.activity.ln_gamma_mole_derivatives(np.array([temperature_K]), x[None])[0]
    return kind_of(derivative, x)


def kind_of(derivatives: FloatArray, x: FloatArray) -> Kind:
    """The kind, from N = n d ln gamma_i/dn_j at the azeotrope x; absent components are left out."""
    present = np.flatnonzero(x > 0.0)
    basis = steps_basis(len(present))
    values = np.linalg.eigvalsh(basis @ derivatives[np.ix_(present, present)] @ basis.T)
    if (values < 0.0).all():
        return "minimum-boiling"
    return "maximum-boiling" if (values > 0.0).all() else "saddle"


def steps_basis(n: int) -> FloatArray:
    """Orthonormal steps of n amounts that sum to zero, of shape (n - 1, n)."""
    basis = np.linalg.qr(np.vstack([np.ones(n), np.eye(n)[: n - 1]]).T)[0]
    return np.asarray(basis.T[1:])
