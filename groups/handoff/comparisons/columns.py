"""Columns of measured points: what their names mean, and their way to K, kPa and mole fractions."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.errors import MeasurementError
from groups.handoff.comparisons import units as unit_of

Cell = float | int | str | None
_TEMPERATURE_K = (100.0, 1000.0)
_FRACTION_SUFFIX = {
    "mass": "mass fraction",
    "mass_percent": "mass percent",
    "mole_percent": "mole percent",
    "mole": "mole fraction",
}
_FRACTIONS = ("x1", "y1", "x1_poor", "x1_rich")
_PLAIN = ("gamma_inf_1", "gamma_inf_2", "gamma_1", "gamma_2", "u_x1", "u_y1", "u_gamma")
_WITH_UNIT = {
    "temperature": tuple(unit_of.TEMPERATURE_UNITS),
    "pressure": tuple(unit_of.PRESSURE_UNITS),
    "excess_enthalpy": tuple(unit_of.ENTHALPY_UNITS),
}


@dataclass(frozen=True, slots=True)
class Units:
    """The units of columns whose names do not say one."""

    temperature: str = "K"
    pressure: str = "kPa"
    composition: str = "mole fraction"
    excess_enthalpy: str = "J/mol"


@dataclass(frozen=True, slots=True)
class _Column:
    quantity: str
    unit: str | None
    values: FloatArray


@dataclass(frozen=True, slots=True)
class PointTable:
    """Columns in K, kPa, mole fractions and J/mol; NaN where blank."""

    n: int
    columns: dict[str, FloatArray]

    @classmethod
    def of(
        cls,
        records: Sequence[Mapping[str, Cell]],
        units: Units,
        molar_masses: tuple[float, float],
    ) -> "PointTable":
        names = list(dict.fromkeys(name for record in records for name in record))
        raw = [_column(name, records) for name in names]
        stated: dict[str, str | None] = {}
        columns: dict[str, FloatArray] = {}
        for one in raw:
            if one.quantity in columns:
                raise MeasurementError(
                    f"'{one.quantity}' is given in two columns, so its unit is not clear.",
                    cure="Give each quantity once, in one unit.",
                    field="points",
                )
            stated[one.quantity] = one.unit
            columns[one.quantity] = one.values
        return cls(len(records), _converted(columns, stated, units, molar_masses))

    def get(self, name: str) -> FloatArray:
        return self.columns.get(name, np.full(self.n, np.nan))


def _column(name: str, records: Sequence[Mapping[str, Cell]]) -> _Column:
    quantity, unit = _meaning(name)
    values = np.full(len(records), np.nan)
    for k, record in enumerate(records):
        cell = record.get(name)
        if cell is None or (isinstance(cell, str) and not cell.strip()):
            continue
        try:
            values[k] = float(cell)
        except (TypeError, ValueError) as error:
            raise MeasurementError(
                f"'{name}' of point {k} is no number: {cell!r}.",
                points=(k,),
                field=f"points[{k}].{name}",
            ) from error
        if not np.isfinite(values[k]):
            raise MeasurementError(
                f"'{name}' of point {k} is not finite.", points=(k,), field=f"points[{k}].{name}"
            )
    return _Column(quantity, unit, values)


def _meaning(name: str) -> tuple[str, str | None]:
    """Quantity and unit of a column's name."""
    if name in _PLAIN or name in _FRACTIONS:
        return name, None
    prefix = "u_" if name.startswith("u_") else ""
    bare = name.removeprefix("u_")
    for quantity, allowed in _WITH_UNIT.items():
        if bare == quantity:
            return name, None
        suffix = bare.removeprefix(quantity + "_")
        for unit in allowed:
            if bare != suffix and suffix == unit.replace("/", "_"):
                return prefix + quantity, unit
    for quantity in sorted(_FRACTIONS, key=len, reverse=True):
        suffix = name.removeprefix(quantity + "_")
        if name != suffix and suffix in _FRACTION_SUFFIX:
            return quantity, _FRACTION_SUFFIX[suffix]
    raise MeasurementError(
        f"The column '{name}' is not known.",
        cure="Known: temperature, pressure, x1, y1, gamma_inf_1, gamma_inf_2, gamma_1, gamma_2, "
        "x1_poor, x1_rich, excess_enthalpy, and u_temperature, u_pressure, u_x1, u_y1, u_gamma, "
        "u_excess_enthalpy; a unit may follow the name, as in temperature_C.",
        field=f"points[0].{name}",
    )


