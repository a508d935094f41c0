"""From rows as a user has them to measurements: columns, units, ranges, and what cannot be true.

Columns (any subset): `temperature`, `pressure`, `x1`, `y1` (boiling states); `gamma_inf_1`,
`gamma_inf_2` (component 1 dilute in 2, and the other way); `gamma_1`, `gamma_2` with `x1`;
`x1_poor`, `x1_rich` (two liquids); `excess_enthalpy` with `x1`.
A unit may stand in the column's name (`temperature_C`, `pressure_mmHg`, `excess_enthalpy_kJ_mol`,
`x1_mass`, `y1_mole_percent`) or in `units`.
Uncertainties: `u_temperature`, `u_pressure`, `u_x1`, `u_y1`, `u_gamma` (relative),
`u_excess_enthalpy`, in the unit of their quantity. A blank or missing cell was not measured.
"""

import csv
import io
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.errors import MeasurementError, TooFewPointsError
from groups.handoff.comparisons import measurements as own
from groups.handoff.comparisons import units as unit_of
from groups.handoff.comparisons.measurements import (
    ActivityPoints,
    EnthalpyPoints,
    Measurements,
    SolubilityPoints,
    VapourLiquidPoints,
)

Cell = float | int | str | None
MOST_POINTS = 5000
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


def read_csv(
    text: str, molar_masses: tuple[float, float], units: Units | None = None
) -> Measurements:
    """Read measured points from CSV text with one header row.

    Parameters
    ----------
    text : str
        Comma, semicolon or tab separated; lines that start with # are skipped.
    molar_masses : tuple of float
        Of components 1 and 2, g/mol; used for mass fractions.
    units : Units, optional
        For columns whose names do not say a unit.

    Returns
    -------
    Measurements

    Raises
    ------
    MeasurementError
        For an unknown column, a cell that is no number, or a number that cannot be true; names the
        points.
    TooFewPointsError
        If no row holds a measurement.
    """
    lines = [line for line in text.splitlines() if line.strip() and not line.startswith("#")]
    if not lines:
        raise TooFewPointsError("The text holds no header and no point.", given=0, needed=1)
    separator = max(",;\t", key=lines[0].count)
    rows = list(csv.DictReader(io.StringIO("\n".join(lines)), delimiter=separator))
    wrong = [k for k, row in enumerate(rows) if None in row or None in row.values()]
    if wrong:
        raise MeasurementError(
            "A row has not as many cells as the header.", points=wrong, field="points"
        )
    clean = [{k.strip(): v for k, v in row.items()} for row in rows]
    return read_records(clean, molar_masses, units)


def read_records(
    records: Sequence[Mapping[str, Cell]],
    molar_masses: tuple[float, float],
    units: Units | None = None,
) -> Measurements:
    """Read measured points from records.

    Parameters
    ----------
    records : sequence of mapping
        One a point; the keys as the head of this module lists them.
    molar_masses : tuple of float
        Of components 1 and 2, g/mol.
    units : Units, optional

    Returns
    -------
    Measurements

    Raises
    ------
    MeasurementError, TooFewPointsError
        As `read_csv`.
    """
    if not 1 <= len(records) <= MOST_POINTS:
        raise TooFewPointsError(
            f"Give 1 to {MOST_POINTS} points. Got {len(records)}.", given=len(records), needed=1
        )
    table = _Table.of(records, units or Units(), molar_masses)
    found = Measurements(
        _vapour_liquid(table), _activities(table), _solubilities(table), _enthalpies(table)
    )
    used = {int(n) for kind in _kinds(found) for n in kind}
    idle = [k for k in range(len(records)) if k not in used]
    if idle:
        raise MeasurementError(
            f"{len(idle)} of {len(records)} points say nothing that can be compared, the first is "
            f"point {idle[0]}.",
            points=idle,
            cure="A point needs a temperature and: pressure with x1; or gamma_inf_1 or "
            "gamma_inf_2 (or gamma_1 or gamma_2 with x1); or x1_poor or x1_rich; or "
            "excess_enthalpy with x1.",
            field=f"points[{idle[0]}]",
        )
    return found


