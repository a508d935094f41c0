"""Two liquids under one vapour: the three-phase line of a binary that splits at its boiling point.

Both liquids have the same activities, so p3(T) = a1 Psat1 + a2 Psat2 with the activities of the
common tangent. At a given pressure one temperature is sought for each miscibility gap.
"""

from dataclasses import dataclass, replace

import numpy as np
from scipy.optimize import brentq

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.activity_curve import ActivityCurve, equal_areas, fractions
from groups.equilibrium.binary_split import BinarySplit, binary_splits, may_split
from groups.equilibrium.bubble import MAX_VAPOUR_PASSES, VAPOUR_TOLERANCE
from groups.equilibrium.saturation import rough_boiling_temperatures
from groups.equilibrium.states import RESIDUAL_TOLERANCE, log_sum_exp, safe_log
from groups.equilibrium.system import ROUGH_K, System
from groups.equilibrium.three_phase_newton import three_phase_line

#: Temperatures at which a miscibility gap is looked for, between the bounds of the boiling range.
NODES = 6
#: How far the lowest temperature may be off: it is read from a short table.
ROUGHNESS_K = 3.0


@dataclass(frozen=True, slots=True)
class ThreePhase:
    """Two binary liquids and their vapour in equilibrium; compositions are (x1, x2).

    `activity` holds a1 and a2, the same in both liquids.
    """

    temperature_K: float
    pressure_kPa: float
    first: FloatArray
    second: FloatArray
    vapour: FloatArray
    activity: FloatArray

    @property
    def azeotropic(self) -> bool:
        """True where the vapour lies between the two liquids: a heterogeneous azeotrope."""
        return bool(self.first[0] < self.vapour[0] < self.second[0])


def three_phase_at_temperature(system: System, temperature_K: float) -> tuple[ThreePhase, ...]:
    """Every three-phase state of a binary at a given temperature.

    Parameters
    ----------
    system : System
        Of two components.
    temperature_K : float
        In K, 40 to 2000.

    Returns
    -------
    tuple of ThreePhase
        In the order of x1; empty where no liquid splits.

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    Smith, Van Ness & Abbott (2005), section 14.5 (vapour-liquid-liquid equilibrium).
    """
    splits = binary_splits(system.activity, temperature_K)
    found = (_under_vapour(system, split) for split in splits)
    return tuple(state for state in found if _verified(system, state))


def three_phase_at_pressure(
    system: System, pressure_kPa: float, highest_K: float
) -> tuple[ThreePhase, ...]:
    """Every three-phase state of a binary at a given pressure.

    Parameters
    ----------
    system : System
        Of two components.
    pressure_kPa : float
        In kPa.
    highest_K : float
        Above the boiling temperatures of all homogeneous liquids, in K. The lower bound needs no
        help: activities do not exceed one, so p3 does not exceed the sum of vapour pressures.

    Returns
    -------
    tuple of ThreePhase
        In the order of temperature; empty where no boiling liquid splits.

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    As `three_phase_at_temperature`.
    """
    _, immiscible = rough_boiling_temperatures(system, np.array([pressure_kPa]))
    followed = _only_line(system, pressure_kPa, float(immiscible[0]))
    if followed is not None:
        return (followed,)
    nodes = np.linspace(float(immiscible[0]) - 2.0, highest_K, NODES)
    if not may_split(system.activity, nodes):
        return ()
    traces = [three_phase_at_temperature(system, float(T)) for T in nodes]
    states: list[ThreePhase] = []
    for k in range(NODES - 1):
        for state in _between(system, pressure_kPa, (nodes[k], nodes[k + 1]), traces[k : k + 2]):
            if not any(abs(state.temperature_K - old.temperature_K) < 1e-6 for old in states):
                states.append(state)
    return tuple(states)


def _only_line(system: System, pressure_kPa: float, lowest_K: float) -> ThreePhase | None:
    """The common case: one gap at the lowest temperature, and the same one where it boils."""
    curve, tops, bottoms = _gaps(system, lowest_K)
    ends = equal_areas(curve, int(tops[0]), int(bottoms[0])) if len(tops) == 1 else None
    if ends is None:
        return None
    guess = _boiling_guess(system, pressure_kPa, curve, ends)
    line = three_phase_line(system, pressure_kPa, np.array(ends), guess)
    if line is None or line.temperature_K < lowest_K - ROUGHNESS_K:
        return None
    curve, tops, _ = _gaps(system, line.temperature_K)
    if len(tops) != 1 or not curve.above_tangent(system.activity, float(line.s[0])):
        return None
    x = fractions(line.s)
    activity = np.exp(line.ln_partial - system.ln_saturation(np.array([line.temperature_K]))[0])
    state = ThreePhase(line.temperature_K, pressure_kPa, x[0], x[1], line.vapour, activity)
    return state if _verified(system, state) else None