def _unit(name: str, stated: dict[str, str | None], units: Units) -> str:
    """The unit in the column's name; for an uncertainty that of its quantity; else the general."""
    bare = name.removeprefix("u_")
    said = stated[name] or stated.get(bare)
    if said is not None:
        return said
    if bare in _WITH_UNIT:
        return str(getattr(units, bare))
    return units.composition if bare in _FRACTIONS else ""


def _converted(
    columns: dict[str, FloatArray],
    stated: dict[str, str | None],
    units: Units,
    molar_masses: tuple[float, float],
) -> dict[str, FloatArray]:
    done: dict[str, FloatArray] = {}
    for name, values in columns.items():
        unit = _unit(name, stated, units)
        if name.startswith("u_"):
            bare = name.removeprefix("u_")
            done[name] = _uncertainty(bare, values, unit, columns, molar_masses)
        elif name == "temperature":
            done[name] = _temperatures(values, unit)
        elif name == "pressure":
            done[name] = unit_of.kilopascal(values, unit)
            _positive(name, done[name])
        elif name == "excess_enthalpy":
            done[name] = unit_of.joule_per_mol(values, unit)
        elif name in _FRACTIONS:
            done[name] = unit_of.mole_fraction(values, unit, molar_masses)
            _within_fractions(name, values, done[name], unit)
        else:
            done[name] = values
            _positive(name, values)
    return done


def _uncertainty(
    bare: str,
    values: FloatArray,
    unit: str,
    columns: dict[str, FloatArray],
    molar_masses: tuple[float, float],
) -> FloatArray:
    _positive(f"u_{bare}", values)
    if bare == "temperature":
        return unit_of.kelvin_difference(values, unit)
    if bare == "pressure":
        return unit_of.kilopascal(values, unit)
    if bare == "excess_enthalpy":
        return unit_of.joule_per_mol(values, unit)
    if bare in _FRACTIONS and bare in columns:
        slope = unit_of.mole_fraction_slope(columns[bare], unit, molar_masses)
        return np.asarray(values * slope)
    return values


def _temperatures(values: FloatArray, unit: str) -> FloatArray:
    T = unit_of.kelvin(values, unit)
    low, high = _TEMPERATURE_K
    bad = np.flatnonzero(np.less(T, low) | np.greater(T, high))
    if len(bad):
        first = int(bad[0])
        hint = ""
        if unit == "K" and (values[bad] + 273.15 > low).all():
            some = "All" if len(bad) == int(np.isfinite(values).sum()) else "Some"
            hint = f" {some} of them look like degrees Celsius."
        raise MeasurementError(
            f"The temperature of point {first}, {values[first]:g} {unit}, lies outside "
            f"{low:g} to {high:g} K.{hint}",
            points=bad.tolist(),
            field=f"points[{first}].temperature",
        )
    return T


def _positive(name: str, values: FloatArray) -> None:
    bad = np.flatnonzero(values <= 0.0)
    if len(bad):
        first = int(bad[0])
        raise MeasurementError(
            f"'{name}' of point {first} must be above zero. Got {values[first]:g}.",
            points=bad.tolist(),
            field=f"points[{first}].{name}",
        )


def _within_fractions(name: str, given: FloatArray, x: FloatArray, unit: str) -> None:
    bad = np.flatnonzero((x < 0.0) | (x > 1.0))
    if len(bad):
        first = int(bad[0])
        percent = unit.endswith("fraction") and float(np.nanmax(given)) > 1.5
        raise MeasurementError(
            f"'{name}' of point {first} must lie between 0 and 1 (or 0 and 100 %). "
            f"Got {given[first]:g} as a {unit}.",
            points=bad.tolist(),
            cure=f"State the composition in percent: '{name}_mole_percent' or "
            f"'{name}_mass_percent'."
            if percent
            else "",
            field=f"points[{first}].{name}",
        )
