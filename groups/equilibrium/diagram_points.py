"""What a diagram shows at each composition: homogeneous states, or the line of three phases."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.boiling_curve import inside
from groups.equilibrium.states import States
from groups.equilibrium.three_phase import ThreePhase

SPLITS = "the liquid splits in two here, and no three-phase line was found at this condition"


@dataclass(slots=True)
class Drawn:
    """What is drawn at each point."""

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    y1: FloatArray
    gamma: FloatArray
    alpha: FloatArray
    stable: BoolArray
    converged: BoolArray
    failure: list[str | None]

    @classmethod
    def of(cls, states: States, alpha: FloatArray, stable: BoolArray) -> "Drawn":
        """Homogeneous states; blank where the liquid splits although no line was found."""
        drawn = cls(
            states.temperature_K,
            states.pressure_kPa,
            states.vapour[:, 0],
            states.gamma,
            alpha,
            stable,
            states.converged & stable,
            list(states.failure),
        )
        blank = ~stable
        if blank.any():
            for values in (drawn.temperature_K, drawn.pressure_kPa, drawn.y1, drawn.gamma, alpha):
                values[blank] = np.nan
            for k in np.flatnonzero(blank):
                drawn.failure[int(k)] = drawn.failure[int(k)] or SPLITS
        return drawn

    def spread(self, points: int, outside: IntArray) -> "Drawn":
        """Over all points of the diagram; those inside a gap are still empty."""
        if len(outside) == points:
            return self
        failure: list[str | None] = [None] * points
        for k, place in enumerate(outside.tolist()):
            failure[place] = self.failure[k]
        T, P, y1, gamma, alpha = (
            _spread(values, points, outside)
            for values in (self.temperature_K, self.pressure_kPa, self.y1, self.gamma, self.alpha)
        )
        stable, converged = np.zeros(points, dtype=bool), np.ones(points, dtype=bool)
        stable[outside], converged[outside] = self.stable, self.converged
        return Drawn(T, P, y1, gamma, alpha, stable, converged, failure)

    def over(self, x: FloatArray, lines: tuple[ThreePhase, ...]) -> "Drawn":
        """With the three-phase lines in place of liquids that do not exist."""
        for line in lines:
            within = inside(line, x)
            self.temperature_K[within], self.pressure_kPa[within] = (
                line.temperature_K,
                line.pressure_kPa,
            )
            self.y1[within] = line.vapour[0]
            ratio = line.vapour / x[within]
            self.alpha[within] = ratio[:, 0] / ratio[:, 1]
            self.gamma[within] = line.activity / x[within]
        return self


def _spread(values: FloatArray, points: int, outside: IntArray) -> FloatArray:
    whole = np.full((points, *values.shape[1:]), np.nan)
    whole[outside] = values
    return whole
