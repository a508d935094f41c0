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
from groups.prediction.vapours import (
    ASSUMED_IDEAL,
    VapourAsked,
    VapourUsed,
    chosen_vapour,
    not_converged_under_real_vapour,
    noted,
    vapour_model,
)
from groups.pure import VapourPressure, vapour_pressure
from groups.vapour import VapourNote, range_notes


@dataclass(frozen=True, slots=True)
class BoilingMixture:
    """A liquid, the vapour pressures of its components, and the system made of both."""

    liquid: Liquid
    lines: tuple[VapourPressure, ...]
    system: System
    on_missing: OnMissing
    vapour: VapourUsed = ASSUMED_IDEAL
    vapour_notes: tuple[VapourNote, ...] = ()

    def under_ideal_vapour(self) -> "BoilingMixture":
        """The same, where the real vapour asked for by need gave no state."""
        return BoilingMixture(
            self.liquid,
            self.lines,
            System(self.system.activity, self.lines),
            self.on_missing,
            not_converged_under_real_vapour(),
        )

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
        self,
        temperature_K: FloatArray,
        pressure_kPa: FloatArray,
        mole_fractions: FloatArray,
        vapour: FloatArray | None = None,
    ) -> list[Reason]:
        """Reasons to doubt vapour-liquid equilibrium over the points; NaN points are left out.

        Parameters
        ----------
        temperature_K, pressure_kPa : array of shape (n_points,)
        mole_fractions : array of shape (n_points, n_components)
            Of the liquid.
        vapour : array of shape (n_points, n_components), optional
            Mole fractions of the vapour, for the range of the virial equation.

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
            *critical_reasons(molecules, self.lines, highest),
            *saturation_reasons(molecules, self.lines, lowest, highest),
            *self._vapour_reasons(T, P, None if vapour is None else vapour[known]),
            *([_ACTIVITY_ONLY] if self.liquid.method == "psrk" else []),
        ]

    def _vapour_reasons(
        self, T: FloatArray, P: FloatArray, vapour: FloatArray | None
    ) -> list[Reason]:
        """What an assumed ideal vapour costs, or what a real one rests on."""
        molecules, model = self.liquid.molecules, vapour_model(self.system)
        if model is not None:
            beyond = () if vapour is None else range_notes(model, T, P, vapour)
            return noted([*self.vapour_notes, *beyond])
        if self.vapour.judged:
            return []  # an ideal vapour was weighed against a real one and found good enough
        return [*pressure_reasons(float(P.max())), *association_reasons(molecules)]


_ACTIVITY_ONLY = Reason(
    "equation_of_state_not_used",
    "Of psrk only the activity coefficients are used here, with vapour pressures; its equation of "
    "state answers bubble points, dew points, flashes at temperature and pressure, and gas "
    "solubilities.",
    "psrk",
    "moderate",
)


def boiling_mixture(
    components: Sequence[Component],
    method: str,
    on_missing: OnMissing,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    vapour: VapourAsked = "ideal",
    fractions: FloatArray | None = None,
) -> BoilingMixture:
    """Choose the activity model, vapour pressures and vapour for one temperature or pressure.

    Parameters
    ----------
    components : sequence of Component
    method : str
    on_missing : {"refuse", "estimate"}
    temperature_K, pressure_kPa : float or None
        What is fixed; the vapour-pressure equations are chosen to span the temperatures it means.
    vapour : {"auto", "ideal", "virial"}
    fractions : array of shape (1, n_components), optional
        The mixture asked about; a component with zero has no say in the choice of a vapour.

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
    if temperature_K is None and pressure_kPa is not None:
        boiling = [line.boiling_temperature(pressure_kPa) for line in _lines(components, None)]
        span = (min(boiling), max(boiling))
    lines = _lines(components, span)
    chosen = chosen_vapour(
        System(mixture.model, lines),
        mixture.molecules,
        lines,
        vapour,
        temperature_K=temperature_K,
        pressure_kPa=pressure_kPa,
        present=None if fractions is None else (fractions[0] > 0.0).tolist(),
    )
    return BoilingMixture(mixture, lines, chosen.system, on_missing, chosen.used, chosen.notes)


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