def _kinds(found: Measurements) -> tuple[IntArray, ...]:
    kinds = (found.vapour_liquid, found.activities, found.solubilities, found.enthalpies)
    return tuple(kind.number for kind in kinds)


@dataclass(frozen=True, slots=True)
class _Table:
    """Columns in K, kPa, mole fractions and J/mol; NaN where blank."""

    n: int
    columns: dict[str, FloatArray]

    @classmethod
    def of(
        cls,
        records: Sequence[Mapping[str, Cell]],
        units: Units,
        molar_masses: tuple[float, float],
    ) -> "_Table":
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


def _or(values: FloatArray, otherwise: FloatArray | float) -> FloatArray:
    return np.asarray(np.where(np.isfinite(values), values, otherwise))


def _vapour_liquid(table: _Table) -> VapourLiquidPoints:
    T, P, x, y = (table.get(name) for name in ("temperature", "pressure", "x1", "y1"))
    enthalpy = np.isfinite(table.get("excess_enthalpy"))
    k = np.flatnonzero(np.isfinite(T) & np.isfinite(P) & np.isfinite(x) & ~enthalpy)
    return VapourLiquidPoints(
        k.astype(np.int64),
        T[k],
        P[k],
        x[k],
        y[k],
        _or(table.get("u_temperature")[k], own.DEFAULT_U_TEMPERATURE_K),
        _or(table.get("u_pressure")[k], own.DEFAULT_U_PRESSURE * P[k]),
        _or(table.get("u_x1")[k], own.DEFAULT_U_X * _inside(x[k])),
        _or(table.get("u_y1")[k], own.DEFAULT_U_Y * np.maximum(_inside(y[k]), own.LEAST_SHARE)),
    )


def _inside(fraction: FloatArray) -> FloatArray:
    """1 within the diagram, falling to 0 at its ends: a pure component is known to be one."""
    return np.minimum(1.0, np.minimum(fraction, 1.0 - fraction) / own.END)


def _activities(table: _Table) -> ActivityPoints:
    T, x = table.get("temperature"), table.get("x1")
    u = _or(table.get("u_gamma"), own.DEFAULT_U_LN_GAMMA)
    parts = []
    for solute in (0, 1):
        for name, at in (
            (f"gamma_inf_{solute + 1}", np.full(table.n, float(solute))),
            (f"gamma_{solute + 1}", x),
        ):
            gamma = table.get(name)
            k = np.flatnonzero(np.isfinite(T) & np.isfinite(gamma) & np.isfinite(at))
            parts.append((k, T[k], at[k], np.full(len(k), solute), np.log(gamma[k]), u[k]))
    number, T, at, solutes, ln_gamma, u = (np.concatenate(p) for p in zip(*parts, strict=True))
    return ActivityPoints(number.astype(np.int64), T, at, solutes.astype(np.int64), ln_gamma, u)


def _solubilities(table: _Table) -> SolubilityPoints:
    T, poor, rich = (table.get(name) for name in ("temperature", "x1_poor", "x1_rich"))
    k = np.flatnonzero(np.isfinite(T) & (np.isfinite(poor) | np.isfinite(rich)))
    wrong = k[poor[k] >= rich[k]]
    if len(wrong):
        raise MeasurementError(
            f"'x1_poor' of point {int(wrong[0])} must be below 'x1_rich'.",
            points=wrong.tolist(),
            field=f"points[{int(wrong[0])}].x1_poor",
        )
    u = np.full((len(k), 2), own.DEFAULT_U_SOLUBILITY)
    return SolubilityPoints(k.astype(np.int64), T[k], poor[k], rich[k], u)


def _enthalpies(table: _Table) -> EnthalpyPoints:
    T, x, h = (table.get(name) for name in ("temperature", "x1", "excess_enthalpy"))
    k = np.flatnonzero(np.isfinite(T) & np.isfinite(x) & np.isfinite(h))
    least = np.maximum(own.DEFAULT_U_ENTHALPY * np.abs(h[k]), own.LEAST_U_ENTHALPY_J_MOL)
    u = _or(table.get("u_excess_enthalpy")[k], least)
    return EnthalpyPoints(k.astype(np.int64), T[k], x[k], h[k], u)
