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

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.errors import MeasurementError, TooFewPointsError
from groups.handoff.comparisons import measurements as own
from groups.handoff.comparisons.columns import Cell, PointTable, Units
from groups.handoff.comparisons.measurements import (
    ActivityPoints,
    EnthalpyPoints,
    Measurements,
    SolubilityPoints,
    VapourLiquidPoints,
)

MOST_POINTS = 5000


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
    try:
        rows = list(csv.DictReader(io.StringIO("\n".join(lines)), delimiter=separator))
    except csv.Error as error:
        raise MeasurementError(f"The text is no CSV: {error}.", field="points") from error
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
    table = PointTable.of(records, units or Units(), molar_masses)
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


def _or(values: FloatArray, otherwise: FloatArray | float) -> FloatArray:
    return np.asarray(np.where(np.isfinite(values), values, otherwise))


def _vapour_liquid(table: PointTable) -> VapourLiquidPoints:
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


def _activities(table: PointTable) -> ActivityPoints:
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


def _solubilities(table: PointTable) -> SolubilityPoints:
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


def _enthalpies(table: PointTable) -> EnthalpyPoints:
    T, x, h = (table.get(name) for name in ("temperature", "x1", "excess_enthalpy"))
    k = np.flatnonzero(np.isfinite(T) & np.isfinite(x) & np.isfinite(h))
    least = np.maximum(own.DEFAULT_U_ENTHALPY * np.abs(h[k]), own.LEAST_U_ENTHALPY_J_MOL)
    u = _or(table.get("u_excess_enthalpy")[k], least)
    return EnthalpyPoints(k.astype(np.int64), T[k], x[k], h[k], u)
