"""The boiling curve of a binary from one pure end to the other, and where its liquid may split.

The liquids of the curve are first evaluated at a few temperatures. That table gives the starts of
the boiling temperatures, and says at once whether the liquid could split anywhere in the range.
Only then are three-phase lines looked for, and the homogeneous curve is left out inside them: its
liquids do not exist.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.activity_curve import SUSPICIOUS_SLOPE, fractions
from groups.equilibrium.binary_split import may_split
from groups.equilibrium.boiling_table import BoilingTable, boiling_table
from groups.equilibrium.bubble import boiling_states, bubble_pressure
from groups.equilibrium.saturation import rough_boiling_temperatures
from groups.equilibrium.states import States, safe_log
from groups.equilibrium.system import System
from groups.equilibrium.three_phase import (
    ThreePhase,
    three_phase_at_pressure,
    three_phase_at_temperature,
)

#: s = ln(x1/x2) of the points that azeotropes are looked for between, besides those of a diagram:
#: 0.5 in s is a step of at most 0.12 in x1, and reaches azeotropes at x = 1e-7.
INNER_S = np.arange(-6.0, 6.25, 0.5)
EDGE_S = np.array([-16.0, -13.0, -11.0, -9.0, -7.5])
SEARCH_S = np.concatenate([EDGE_S, INNER_S, -EDGE_S[::-1]])
#: A point of the search this close in s to one of the diagram is left out.
CLOSE_S = 0.25
#: ln gamma at infinite dilution from which a spinodal may lie beyond SEARCH_S.
DILUTE = 9.0
#: Temperatures of the quick look for a liquid split, where no table gives it.
QUICK_NODES = 5
#: A split may lie this far above the boiling range of the pure components, in K.
HEADROOM_K = 30.0


@dataclass(frozen=True, slots=True)
class Condition:
    """What stays along a diagram: the pressure or the temperature."""

    pressure_kPa: float | None = None
    temperature_K: float | None = None

    def boil(self, system: System, x: FloatArray, table: BoilingTable | None = None) -> States:
        """Homogeneous bubble points of the liquids x at this condition."""
        if self.pressure_kPa is not None:
            return boiling_states(system, np.full(len(x), self.pressure_kPa), x, table)
        assert self.temperature_K is not None
        return bubble_pressure(system, self.temperature_K, x)


@dataclass(frozen=True, slots=True)
class BoilingCurve:
    """Bubble points outside three-phase lines, in the order of x1.

    Attributes
    ----------
    x : array of shape (m, 2)
    states : States
        Of m points.
    ln_alpha : array of shape (m,)
        ln of the relative volatility of component 1 to 2.
    may_split : bool
        False where no liquid of the range can be unstable.
    lines : tuple of ThreePhase
    trials : array of shape (k, 2)
        Liquids of the table, in the order of x1; those inside the lines too.
    table : BoilingTable or None
    """

    x: FloatArray
    states: States
    ln_alpha: FloatArray
    may_split: bool
    lines: tuple[ThreePhase, ...]
    trials: FloatArray
    table: BoilingTable | None


def boiling_curve(system: System, condition: Condition, x1: FloatArray) -> BoilingCurve:
    """Bubble points at the mole fractions x1 and at those that a search for azeotropes needs.

    Parameters
    ----------
    system : System
        Of two components.
    condition : Condition
    x1 : array of shape (k,)
        Mole fractions wanted, each from 0 to 1, ascending.

    Returns
    -------
    BoilingCurve
        Of more points than wanted, without those inside three-phase lines.
    """
    x = _points(x1)
    table = None
    if condition.pressure_kPa is not None:
        table = boiling_table(system, np.array([condition.pressure_kPa]), x)
    possible = _may_split(system, condition, x, table)
    lines = _lines(system, condition) if possible else ()
    trials, whole = x, table
    kept = np.ones(len(x), dtype=bool)
    for line in lines:
        kept &= ~inside(line, x)
    if lines:
        x, table = x[kept], None if table is None else table.of(kept)
    states = condition.boil(system, x, table)
    return BoilingCurve(x, states, _ln_alpha(system, states, x), possible, lines, trials, whole)


def inside(line: ThreePhase, x: FloatArray) -> BoolArray:
    """Which overall compositions (m, 2) lie between the liquids of a three-phase line."""
    # By the fraction that is the smaller at either side, so that a gap to the very edge is seen.
    between: BoolArray = (x[:, 0] > line.first[0]) & (x[:, 1] > line.second[1])
    return between


def _points(x1: FloatArray) -> FloatArray:
    wanted = np.stack([x1, 1.0 - x1], axis=-1)
    inner = (x1 > 0.0) & (x1 < 1.0)
    s = np.sort(np.log(x1[inner]) - np.log1p(-x1[inner]))
    above = np.searchsorted(s, SEARCH_S)
    bounds = np.concatenate([[-np.inf], s, [np.inf]])
    far = np.minimum(SEARCH_S - bounds[above], bounds[above + 1] - SEARCH_S) > CLOSE_S
    x = np.concatenate([wanted, fractions(SEARCH_S[far])])
    # Sorted by x1 and then by falling x2: close to x1 = 1 only x2 tells points apart.
    return np.asarray(x[np.lexsort((-x[:, 1], x[:, 0]))])


def _may_split(
    system: System, condition: Condition, x: FloatArray, table: BoilingTable | None
) -> bool:
    """False where ln a1 - ln a2 rises well with ln(x1/x2) at all compositions and temperatures."""
    if table is not None:
        ln_gamma = table.ln_gamma
    elif condition.temperature_K is not None:
        ln_gamma = system.activity.ln_gamma(np.full(len(x), condition.temperature_K), x)[None]
    else:
        low, high = _range(system, condition)
        return may_split(system.activity, np.linspace(low, high, QUICK_NODES))
    if max(ln_gamma[:, 0, 0].max(), ln_gamma[:, -1, 1].max()) > DILUTE:
        return True
    s = np.log(x[1:-1, 0]) - np.log(x[1:-1, 1])
    h = ln_gamma[:, 1:-1, 0] - ln_gamma[:, 1:-1, 1] + s
    return bool((np.diff(h, axis=1) < SUSPICIOUS_SLOPE * np.diff(s)).any())


def _range(system: System, condition: Condition) -> tuple[float, float]:
    assert condition.pressure_kPa is not None
    pure, immiscible = rough_boiling_temperatures(system, np.array([condition.pressure_kPa]))
    return float(immiscible[0]) - 2.0, float(pure.max()) + HEADROOM_K


def _lines(system: System, condition: Condition) -> tuple[ThreePhase, ...]:
    if condition.temperature_K is not None:
        return three_phase_at_temperature(system, condition.temperature_K)
    assert condition.pressure_kPa is not None
    return three_phase_at_pressure(system, condition.pressure_kPa, _range(system, condition)[1])


def _ln_alpha(system: System, states: States, x: FloatArray) -> FloatArray:
    """ln((y1/x1)/(y2/x2)), at a pure end from the activity coefficients."""
    ln_alpha = np.full(len(x), np.nan)
    inner = states.converged & (x > 0.0).all(axis=1) & (states.vapour > 0.0).all(axis=1)
    ln_k = np.log(states.vapour[inner]) - np.log(x[inner])
    ln_alpha[inner] = ln_k[:, 0] - ln_k[:, 1]
    ends = np.flatnonzero(states.converged & ~inner)
    T, P, y = states.temperature_K[ends], states.pressure_kPa[ends], states.vapour[ends]
    ln_end = safe_log(states.gamma[ends]) + system.ln_saturation(T)
    ln_end = ln_end - system.vapour.ln_correction(T, P, y)
    ln_alpha[ends] = ln_end[:, 0] - ln_end[:, 1]
    return ln_alpha
