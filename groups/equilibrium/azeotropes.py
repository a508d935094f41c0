"""All azeotropes of a mixture of any number of components.

Every face of the composition simplex (pair, triple, ...) is searched on its own. Pairs are followed
along their boiling curve. Faces of more components are searched by Newton's method from a lattice
of compositions and from the azeotropes of their own edges. The signs of the azeotropes and of the
pure components must balance (the topological index); where they do not, more starts are tried.
"""

from dataclasses import dataclass
from itertools import combinations

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.azeotrope import Azeotrope
from groups.equilibrium.azeotrope_index import balanced
from groups.equilibrium.binary_azeotropes import binary_azeotropes
from groups.equilibrium.boiling_curve import Condition, boiling_curve
from groups.equilibrium.conditions import checked_pressure, checked_temperature
from groups.equilibrium.interior_azeotropes import interior_azeotropes
from groups.equilibrium.subset import embedded, subset
from groups.equilibrium.system import System
from groups.errors import InvalidInputError

#: Azeotropes of five components are not known; faces of more than this are not searched.
MOST_COMPONENTS = 4


@dataclass(frozen=True, slots=True)
class AzeotropeSet:
    """All azeotropes that were found, and whether they make a possible map.

    `index_balanced` is False where the topological index of the whole mixture does not balance: an
    azeotrope is missing, or one is tangent to a neighbour and cannot be told from it.
    """

    azeotropes: tuple[Azeotrope, ...]
    index_balanced: bool


def azeotropes(
    system: System,
    *,
    pressure_kPa: float | None = None,
    temperature_K: float | None = None,
    most_components: int = MOST_COMPONENTS,
) -> tuple[Azeotrope, ...]:
    """Every azeotrope of a mixture, binary and higher, homogeneous and heterogeneous.

    Parameters
    ----------
    system : System
        Of any number of components.
    pressure_kPa, temperature_K : float
        Exactly one of them; in kPa, 1e-9 to 1e6, or in K, 40 to 2000.
    most_components : int
        Largest number of components of an azeotrope that is looked for.

    Returns
    -------
    tuple of Azeotrope
        Binary ones first; within a face by the mole fraction of its first component. Empty where
        there is none.

    Raises
    ------
    InvalidInputError
        If not exactly one condition is given.
    OutOfRangeError

    Source
    ------
    The conditions: Doherty & Malone, Conceptual Design of Distillation Systems (2001), chapter 5.
    The index: Zharov & Serafimov (1975); Doherty & Perkins, Chem. Eng. Sci. 34 (1979) 1401.
    """
    return azeotrope_set(
        system,
        pressure_kPa=pressure_kPa,
        temperature_K=temperature_K,
        most_components=most_components,
    ).azeotropes


def azeotrope_set(
    system: System,
    *,
    pressure_kPa: float | None = None,
    temperature_K: float | None = None,
    most_components: int = MOST_COMPONENTS,
) -> AzeotropeSet:
    """Every azeotrope of a mixture, and whether the topological index balances.

    Parameters
    ----------
    system, pressure_kPa, temperature_K, most_components
        As `azeotropes`.

    Returns
    -------
    AzeotropeSet

    Raises
    ------
    InvalidInputError
        If not exactly one condition is given.
    OutOfRangeError

    Source
    ------
    As `azeotropes`.
    """
    condition = _condition(pressure_kPa, temperature_K)
    found: list[Azeotrope] = []
    n = system.n_components
    for size in range(2, min(n, most_components) + 1):
        for face in combinations(range(n), size):
            known = [a for a in found if set(a.components) < set(face)]
            found.extend(_of_face(system, condition, face, known))
    return AzeotropeSet(tuple(found), balanced(system, condition, found))


def _condition(pressure_kPa: float | None, temperature_K: float | None) -> Condition:
    if (pressure_kPa is None) == (temperature_K is None):
        raise InvalidInputError(
            "Azeotropes need a pressure or a temperature, and not both.",
            cure="Give exactly one of 'pressure_kPa' and 'temperature_K'.",
            field="pressure_kPa",
        )
    if pressure_kPa is not None:
        return Condition(pressure_kPa=float(checked_pressure(pressure_kPa)[0]))
    return Condition(temperature_K=float(checked_temperature(temperature_K or 0.0)[0]))


def _of_face(
    system: System, condition: Condition, face: tuple[int, ...], known: list[Azeotrope]
) -> list[Azeotrope]:
    part = subset(system, face)
    if len(face) == 2:
        curve = boiling_curve(part, condition, np.linspace(0.0, 1.0, 21))
        inner = list(binary_azeotropes(part, condition, curve))
    else:
        inner = interior_azeotropes(part, condition, [_within(a, face) for a in known])
    return [_outside(a, face, system.n_components) for a in inner]


def _within(azeotrope: Azeotrope, face: tuple[int, ...]) -> Azeotrope:
    """The same azeotrope, by the components of a face."""
    kept = list(face)
    return Azeotrope(
        tuple(face.index(i) for i in azeotrope.components),
        azeotrope.mole_fractions[kept],
        azeotrope.temperature_K,
        azeotrope.pressure_kPa,
        azeotrope.kind,
        azeotrope.stable_liquid,
        tuple(liquid[kept] for liquid in azeotrope.liquids),
    )


def _outside(azeotrope: Azeotrope, face: tuple[int, ...], total: int) -> Azeotrope:
    """The same azeotrope, by the components of the whole mixture."""

    def whole(x: FloatArray) -> FloatArray:
        return embedded(x, face, total)

    return Azeotrope(
        tuple(face[i] for i in azeotrope.components),
        whole(azeotrope.mole_fractions),
        azeotrope.temperature_K,
        azeotrope.pressure_kPa,
        azeotrope.kind,
        azeotrope.stable_liquid,
        tuple(whole(liquid) for liquid in azeotrope.liquids),
    )
