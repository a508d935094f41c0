"""What a phase-equilibrium calculation needs: a liquid model, saturation lines, a vapour model.

The equilibrium condition of every component i (modified Raoult's law) reads

    y_i P exp(correction_i) = x_i gamma_i Psat_i

with correction_i = ln(phi_i / (phi_i,sat Poynting_i)), zero for an ideal vapour.
"""

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Protocol

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.errors import ShapeError

#: Between these temperatures ln P is taken straight in 1/T for a guess, which costs about a kelvin.
ROUGH_K = np.geomspace(60.0, 1500.0, 40)


class LiquidModel(Protocol):
    """The part of an activity-coefficient model that phase equilibrium uses."""

    @property
    def n_components(self) -> int:
        """Number of components."""

    def ln_gamma(self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike) -> FloatArray:
        """ln gamma of shape (..., n_components)."""

    def ln_gamma_slope(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        """d ln gamma / dT at constant composition, in 1/K, of shape (..., n_components)."""

    def ln_gamma_mole_derivatives(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        """n d ln gamma_i / dn_j of shape (..., n_components i, n_components j); symmetric."""


class SaturationLine(Protocol):
    """Vapour pressure of one pure component, continued beyond its range."""

    @property
    def critical_temperature_K(self) -> float | None:
        """Critical temperature in K, where known."""

    def ln_kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """ln of the vapour pressure in kPa, in the shape of the temperature."""

    def slope(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """d ln P / dT in 1/K, in the shape of the temperature."""


class VapourModel(Protocol):
    """The seam for a real vapour."""

    @property
    def ideal(self) -> bool:
        """True where the correction is zero by definition."""

    def ln_correction(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> FloatArray:
        """ln(phi_i / (phi_i,sat Poynting_i)), in the shape of `vapour` (n, n_components)."""


@dataclass(frozen=True, slots=True)
class IdealVapour:
    """An ideal-gas vapour: every correction is zero."""

    ideal: bool = field(default=True, init=False)

    def ln_correction(
        self,
        temperature_K: FloatArray,  # noqa: ARG002
        pressure_kPa: FloatArray,  # noqa: ARG002
        vapour: FloatArray,
    ) -> FloatArray:
        """Zeros in the shape of `vapour`."""
        return np.zeros_like(vapour)


@dataclass(frozen=True, slots=True)
class System:
    """A mixture ready for phase-equilibrium calculations.

    Parameters
    ----------
    activity : LiquidModel
        Activity coefficients of the liquid.
    vapour_pressures : tuple of SaturationLine
        One saturation line for each component, in the order of the liquid model.
    vapour : VapourModel
        Correction for a real vapour; ideal by default.

    Raises
    ------
    ShapeError
        If the number of saturation lines is not the number of components.
    """

    activity: LiquidModel
    vapour_pressures: tuple[SaturationLine, ...]
    vapour: VapourModel = field(default_factory=IdealVapour)
    _rough: list[FloatArray] = field(default_factory=list, init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        if len(self.vapour_pressures) != self.activity.n_components:
            raise ShapeError(
                f"The liquid model has {self.activity.n_components} components, but "
                f"{len(self.vapour_pressures)} vapour pressures were given.",
                cure="Give one vapour pressure for each component.",
                field="vapour_pressures",
            )

    @property
    def n_components(self) -> int:
        """Number of components."""
        return len(self.vapour_pressures)

    @property
    def rough_saturation(self) -> FloatArray:
        """ln of the pure vapour pressures in kPa at ROUGH_K, for first guesses; evaluated once."""
        if not self._rough:
            self._rough.append(self.ln_saturation(ROUGH_K))
        return self._rough[0]

    def ln_saturation(self, temperature_K: FloatArray) -> FloatArray:
        """ln of the pure vapour pressures in kPa, of shape (..., n_components)."""
        return _stack([line.ln_kPa(temperature_K) for line in self.vapour_pressures])

    def ln_saturation_slope(self, temperature_K: FloatArray) -> FloatArray:
        """d ln Psat / dT in 1/K, of shape (..., n_components)."""
        return _stack([line.slope(temperature_K) for line in self.vapour_pressures])

    def ln_volatility(self, temperature_K: FloatArray, liquid: FloatArray) -> FloatArray:
        """ln(gamma_i Psat_i), Psat in kPa, in the shape of `liquid` (..., n_components)."""
        ln_gamma = self.activity.ln_gamma(temperature_K, liquid)
        return ln_gamma + self.ln_saturation(temperature_K)

    def ln_volatility_slope(self, temperature_K: FloatArray, liquid: FloatArray) -> FloatArray:
        """d ln(gamma_i Psat_i) / dT at constant composition, in 1/K."""
        slope = self.activity.ln_gamma_slope(temperature_K, liquid)
        return slope + self.ln_saturation_slope(temperature_K)


def _stack(columns: Sequence[FloatArray]) -> FloatArray:
    return np.stack(columns, axis=-1)
