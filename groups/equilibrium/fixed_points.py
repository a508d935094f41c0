"""The fixed points of the residue curves of a mixture: nodes and saddles.

Pure components and azeotropes are where dx/dt = x - y stands still. The signs of its eigenvalues
say what they are: in a stable node all curves end (the highest boiling place of its region), in an
unstable node all begin (the lowest), a saddle they pass.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.azeotrope import Azeotrope
from groups.equilibrium.azeotrope_index import escape, inner_derivatives, outward
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.system import System

Stability = Literal["stable node", "unstable node", "saddle"]


@dataclass(frozen=True, slots=True)
class FixedPoint:
    """A pure component or an azeotrope.

    Attributes
    ----------
    mole_fractions : array of shape (n_components,)
    temperature_K, pressure_kPa : float
    stability : {"stable node", "unstable node", "saddle"}
        "stable node": residue curves end here.
    inner : array of shape (k - 1,)
        Signs of the eigenvalues among the k components present: +1 where curves leave.
    inner_steps : array of shape (k - 1, n_components)
        Directions of these eigenvalues.
    outward : array of shape (n_components,)
        +1 where a trace of an absent component grows along a residue curve (curves leave), -1
        where it dies away; zero for those present.
    azeotrope : Azeotrope or None
        None for a pure component.
    """

    mole_fractions: FloatArray
    temperature_K: float
    pressure_kPa: float
    stability: Stability
    inner: FloatArray
    inner_steps: FloatArray
    outward: FloatArray
    azeotrope: Azeotrope | None


def fixed_points(
    system: System, condition: Condition, azeotropes: tuple[Azeotrope, ...]
) -> tuple[FixedPoint, ...]:
    """Pure components and azeotropes with their stability.

    Parameters
    ----------
    system : System
    condition : Condition
    azeotropes : tuple of Azeotrope
        All of the mixture, at this condition.
    """
    n = system.n_components
    pure = condition.boil(system, np.eye(n))
    found = []
    for i in range(n):
        x, T, P = np.eye(n)[i], float(pure.temperature_K[i]), float(pure.pressure_kPa[i])
        # A trace that is more volatile leaves the liquid: it dies away.
        out = np.where(x > 0.0, 0.0, -np.sign(escape(system, x, T, P, x)))
        none = np.empty(0)
        found.append(FixedPoint(x, T, P, _stability(none, out), none, np.empty((0, n)), out, None))
    for each in azeotropes:
        inner, steps = _inner(system, each)
        out = -np.sign(outward(system, each))
        out = np.where(each.mole_fractions > 0.0, 0.0, out)
        found.append(
            FixedPoint(
                each.mole_fractions,
                each.temperature_K,
                each.pressure_kPa,
                _stability(inner, out),
                inner,
                steps,
                out,
                each,
            )
        )
    return tuple(found)


def _inner(system: System, azeotrope: Azeotrope) -> tuple[FloatArray, FloatArray]:
    """Signs and directions of the flow among the components present.

    At an azeotrope T is stationary, so d(x - y)_i = -x_i sum_j N_ij dx_j with
    N = n d ln gamma_i/dn_j: a symmetric matrix in dx / sqrt(x), and sqrt(x) changes nothing.
    """
    present = np.flatnonzero(azeotrope.mole_fractions > 0.0)
    root = np.sqrt(azeotrope.mole_fractions[present])
    N = inner_derivatives(system, azeotrope)
    values, vectors = np.linalg.eigh(-N * root[:, None] * root[None, :])
    still = int(np.abs(root @ vectors).argmax())
    kept = [k for k in range(len(values)) if k != still]
    steps = np.zeros((len(kept), len(azeotrope.mole_fractions)))
    steps[:, present] = (root[:, None] * vectors[:, kept]).T
    return np.sign(values[kept]), steps


def _stability(inner: FloatArray, out: FloatArray) -> Stability:
    signs = np.concatenate([inner, out[out != 0.0]])
    if (signs < 0.0).all():
        return "stable node"
    return "unstable node" if (signs > 0.0).all() else "saddle"