def _boiling_guess(
    system: System, pressure_kPa: float, curve: ActivityCurve, ends: tuple[float, float]
) -> float:
    """Where both liquids would boil together if their activities stayed as they are."""
    ln_a = [
        float(np.interp(end, curve.s, curve.ln_a[:, i])) for i, end in ((0, ends[1]), (1, ends[0]))
    ]
    total = log_sum_exp(system.rough_saturation + np.array(ln_a))
    rising = np.maximum.accumulate(total)
    return float(1.0 / np.interp(np.log(pressure_kPa), rising, 1.0 / ROUGH_K))


def _gaps(system: System, T: float) -> tuple[ActivityCurve, IntArray, IntArray]:
    """The curve of activities with its tops and bottoms, one pair for each gap."""
    curve = ActivityCurve.trace(system.activity, T)
    tops, bottoms = curve.spinodals()
    return curve, tops, bottoms


def _between(
    system: System,
    pressure_kPa: float,
    bounds: tuple[float, float],
    traces: list[tuple[ThreePhase, ...]],
) -> list[ThreePhase]:
    """The crossings of p3 with the pressure between two temperatures, gap by gap."""
    low, high = traces
    count = max(len(low), len(high))
    found = []
    for gap in range(count):
        at_low = low[gap] if gap < len(low) else None
        at_high = high[gap] if gap < len(high) else None
        state = _crossing(system, pressure_kPa, bounds, (at_low, at_high), gap)
        if state is not None:
            found.append(state)
    return found


def _crossing(
    system: System,
    pressure_kPa: float,
    bounds: tuple[float, float],
    ends: tuple[ThreePhase | None, ThreePhase | None],
    gap: int,
) -> ThreePhase | None:
    """Shrink the bounds until the gap exists at both, then find the root."""
    low, high = bounds
    below, above = ends
    for _ in range(40):
        if below is not None and below.pressure_kPa > pressure_kPa:
            return None
        if above is not None and above.pressure_kPa < pressure_kPa:
            return None
        if below is not None and above is not None:
            return _root(system, pressure_kPa, low, high, gap)
        middle = 0.5 * (low + high)
        states = three_phase_at_temperature(system, middle)
        state = states[gap] if gap < len(states) else None
        if state is None:
            low, high = (low, middle) if above is None else (middle, high)
        elif state.pressure_kPa < pressure_kPa:
            low, below = middle, state
        else:
            high, above = middle, state
    return None


def _root(
    system: System, pressure_kPa: float, low: float, high: float, gap: int
) -> ThreePhase | None:
    def excess(T: float) -> float:
        states = three_phase_at_temperature(system, T)
        if gap >= len(states):
            raise ValueError("the gap closes between the bounds")
        return float(np.log(states[gap].pressure_kPa / pressure_kPa))

    try:
        T = float(brentq(excess, low, high, xtol=1e-11, rtol=1e-14))
    except ValueError:
        return None
    states = three_phase_at_temperature(system, T)
    if gap >= len(states) or abs(np.log(states[gap].pressure_kPa / pressure_kPa)) > 1e-9:
        return None
    return replace(states[gap], pressure_kPa=pressure_kPa)


def _under_vapour(system: System, split: BinarySplit) -> ThreePhase:
    T = np.array([split.temperature_K])
    liquids = np.stack([split.first, split.second])
    ln_partial = safe_log(liquids) + system.ln_volatility(np.repeat(T, 2), liquids)
    # The liquid in which a component is plentiful gives its activity with the least rounding.
    terms = np.array([[ln_partial[1, 0], ln_partial[0, 1]]])
    correction = np.zeros((1, 2))
    for _ in range(MAX_VAPOUR_PASSES):
        total = log_sum_exp(terms - correction)
        vapour = np.exp(terms - correction - total[:, None])
        fresh = system.vapour.ln_correction(T, np.exp(total), vapour)
        change = np.abs(fresh - correction).max()
        correction = fresh
        if change <= VAPOUR_TOLERANCE:
            break
    return ThreePhase(
        split.temperature_K,
        float(np.exp(total[0])),
        split.first,
        split.second,
        vapour[0],
        np.exp(terms[0] - system.ln_saturation(T)[0]),
    )


def _verified(system: System, state: ThreePhase) -> bool:
    """Equal fugacities of both components in all three phases."""
    liquids = np.stack([state.first, state.second])
    T = np.full(2, state.temperature_K)
    ln_liquid = safe_log(liquids) + system.ln_volatility(T, liquids)
    vapour = state.vapour[None]
    correction = system.vapour.ln_correction(T[:1], np.array([state.pressure_kPa]), vapour)
    ln_vapour = safe_log(vapour) + np.log(state.pressure_kPa) + correction
    return bool(np.abs(ln_liquid - ln_vapour).max() <= RESIDUAL_TOLERANCE)
