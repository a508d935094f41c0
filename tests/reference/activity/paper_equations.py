"""The family's equations as printed, one number at a time, by subgroup and with every sum.

Written from Fredenslund, Jones & Prausnitz 1975 (eqs. 1 to 9), Weidlich & Gmehling 1987 and Larsen,
Rasmussen & Fredenslund 1987, for comparison with the rearranged array equations.
"""

import math
from collections.abc import Mapping, Sequence

from groups.parameters import MethodTable

Counts = Mapping[int, int]


def ln_gamma(
    table: MethodTable, components: Sequence[Counts], T: float, x: Sequence[float]
) -> list[float]:
    """ln gamma of each component; every x must be above 0, as in the printed equations."""
    combinatorial = _combinatorial(table, components, x)
    mixture = _ln_group_gamma(table, _group_fractions(components, x), T)
    answer = []
    for i, counts in enumerate(components):
        pure = _ln_group_gamma(table, _group_fractions([counts], [1.0]), T)
        residual = sum(n * (mixture[k] - pure[k]) for k, n in counts.items())
        answer.append(combinatorial[i] + residual)
    return answer


def _combinatorial(
    table: MethodTable, components: Sequence[Counts], x: Sequence[float]
) -> list[float]:
    r = [sum(n * float(table.R[table.subgroup_index(k)]) for k, n in c.items()) for c in components]
    q = [sum(n * float(table.Q[table.subgroup_index(k)]) for k, n in c.items()) for c in components]
    p = table.combinatorial_exponent
    answer = []
    for i in range(len(components)):
        phi = x[i] * r[i] / sum(xj * rj for xj, rj in zip(x, r, strict=True))
        theta = x[i] * q[i] / sum(xj * qj for xj, qj in zip(x, q, strict=True))
        modified = x[i] * r[i] ** p / sum(xj * rj**p for xj, rj in zip(x, r, strict=True))
        part = math.log(modified / x[i]) + 1.0 - modified / x[i]
        if table.staverman_guggenheim:
            part -= 5.0 * q[i] * (math.log(phi / theta) + 1.0 - phi / theta)
        answer.append(part)
    return answer


def _group_fractions(components: Sequence[Counts], x: Sequence[float]) -> dict[int, float]:
    amounts: dict[int, float] = {}
    for counts, fraction in zip(components, x, strict=True):
        for k, n in counts.items():
            amounts[k] = amounts.get(k, 0.0) + n * fraction
    total = sum(amounts.values())
    return {k: amount / total for k, amount in amounts.items()}


def _ln_group_gamma(table: MethodTable, X: dict[int, float], T: float) -> dict[int, float]:
    Q = {k: float(table.Q[table.subgroup_index(k)]) for k in X}
    total = sum(Q[k] * X[k] for k in X)
    theta = {k: Q[k] * X[k] / total for k in X}
    psi = {(m, n): _psi(table, m, n, T) for m in X for n in X}
    shielding = {m: sum(theta[n] * psi[n, m] for n in X) for m in X}
    return {
        k: Q[k]
        * (1.0 - math.log(shielding[k]) - sum(theta[m] * psi[k, m] / shielding[m] for m in X))
        for k in X
    }


def _psi(table: MethodTable, m: int, n: int, T: float) -> float:
    i, j = (int(table.subgroup_main[table.subgroup_index(k)]) for k in (m, n))
    if i == j:
        return 1.0
    a, b, c = (float(values[i, j]) for values in (table.a, table.b, table.c))
    if table.psi == "constant":
        return math.exp(-a / T)
    if table.psi == "quadratic":
        return math.exp(-(a + b * T + c * T**2) / T)
    T0 = 298.15
    return math.exp(-(a + b * (T - T0) + c * (T * math.log(T0 / T) + T - T0)) / T)
