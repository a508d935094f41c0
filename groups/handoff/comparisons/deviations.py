"""How far a liquid model lies from measured points, quantity by quantity and region by region."""

from dataclasses import dataclass

import numpy as np

from groups.activity.excess import GAS_CONSTANT_J_MOL_K
from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium import (
    IdealVapour,
    LiquidModel,
    System,
    VapourModel,
    binary_split,
    bubble_pressure,
    bubble_temperature,
)
from groups.equilibrium.system import SaturationLine
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations

REGIONS = ("all", "dilute in 1", "middle", "dilute in 2")
"""Where a model may be good or poor. "Dilute in 1" holds x1 below 0.2, and component 1 at
infinite dilution; the bounds are common practice, no source."""
DILUTE = 0.2

Series = dict[str, FloatArray]


@dataclass(frozen=True, slots=True)
class Deviation:
    """Calculated less measured, of one quantity in one region."""

    quantity: str
    unit: str
    points: int
    mean_absolute: float
    bias: float
    largest: float
    largest_point: int


@dataclass(frozen=True, slots=True)
class RegionDeviations:
    """One model in one region.

    `weighted_rms` is the root mean square of all residuals in units of their standard deviation,
    so about 1 is as good as the data; NaN where the region holds no point.
    """

    region: str
    points: int
    weighted_rms: float
    deviations: tuple[Deviation, ...]


@dataclass(frozen=True, slots=True)
class PointDeviation:
    """One number of one point, for tables and pictures of residuals."""

    point: int
    quantity: str
    unit: str
    temperature_K: float
    x1: float
    measured: float
    calculated: float


def in_region(region: str, x1: FloatArray) -> BoolArray:
    """Which mole fractions belong to a region.

    Parameters
    ----------
    region : str
        One of `REGIONS`.
    x1 : FloatArray of any shape

    Returns
    -------
    BoolArray of the same shape
    """
    if region == "dilute in 1":
        return np.asarray(x1 < DILUTE)
    if region == "dilute in 2":
        return np.asarray(x1 > 1.0 - DILUTE)
    if region == "middle":
        return np.asarray((x1 >= DILUTE) & (x1 <= 1.0 - DILUTE))
    return np.ones(np.shape(x1), dtype=bool)


def point_deviations(
    points: Measurements,
    model: LiquidModel,
    lines: tuple[SaturationLine, SaturationLine] | None,
    vapour: VapourModel | None = None,
) -> tuple[PointDeviation, ...]:
    """Every measured number beside the calculated one.

    Parameters
    ----------
    points : Measurements
    model : LiquidModel
    lines : tuple of SaturationLine or None
        None where no boiling point was measured.
    vapour : VapourModel, optional

    Returns
    -------
    tuple of PointDeviation
        A boiling point that the model does not reach is left out.
    """
    found: list[PointDeviation] = []
    if lines is not None and len(points.vapour_liquid.number):
        found += _boiling(points, System(model, lines, vapour or IdealVapour()))
    d = points.activities
    if len(d.number):
        ln_gamma = model.ln_gamma(d.temperature_K, np.stack([d.x1, 1.0 - d.x1], axis=-1))
        own = ln_gamma[np.arange(len(d.number)), d.solute]
        infinite = np.where(d.solute == 0, d.x1 == 0.0, d.x1 == 1.0)
        for name, kept in (("ln_gamma_infinite", infinite), ("ln_gamma", ~infinite)):
            where = (d.number[kept], d.temperature_K[kept], d.x1[kept])
            found += _listed(name, "1", *where, d.ln_gamma[kept], own[kept])
    h = points.enthalpies
    if len(h.number):
        x = np.stack([h.x1, 1.0 - h.x1], axis=-1)
        slope = (x * model.ln_gamma_slope(h.temperature_K, x)).sum(axis=1)
        enthalpy = -GAS_CONSTANT_J_MOL_K * h.temperature_K**2 * slope
        found += _listed(
            "excess_enthalpy",
            "J/mol",
            h.number,
            h.temperature_K,
            h.x1,
            h.excess_enthalpy_J_mol,
            enthalpy,
        )
    return (*found, *_liquids(points, model))


