"""Do the azeotropes found make a possible map of residue curves?

Each pure component and each azeotrope is a fixed point of dx/dt = x - y. Reflected through the
faces of the simplex the flow covers a sphere, so the signs of its fixed points add up to the Euler
characteristic: sum over k of 2^k (sum of signs of the fixed points with k components) is 2 for an
odd number of components and 0 for an even one. For three components this is the rule of Zharov and
Serafimov. A missing azeotrope shows as an imbalance.
"""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.azeotrope import Azeotrope, steps_basis
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.heterogeneous import TwoLiquidAzeotrope, convex_derivatives
from groups.equilibrium.subset import subset
from groups.equilibrium.system import System


def balanced(system: System, condition: Condition, azeotropes: list[Azeotrope]) -> bool:
    """True where the azeotropes of a mixture and of all its subsets satisfy the index rule.

    Parameters
    ----------
    system : System
        n components, n at least 2.
    condition : Condition
    azeotropes : list of Azeotrope
        All that are known, at this condition.

    Returns
    -------
    bool
        False also where the rule cannot be applied: a component without a boiling point here.

    Source
    ------
    Zharov & Serafimov, Physicochemical Foundations of Distillation (1975); Doherty & Perkins,
    Chem. Eng. Sci. 34 (1979) 1401-1414. In the form given here: the Poincare-Hopf theorem.
    """
    n = system.n_components
    pure = condition.boil(system, np.eye(n))
    if not np.isfinite(pure.temperature_K * pure.pressure_kPa).all():
        return False
    total = 0.0
    for i in range(n):
        x, T, P = np.eye(n)[i], float(pure.temperature_K[i]), float(pure.pressure_kPa[i])
        ratios = escape(system, x, T, P, x)
        total += 2.0 * float(np.prod(np.sign(-ratios[np.arange(n) != i])))
    for azeotrope in azeotropes:
        total += 2.0 ** len(azeotrope.components) * _sign(system, azeotrope)
    return bool(total == (2.0 if n % 2 else 0.0))


def _sign(system: System, azeotrope: Azeotrope) -> float:
    """Sign of the determinant of the flow at an azeotrope; NaN where it cannot be told."""
    present = azeotrope.mole_fractions > 0.0
    inner = inner_derivatives(system, azeotrope)
    if not np.isfinite(inner).all():
        return float("nan")
    basis = steps_basis(int(present.sum()))
    values = np.linalg.eigvalsh(basis @ inner @ basis.T)
    leaving = outward(system, azeotrope)[~present]
    return float(np.prod(np.sign(-values)) * np.prod(np.sign(-leaving)))


def outward(system: System, azeotrope: Azeotrope) -> FloatArray:
    """ln K of every component, K over both liquids together where there are two."""
    T, P = azeotrope.temperature_K, azeotrope.pressure_kPa
    vapour = azeotrope.mole_fractions
    ln_k = [escape(system, x, T, P, vapour) for x in azeotrope.liquids]
    if len(ln_k) == 1:
        return ln_k[0]
    share = liquid_share(azeotrope)
    # A trace divides itself between the liquids: 1/K = sum of share/K.
    shares = np.log([max(share, 1e-300), max(1.0 - share, 1e-300)])
    return np.asarray(-np.logaddexp(shares[0] - ln_k[0], shares[1] - ln_k[1]))


def liquid_share(azeotrope: Azeotrope) -> float:
    """Mole fraction of both liquids that is in the first."""
    first, second = azeotrope.liquids
    widest = int(np.argmax(np.abs(first - second)))
    gap = azeotrope.mole_fractions[widest] - second[widest]
    return float(gap / (first[widest] - second[widest]))


def inner_derivatives(system: System, azeotrope: Azeotrope) -> FloatArray:
    """n d ln gamma_i/dn_j among the components present; of both liquids as one where it splits."""
    part = subset(system, azeotrope.components)
    kept = list(azeotrope.components)
    z = azeotrope.mole_fractions[kept]
    if azeotrope.stable_liquid:
        T = np.array([azeotrope.temperature_K])
        return np.asarray(part.activity.ln_gamma_mole_derivatives(T, z[None])[0])
    first, second = (liquid[kept] for liquid in azeotrope.liquids)
    share = liquid_share(azeotrope)
    if not 0.0 < share < 1.0:
        return np.full((len(kept), len(kept)), np.nan)  # one of the liquids is all but gone
    amounts = np.stack([share * first, (1.0 - share) * second])
    two = TwoLiquidAzeotrope(amounts, azeotrope.temperature_K, azeotrope.pressure_kPa)
    return convex_derivatives(part, two)


def escape(system: System, x: FloatArray, T: float, P: float, vapour: FloatArray) -> FloatArray:
    """ln K of every component over a boiling liquid: positive where a trace of it leaves."""
    temperature, pressure = np.array([T]), np.array([P])
    ln_k = system.ln_volatility(temperature, x[None])[0] - np.log(P)
    return np.asarray(ln_k - system.vapour.ln_correction(temperature, pressure, vapour[None])[0])
