"""Txy and Pxy diagrams of a binary, with azeotropes and the three-phase line."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.azeotrope import Azeotrope
from groups.equilibrium.binary_azeotropes import binary_azeotropes
from groups.equilibrium.binary_stability import stable_binaries
from groups.equilibrium.boiling_curve import BoilingCurve, Condition, boiling_curve, inside
from groups.equilibrium.conditions import checked_pressure, checked_temperature
from groups.equilibrium.diagram_points import Drawn
from groups.equilibrium.states import States
from groups.equilibrium.system import System
from groups.equilibrium.three_phase import ThreePhase
from groups.errors import InvalidInputError, OutOfRangeError, ShapeError

MOST_POINTS = 100_001


@dataclass(frozen=True, slots=True)
class SplitRange:
    """Two liquids that boil together.

    Attributes
    ----------
    x1_lower, x1_upper : float
        Mole fraction of component 1 in either liquid.
    y1 : float
        Mole fraction of component 1 in their vapour.
    temperature_K, pressure_kPa : float
    azeotropic : bool
        True where the vapour lies between the liquids.
    """

    x1_lower: float
    x1_upper: float
    y1: float
    temperature_K: float
    pressure_kPa: float
    azeotropic: bool


@dataclass(frozen=True, slots=True)
class Diagram:
    """A Txy or Pxy diagram.

    Attributes
    ----------
    kind : str
        "Txy" or "Pxy".
    x1 : array of shape (points,)
        Mole fraction of component 1 in the liquid (in both liquids together where it splits),
        from 0 to 1 in equal steps; both ends are pure.
    y1, temperature_K, pressure_kPa : array of shape (points,)
        First vapour and boiling condition. Where the liquid splits they are those of the
        three-phase line, constant across the gap.
    gamma : array of shape (points, 2)
        Activity coefficients, activity over x; in the gap those of the two liquids together.
    relative_volatility : array of shape (points,)
        (y1/x1)/(y2/x2), continued to both pure ends.
    stable : bool array of shape (points,)
        False where the liquid splits in two.
    converged : bool array of shape (points,)
    failure : tuple of text or None
    azeotropes : tuple of Azeotrope
    liquid_split : SplitRange or None
        The widest split of the boiling liquid.
    liquid_splits : tuple of SplitRange
        All of them.
    """

    kind: Literal["Txy", "Pxy"]
    x1: FloatArray
    y1: FloatArray
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    gamma: FloatArray
    relative_volatility: FloatArray
    stable: BoolArray
    converged: BoolArray
    failure: tuple[str | None, ...]
    azeotropes: tuple[Azeotrope, ...]
    liquid_split: SplitRange | None
    liquid_splits: tuple[SplitRange, ...]


def diagram(
    system: System,
    kind: Literal["Txy", "Pxy"],
    *,
    pressure_kPa: float | None = None,
    temperature_K: float | None = None,
    points: int = 101,
) -> Diagram:
    """Txy diagram at a pressure or Pxy diagram at a temperature.

    Parameters
    ----------
    system : System
        Of two components.
    kind : {"Txy", "Pxy"}
    pressure_kPa : float
        For "Txy", in kPa, 1e-9 to 1e6.
    temperature_K : float
        For "Pxy", in K, 40 to 2000.
    points : int
        Number of points, 2 to 100,001.

    Returns
    -------
    Diagram

    Raises
    ------
    ShapeError
        If the system is not binary.
    InvalidInputError
        If the condition does not fit the kind.
    OutOfRangeError

    Source
    ------
    Smith, Van Ness & Abbott (2005), sections 10.5 (modified Raoult's law) and 14.5 (two liquids
    under a vapour).
    """
    condition = _condition(system, kind, pressure_kPa, temperature_K, points)
    x1 = np.linspace(0.0, 1.0, points)
    curve = boiling_curve(system, condition, x1)
    azeotropes = binary_azeotropes(system, condition, curve)
    x = np.stack([x1, 1.0 - x1], axis=-1)
    covered = np.zeros(points, dtype=bool)
    for line in curve.lines:
        covered |= inside(line, x)
    outside = np.flatnonzero(~covered)
    place = np.searchsorted(curve.x[:, 0], x1[outside]).astype(np.int64)
    place[-1] = len(curve.x) - 1  # points crowd at x1 = 1; the pure end is the last
    states = _at(curve.states, place)
    stable = _stable(system, states, curve)
    drawn = Drawn.of(states, np.exp(curve.ln_alpha[place]), stable)
    drawn = drawn.spread(points, outside).over(x, curve.lines)
    return _result(drawn, kind, x, curve, azeotropes)


def _condition(
    system: System,
    kind: str,
    pressure_kPa: float | None,
    temperature_K: float | None,
    points: int,
) -> Condition:
    if system.n_components != 2:
        raise ShapeError(
            f"A diagram needs two components. Got {system.n_components} instead.",
            cure="Leave out the others, or ask for bubble points.",
            field="components",
        )
    if not 2 <= points <= MOST_POINTS:
        raise OutOfRangeError("points", points, 2, MOST_POINTS)
    if kind == "Txy" and pressure_kPa is not None and temperature_K is None:
        return Condition(pressure_kPa=float(checked_pressure(pressure_kPa)[0]))
    if kind == "Pxy" and temperature_K is not None and pressure_kPa is None:
        return Condition(temperature_K=float(checked_temperature(temperature_K)[0]))
    raise InvalidInputError(
        f"A diagram of kind {kind!r} does not fit the condition given.",
        cure="Give 'Txy' with pressure_kPa alone, or 'Pxy' with temperature_K alone.",
        field="kind",
    )


def _at(states: States, place: IntArray) -> States:
    return States(
        states.temperature_K[place],
        states.pressure_kPa[place],
        states.liquid[place],
        states.vapour[place],
        states.gamma[place],
        states.converged[place],
        states.residual[place],
        tuple([states.failure[k] for k in place.tolist()]),
    )


def _stable(system: System, states: States, curve: BoilingCurve) -> BoolArray:
    """Stability of every point, by the tangent plane where any split is conceivable."""
    x = states.liquid
    stable = np.ones(len(x), dtype=bool)
    unknown = np.flatnonzero(states.converged & (x > 0.0).all(axis=1))
    if not curve.may_split or not len(unknown):
        return stable
    T, x = states.temperature_K[unknown], x[unknown]
    stable[unknown] = stable_binaries(system.activity, T, x, curve.table, curve.trials)
    return stable


def _result(
    drawn: Drawn,
    kind: Literal["Txy", "Pxy"],
    x: FloatArray,
    curve: BoilingCurve,
    azeotropes: tuple[Azeotrope, ...],
) -> Diagram:
    """The diagram."""
    splits = tuple(_range(line) for line in curve.lines)
    return Diagram(
        kind,
        x[:, 0],
        drawn.y1,
        drawn.temperature_K,
        drawn.pressure_kPa,
        drawn.gamma,
        drawn.alpha,
        drawn.stable,
        drawn.converged,
        tuple(drawn.failure),
        azeotropes,
        max(splits, key=lambda r: r.x1_upper - r.x1_lower) if splits else None,
        splits,
    )


def _range(line: ThreePhase) -> SplitRange:
    return SplitRange(
        float(line.first[0]),
        float(line.second[0]),
        float(line.vapour[0]),
        line.temperature_K,
        line.pressure_kPa,
        line.azeotropic,
    )