def _boiling(points: Measurements, system: System) -> list[PointDeviation]:
    v = points.vapour_liquid
    # An equation fitted to wild points may have no finite value far from them; states that are not
    # reached come back as NaN and are left out.
    with np.errstate(invalid="ignore", over="ignore"):
        at_T = bubble_pressure(system, v.temperature_K, v.fractions)
        at_P = bubble_temperature(system, v.pressure_kPa, v.fractions)
    where = (v.number, v.temperature_K, v.x1)
    isobaric = v.condition == "isobaric"
    vapour = at_P.vapour[:, 0] if isobaric else at_T.vapour[:, 0]
    found = _listed("pressure", "kPa", *where, v.pressure_kPa, at_T.pressure_kPa)
    found += _listed("temperature", "K", *where, v.temperature_K, at_P.temperature_K)
    found += _listed("y1", "1", *where, v.y1, vapour)
    ln_gamma = system.activity.ln_gamma(v.temperature_K, v.fractions)
    measured = measured_ln_gamma(points, system)
    for k in (0, 1):
        found += _listed(f"ln_gamma_{k + 1}", "1", *where, measured[:, k], ln_gamma[:, k])
    return found


def measured_ln_gamma(points: Measurements, system: System) -> FloatArray:
    """ln(y_i P / (x_i Psat_i)), with the vapour's correction; NaN where y was not measured.

    Parameters
    ----------
    points : Measurements
    system : System

    Returns
    -------
    FloatArray of shape (n_boiling_points, 2)
    """
    v = points.vapour_liquid
    y = np.stack([v.y1, 1.0 - v.y1], axis=-1)
    x = v.fractions
    sound = np.isfinite(y) & (x > 0.0) & (y > 0.0)
    ratio = np.log(np.where(sound, y, 1.0)) - np.log(np.where(sound, x, 1.0))
    correction = np.zeros_like(ratio)
    if not system.vapour.ideal:
        filled = np.where(np.isfinite(y), y, x)
        correction = system.vapour.ln_correction(v.temperature_K, v.pressure_kPa, filled)
    ln_gamma = ratio + np.log(v.pressure_kPa)[:, None] + correction
    ln_gamma = ln_gamma - system.ln_saturation(v.temperature_K)
    return np.asarray(np.where(sound & (x < 1.0), ln_gamma, np.nan))


def _liquids(points: Measurements, model: LiquidModel) -> list[PointDeviation]:
    """Measured solubilities beside the model's; where it sees no split nothing is listed."""
    s, found = points.solubilities, []
    for k in range(len(s.number)):
        T = float(s.temperature_K[k])
        split = binary_split(model, T)
        if split is None:
            continue
        for name, measured, own in (
            ("x1_poor", s.x1_poor[k], split[0][0]),
            ("x1_rich", s.x1_rich[k], split[1][0]),
        ):
            if np.isfinite(measured):
                point, x1 = int(s.number[k]), float(measured)
                found.append(PointDeviation(point, name, "1", T, x1, x1, float(own)))
    return found


def _listed(
    quantity: str,
    unit: str,
    number: IntArray,
    T: FloatArray,
    x1: FloatArray,
    measured: FloatArray,
    calculated: FloatArray,
) -> list[PointDeviation]:
    known = np.flatnonzero(np.isfinite(measured) & np.isfinite(calculated))
    rows = (number[known], T[known], x1[known], measured[known], calculated[known])
    return [
        PointDeviation(n, quantity, unit, t, x, m, c)
        for n, t, x, m, c in zip(*(row.tolist() for row in rows), strict=True)
    ]


def by_region(
    listed: tuple[PointDeviation, ...], seen: Observations, residuals: FloatArray
) -> tuple[RegionDeviations, ...]:
    """Summaries over all points and over the three regions.

    Parameters
    ----------
    listed : tuple of PointDeviation
    seen : Observations
    residuals : FloatArray of shape (N,)
        Weighted residuals of the same model.

    Returns
    -------
    tuple of RegionDeviations
        In the order of `REGIONS`.
    """
    names = list(dict.fromkeys((one.quantity, one.unit) for one in listed))
    answer = []
    for region in REGIONS:
        inside = in_region(region, seen.x1)
        some = residuals[inside]
        rms = float(np.sqrt((some**2).mean())) if len(some) else float("nan")
        rows = [one for one in listed if in_region(region, np.asarray(one.x1))]
        summaries = [_summary(name, unit, rows) for name, unit in names]
        kept = tuple(one for one in summaries if one is not None)
        points = len(set(seen.number[inside].tolist()) | {one.point for one in rows})
        answer.append(RegionDeviations(region, points, rms, kept))
    return tuple(answer)


def _summary(name: str, unit: str, rows: list[PointDeviation]) -> Deviation | None:
    own = [one for one in rows if one.quantity == name]
    if not own:
        return None
    off = np.array([one.calculated - one.measured for one in own])
    if name == "pressure":  # per cent of the pressure says more than kPa over a whole diagram
        off = 100.0 * off / np.array([one.measured for one in own])
        unit = "%"
    worst = int(np.argmax(np.abs(off)))
    return Deviation(
        name,
        unit,
        len(own),
        float(np.abs(off).mean()),
        float(off.mean()),
        float(off[worst]),
        own[worst].point,
    )
