"""A liquid mixture with its vapour pressures, ready for phase equilibrium, and its reasons."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Reason
from groups.confidence.vapour_rules import (
    association_reasons,
    critical_reasons,
    pressure_reasons,
    saturation_reasons,
)
from groups.equilibrium import System
from groups.errors import MixwrightError
from groups.prediction.bands import Drawn, drawn_around
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid
from groups.pure import VapourPressure, vapour_pressure


@dataclass(frozen=True, slots=True)
class BoilingMixture:
    """A liquid, the vapour pressures of its components, and the system made of both."""

    liquid: Liquid
    lines: tuple[VapourPressure, ...]
    system: System
    on_missing: OnMissing

    def drawn(self, temperature_K: float) -> Drawn | None:
        """Liquids and vapour pressures drawn around the mixture; None without calibration.

        Parameters
        ----------
        temperature_K : float
            Where the widths are taken.

        Returns
        -------
        Drawn or None
        """
        if self.liquid.method == "ideal" and len(self.liquid.molecules) > 1:
            return None
        return drawn_around(self.liquid.molecules, self.on_missing, temperature_K, self.lines)

    def reasons(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, mole_fractions: FloatArray
    ) -> list[Reason]:
        """Reasons to doubt vapour-liquid equilibrium over the points; NaN points are left out.

        Parameters
        ----------
        temperature_K, pressure_kPa : array of shape (n_points,)
        mole_fractions : array of shape (n_points, n_components)

        Returns
        -------
        list of Reason
        """
        known = np.isfinite(temperature_K) & np.isfinite(pressure_kPa)
        known &= np.isfinite(mole_fractions).all(axis=1)
        if not known.any():
            return list(self.liquid.fixed_reasons)
        T, P = temperature_K[known], pressure_kPa[known]
        lowest, highest = float(T.min()), float(T.max())
        molecules = self.liquid.molecules
        return [
            *self.liquid.reasons(T, mole_fractions[known]),
            *pressure_reasons(float(P.max())),
            *critical_reasons(molecules, self.lines, highest),
            *association_reasons(molecules),
            *saturation_reasons(molecules, self.lines, lowest, highest),
        ]


def boiling_mixture(
    components: Sequence[Component],
    method: str,
    on_missing: OnMissing,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
) -> BoilingMixture:
    """Choose the activity model and the vapour pressures for one temperature or one pressure.

    Parameters
    ----------
    components : sequence of Component
    method : str
    on_missing : {"refuse", "estimate"}
    temperature_K, pressure_kPa : float or None
        What is fixed; the vapour-pressure equations are chosen to span the temperatures it means.

    Returns
    -------
    BoilingMixture

    Raises
    ------
    PredictionError
        If no table or no vapour pressure is to be had.
    """
    mixture = liquid([component.molecule for component in components], method, on_missing)
    span = None if temperature_K is None else (temperature_K, temperature_K)
    if pressure_kPa is not None:
        boiling = [line.boiling_temperature(pressure_kPa) for line in _lines(components, None)]
        span = (min(boiling), max(boiling))
    lines = _lines(components, span)
    return BoilingMixture(mixture, lines, System(mixture.model, lines), on_missing)


def _lines(
    components: Sequence[Component], span: tuple[float, float] | None
) -> tuple[VapourPressure, ...]:
    lines = []
    for index, component in enumerate(components):
        try:
            lines.append(
                vapour_pressure(component.molecule, component.vapour_pressure, temperature_K=span)
            )
        except MixwrightError as error:
            place = f"components[{index}]"
            error.field = f"{place}.{error.field}" if error.field else place
            raise
    return tuple(lines)
