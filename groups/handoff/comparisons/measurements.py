"""Measured points of one binary, in K, kPa, mole fractions and J/mol, with their uncertainties.

A point is a row as the user gave it; `number` (0-based) is its place there and names it in every
answer. What was not measured is NaN.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray

#: Standard uncertainties where none are stated: a good recirculating still or static cell.
#: Common practice, no source.
DEFAULT_U_TEMPERATURE_K = 0.05
DEFAULT_U_PRESSURE = 0.005  # relative
DEFAULT_U_X = 0.002
DEFAULT_U_Y = 0.005
#: Within this distance of a pure end the uncertainty of a fraction falls in proportion to it, that
#: of y not below this share.
END = 0.05
LEAST_SHARE = 0.1
DEFAULT_U_LN_GAMMA = 0.05
DEFAULT_U_SOLUBILITY = 0.05  # relative, of the smaller fraction
DEFAULT_U_ENTHALPY = 0.02  # relative, and at least 5 J/mol
LEAST_U_ENTHALPY_J_MOL = 5.0

#: Temperatures, or relative pressures, within these are one: what a thermostat or manostat holds.
SAME_TEMPERATURE_K = 0.1
SAME_PRESSURE = 0.005


@dataclass(frozen=True, slots=True)
class VapourLiquidPoints:
    """Boiling states; arrays of shape (n,). `y1` is NaN where the vapour was not analysed."""

    number: IntArray
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    x1: FloatArray
    y1: FloatArray
    u_temperature_K: FloatArray
    u_pressure_kPa: FloatArray
    u_x1: FloatArray
    u_y1: FloatArray

    @property
    def condition(self) -> str:
        """ "isothermal", "isobaric" or "mixed"."""
        if not len(self.number) or np.ptp(self.temperature_K) <= SAME_TEMPERATURE_K:
            return "isothermal"
        mean = float(self.pressure_kPa.mean())
        return "isobaric" if np.ptp(self.pressure_kPa) <= SAME_PRESSURE * mean else "mixed"

    @property
    def fractions(self) -> FloatArray:
        """Liquid mole fractions of shape (n, 2)."""
        return np.stack([self.x1, 1.0 - self.x1], axis=-1)


@dataclass(frozen=True, slots=True)
class ActivityPoints:
    """ln gamma of one component; `solute` is 0 or 1; arrays of shape (n,).

    At infinite dilution `x1` is 0 for component 1 and 1 for component 2.
    """

    number: IntArray
    temperature_K: FloatArray
    x1: FloatArray
    solute: IntArray
    ln_gamma: FloatArray
    u_ln_gamma: FloatArray


@dataclass(frozen=True, slots=True)
class SolubilityPoints:
    """Two liquids in equilibrium: x1 of the one poor in 1 and of the one rich in 1.

    Either may be NaN where only the other was measured; `u_ln` is the standard uncertainty of
    the logarithm of the smaller fraction in each liquid.
    """

    number: IntArray
    temperature_K: FloatArray
    x1_poor: FloatArray
    x1_rich: FloatArray
    u_ln: FloatArray


@dataclass(frozen=True, slots=True)
class EnthalpyPoints:
    """Excess molar enthalpies; arrays of shape (n,)."""

    number: IntArray
    temperature_K: FloatArray
    x1: FloatArray
    excess_enthalpy_J_mol: FloatArray
    u_J_mol: FloatArray


@dataclass(frozen=True, slots=True)
class Measurements:
    """Everything measured of one binary; kinds that were not measured have no points."""

    vapour_liquid: VapourLiquidPoints
    activities: ActivityPoints
    solubilities: SolubilityPoints
    enthalpies: EnthalpyPoints

    @property
    def n_points(self) -> int:
        """Number of points of all kinds."""
        kinds = (self.vapour_liquid, self.activities, self.solubilities, self.enthalpies)
        return sum(len(kind.number) for kind in kinds)

    @property
    def temperatures_K(self) -> FloatArray:
        """Temperatures of all points together, of shape (n_points,)."""
        kinds = (self.vapour_liquid, self.activities, self.solubilities, self.enthalpies)
        return np.concatenate([kind.temperature_K for kind in kinds])

    def swapped(self) -> "Measurements":
        """The same numbers as if the two components had been named the other way round."""
        v, d, s, h = self.vapour_liquid, self.activities, self.solubilities, self.enthalpies
        return Measurements(
            VapourLiquidPoints(
                v.number,
                v.temperature_K,
                v.pressure_kPa,
                1.0 - v.x1,
                1.0 - v.y1,
                v.u_temperature_K,
                v.u_pressure_kPa,
                v.u_x1,
                v.u_y1,
            ),
            ActivityPoints(
                d.number, d.temperature_K, 1.0 - d.x1, 1 - d.solute, d.ln_gamma, d.u_ln_gamma
            ),
            SolubilityPoints(
                s.number, s.temperature_K, 1.0 - s.x1_rich, 1.0 - s.x1_poor, s.u_ln[:, ::-1]
            ),
            EnthalpyPoints(
                h.number, h.temperature_K, 1.0 - h.x1, h.excess_enthalpy_J_mol, h.u_J_mol
            ),
        )
