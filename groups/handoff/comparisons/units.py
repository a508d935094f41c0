"""The units that measurements come in, and their way to K, kPa, mole fractions and J/mol."""

from typing import TypeVar

import numpy as np

from groups.arrays import FloatArray
from groups.errors import MeasurementError

TEMPERATURE_UNITS = {
    "K": (1.0, 0.0),
    "C": (1.0, 273.15),
    "F": (5.0 / 9.0, 459.67 * 5.0 / 9.0),
}
"""Scale and shift to kelvin: T/K = scale * value + shift; exact by definition."""

PRESSURE_UNITS = {
    "kPa": 1.0,
    "Pa": 1e-3,
    "MPa": 1e3,
    "bar": 100.0,
    "mbar": 0.1,
    "atm": 101.325,
    "mmHg": 101.325 / 760.0,
    "torr": 101.325 / 760.0,
    "psi": 6.894757293168361,
}
"""Factor to kPa; exact by definition (mmHg to seven digits, conventional)."""

ENTHALPY_UNITS = {"J/mol": 1.0, "kJ/mol": 1e3, "cal/mol": 4.184}
"""Factor to J/mol; the calorie is the thermochemical one."""

_Factor = TypeVar("_Factor")

FRACTION_UNITS = ("mole fraction", "mass fraction", "mole percent", "mass percent")


def kelvin(values: FloatArray, unit: str) -> FloatArray:
    """Temperatures in K."""
    scale, shift = _known(TEMPERATURE_UNITS, unit, "temperature")
    return scale * values + shift


def kelvin_difference(values: FloatArray, unit: str) -> FloatArray:
    """Differences and uncertainties of temperature in K."""
    return _known(TEMPERATURE_UNITS, unit, "temperature")[0] * values


def kilopascal(values: FloatArray, unit: str) -> FloatArray:
    """Pressures, or their uncertainties, in kPa."""
    return _known(PRESSURE_UNITS, unit, "pressure") * values


def joule_per_mol(values: FloatArray, unit: str) -> FloatArray:
    """Molar enthalpies in J/mol."""
    return _known(ENTHALPY_UNITS, unit, "excess_enthalpy") * values


def mole_fraction(values: FloatArray, unit: str, molar_masses: tuple[float, float]) -> FloatArray:
    """Mole fractions of component 1 in a binary.

    Parameters
    ----------
    values : FloatArray of shape (n,)
    unit : str
        One of `FRACTION_UNITS`.
    molar_masses : tuple of float
        Of both components, g/mol.

    Returns
    -------
    FloatArray of shape (n,)

    Raises
    ------
    MeasurementError
        If there is no such unit.
    """
    if unit not in FRACTION_UNITS:
        raise _unknown(unit, FRACTION_UNITS, "composition")
    share = values / 100.0 if unit.endswith("percent") else values
    if unit.startswith("mole"):
        return share
    first, second = share / molar_masses[0], (1.0 - share) / molar_masses[1]
    return np.asarray(first / (first + second))


def mole_fraction_slope(
    values: FloatArray, unit: str, molar_masses: tuple[float, float]
) -> FloatArray:
    """d x1 / d value, which carries an uncertainty over; arguments as `mole_fraction`."""
    scale = 0.01 if unit.endswith("percent") else 1.0
    if unit.startswith("mole"):
        return np.full_like(values, scale)
    w, (M1, M2) = values * scale, molar_masses
    return np.asarray(scale / (M1 * M2) / (w / M1 + (1.0 - w) / M2) ** 2)


def _known(table: dict[str, _Factor], unit: str, quantity: str) -> _Factor:
    if unit not in table:
        raise _unknown(unit, tuple(table), quantity)
    return table[unit]


def _unknown(unit: str, allowed: tuple[str, ...], quantity: str) -> MeasurementError:
    return MeasurementError(
        f"The unit '{unit}' of '{quantity}' is not known. Allowed: {', '.join(allowed)}.",
        cure="Use one of the units listed.",
        field=f"units.{quantity}",
    )
