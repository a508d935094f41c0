"""One mixture between its bubble and its dew point, searched for a vapour fraction."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.liquid_trials import nearly_ideal
from groups.equilibrium.phase_amounts import ln_fugacities
from groups.equilibrium.phase_newton import Unknown, polished
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_search import MOST_LIQUIDS, PhaseStates, find_phases
from groups.equilibrium.phase_trials import lowest_phases
from groups.equilibrium.system import System

#: Bracketing flashes; after the first few they halve the bracket.
BRACKETS = 45
#: Liquids of both sides whose mole fractions differ by less than this are one.
SAME = 0.02
#: Bracket in ln T or ln P below which the search ends.
NARROW = 1e-13
#: Tangent-plane distance below which the end state is not stable.
STABLE = -1e-8


@dataclass(slots=True)
class End:
    """One side of a bracket: ln T or ln P, the vapour fraction, and the phases there."""

    place: float
    fraction: float
    liquids: list[FloatArray]
    vapour: FloatArray | None


@dataclass(frozen=True, slots=True)
class Found:
    """Amounts (phases, n_components) with a vapour last, T and P."""

    amounts: FloatArray
    temperature_K: float
    pressure_kPa: float


@dataclass(slots=True)
class Bracketing:
    """One mixture between its bubble and its dew point."""

    system: System
    unknown: Unknown
    temperature_K: float
    pressure_kPa: float
    z: FloatArray
    wanted: float

    def run(self, wet: End, dry: End) -> Found | None:
        """Try Newton's method between both sides; shrink the bracket where it does not arrive."""
        for step in range(BRACKETS):
            found = self._between(wet, dry)
            if found is not None:
                return found
            if abs(dry.place - wet.place) < NARROW:
                return None
            share = (self.wanted - wet.fraction) / (dry.fraction - wet.fraction)
            if step % 2:
                share = 0.5
            middle = self._state(
                wet.place + float(np.clip(share, 0.02, 0.98)) * (dry.place - wet.place)
            )
            if middle is None:
                return None
            if middle.fraction < self.wanted:
                wet = middle
            else:
                dry = middle
        return None

    def _condition(self, place: float) -> tuple[float, float]:
        if self.unknown == "temperature":
            return float(np.exp(place)), self.pressure_kPa
        return self.temperature_K, float(np.exp(place))

    def _state(self, place: float) -> End | None:
        T, P = self._condition(place)
        problem = PhaseProblem.of_system(self.system, np.array([T]), np.array([P]), self.z[None])
        found: PhaseStates = find_phases(problem)
        if found.failure[0] is not None:
            return None
        count = int(found.liquids[0])
        vapour = found.amounts[0, count] if found.vapour[0] else None
        fraction = 0.0 if vapour is None else float(vapour.sum())
        return End(place, fraction, list(found.amounts[0, :count]), vapour)

    def _between(self, wet: End, dry: End) -> Found | None:
        """Newton's method from both sides mixed to the fraction wanted; a stable state or None."""
        weight = (dry.fraction - self.wanted) / (dry.fraction - wet.fraction)
        amounts = _joined(wet, dry, weight)
        T, P = self._condition(weight * wet.place + (1.0 - weight) * dry.place)
        for _ in range(MOST_LIQUIDS):
            end = polished(self.system, self.unknown, amounts, T, P, self.wanted)
            if end.lost < 0 or end.lost == len(amounts) - 1 or len(amounts) == 2:
                break
            rest = np.delete(end.amounts, end.lost, axis=0)
            amounts = rest * (self.z / np.where(self.z > 0.0, rest.sum(axis=0), 1.0))
        if not end.converged or not self._stable(end.amounts, end.temperature_K, end.pressure_kPa):
            return None
        return Found(end.amounts, end.temperature_K, end.pressure_kPa)

    def _stable(self, amounts: FloatArray, T: float, P: float) -> bool:
        problem = PhaseProblem.of_system(self.system, np.array([T]), np.array([P]), self.z[None])
        count = len(amounts) - 1
        ln_f = ln_fugacities(problem, amounts[None], count)
        ideal = nearly_ideal(self.system.activity, np.array([T]))
        probe = lowest_phases(problem, amounts[None], ln_f, count, ideal)
        return bool(probe.distance[0] > STABLE)


def _joined(wet: End, dry: End, weight: float) -> FloatArray:
    """The phases of both sides, mixed; liquids that are alike are one."""
    parts = [weight * part for part in wet.liquids]
    for part in dry.liquids:
        x = part / part.sum()
        close = [k for k, p in enumerate(parts) if np.abs(p / p.sum() - x).max() < SAME]
        if close:
            parts[close[0]] = parts[close[0]] + (1.0 - weight) * part
        else:
            parts.append((1.0 - weight) * part)
    nothing = np.zeros_like(parts[0]) if parts else np.zeros(0)
    vapour = (nothing if wet.vapour is None else weight * wet.vapour) + (
        nothing if dry.vapour is None else (1.0 - weight) * dry.vapour
    )
    return np.array([*parts[:MOST_LIQUIDS], vapour])
