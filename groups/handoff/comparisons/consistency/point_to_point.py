"""Point by point: does the measured vapour agree with what the pressures alone say it is?"""

import numpy as np

from groups.handoff.comparisons.consistency.legendre import FlexibleFit
from groups.handoff.comparisons.consistency.record import ConsistencyTest, not_applicable
from groups.handoff.comparisons.measurements import VapourLiquidPoints
from groups.handoff.comparisons.observations import Observations

LEAST_POINTS = 5
MEAN_Y = 0.01
MEAN_P = 1.0  # per cent
#: A single point may miss by this many times the mean that is allowed; common practice, no source.
SINGLE = 3.0
INDEX_STEP = 0.025

VAN_NESS_CRITERION = (
    "gE is fitted to the pressures alone (temperatures, at constant pressure); the vapour that "
    "follows from it by Gibbs-Duhem differs from the measured one by at most 0.01 on average"
)
VAN_NESS_SOURCE = (
    "Van Ness, Byer & Gibbs, AIChE J. 19 (1973) 238; the limit of 0.01 by Fredenslund, Gmehling & "
    "Rasmussen, Vapor-Liquid Equilibria Using UNIFAC (1977)"
)
VAN_NESS_WEAKNESS = (
    "It needs good vapour pressures of the pure components and points over most of the diagram; at "
    "constant pressure the enthalpy of mixing is neglected."
)
DIRECT_CRITERION = (
    "The root mean square of the residuals of ln(gamma1/gamma2), after gE is fitted to the "
    "pressures alone, gives an index from 1 (below 0.025, excellent) to 10 (above 0.225, "
    "unacceptable); 5 or less is taken as passed here"
)
DIRECT_SOURCE = "Van Ness, Pure Appl. Chem. 67 (1995) 859, table 1 (from memory)"
FREDENSLUND_CRITERION = (
    "A Legendre expansion of gE, fitted to pressure and vapour together, reproduces the pressure "
    "within 1 % and y within 0.01, both on average"
)
FREDENSLUND_SOURCE = (
    "Fredenslund, Gmehling & Rasmussen, Vapor-Liquid Equilibria Using UNIFAC (1977), chapter 2; "
    "the 1 % in pressure as in Kang, Diky, Chirico, Magee, Muzny, Abdulagatov, Kazakov & Frenkel, "
    "J. Chem. Eng. Data 55 (2010) 3631"
)
FREDENSLUND_WEAKNESS = (
    "A flexible curve can share an error between pressure and vapour; at constant pressure the "
    "enthalpy of mixing is neglected."
)


def _why_not(points: VapourLiquidPoints) -> str:
    measured = np.isfinite(points.y1) & (points.x1 > 0.0) & (points.x1 < 1.0)
    if int(measured.sum()) < LEAST_POINTS:
        return f"needs {LEAST_POINTS} points with measured vapour inside the diagram"
    return ""


def van_ness_test(points: VapourLiquidPoints, by_pressure: FlexibleFit) -> ConsistencyTest:
    """Mean |y calculated from pressures - y measured|.

    Parameters
    ----------
    points : VapourLiquidPoints
    by_pressure : FlexibleFit
        Fitted to the pressures alone.

    Returns
    -------
    ConsistencyTest
    """
    name, texts = "point-to-point", (VAN_NESS_CRITERION, VAN_NESS_SOURCE, VAN_NESS_WEAKNESS)
    why = _why_not(points)
    if why:
        return not_applicable(name, *texts, why)
    miss = by_pressure.y1 - points.y1
    some = np.isfinite(miss) & (points.x1 > 0.0) & (points.x1 < 1.0)
    mean = float(np.abs(miss[some]).mean())
    bad = points.number[some & (np.abs(miss) > SINGLE * MEAN_Y)]
    bias = float(miss[some].mean())
    detail = f"mean |dy| = {mean:.4f}, mean dy = {bias:+.4f}, {len(by_pressure.coefficients)} terms"
    bad_points = tuple(int(k) for k in bad)
    return ConsistencyTest(name, mean <= MEAN_Y, mean, MEAN_Y, *texts, detail, bad_points)


def direct_test(points: VapourLiquidPoints, by_pressure: FlexibleFit) -> ConsistencyTest:
    """Van Ness's direct test: residuals of ln(gamma1/gamma2).

    Parameters
    ----------
    points : VapourLiquidPoints
    by_pressure : FlexibleFit
        Fitted to the pressures alone.

    Returns
    -------
    ConsistencyTest
    """
    name, texts = "direct", (DIRECT_CRITERION, DIRECT_SOURCE, VAN_NESS_WEAKNESS)
    why = _why_not(points)
    if why:
        return not_applicable(name, *texts, why)
    some = np.isfinite(points.y1) & (points.y1 > 0.0) & (points.y1 < 1.0)
    some &= (points.x1 > 0.0) & (points.x1 < 1.0)
    y, calculated = points.y1[some], by_pressure.y1[some]
    residual = np.log(y / (1.0 - y)) - np.log(calculated / (1.0 - calculated))
    rms = float(np.sqrt((residual**2).mean()))
    index = int(min(10, 1 + rms // INDEX_STEP))
    bad = points.number[some][np.abs(residual) > SINGLE * 5.0 * INDEX_STEP]
    detail = f"rms {rms:.3f}, index {index}"
    limit = 5.0 * INDEX_STEP
    bad_points = tuple(int(k) for k in bad)
    return ConsistencyTest(name, index <= 5, rms, limit, *texts, detail, bad_points)


def fredenslund_test(
    points: VapourLiquidPoints, seen: Observations, both: FlexibleFit
) -> ConsistencyTest:
    """Mean deviations of pressure and vapour from a flexible gE fitted to both.

    Parameters
    ----------
    points : VapourLiquidPoints
    seen : Observations
    both : FlexibleFit
        Fitted to pressure and vapour together.

    Returns
    -------
    ConsistencyTest
        `value` is the larger of both means over its limit, so 1 is the limit.
    """
    name = "Fredenslund"
    texts = (FREDENSLUND_CRITERION, FREDENSLUND_SOURCE, FREDENSLUND_WEAKNESS)
    why = _why_not(points)
    if why:
        return not_applicable(name, *texts, why)
    in_P = 100.0 * np.expm1(both.ln_pressure - seen.ln_pressure)
    in_y = both.y1 - points.y1
    some = np.isfinite(in_y) & (points.x1 > 0.0) & (points.x1 < 1.0)
    mean_P, mean_y = float(np.abs(in_P).mean()), float(np.abs(in_y[some]).mean())
    value = max(mean_P / MEAN_P, mean_y / MEAN_Y)
    bad = (np.abs(in_P) > SINGLE * MEAN_P) | (some & (np.abs(in_y) > SINGLE * MEAN_Y))
    detail = f"mean |dP| = {mean_P:.2f} %, mean |dy| = {mean_y:.4f}, "
    detail += f"{len(both.coefficients)} terms"
    bad_points = tuple(int(k) for k in points.number[bad])
    return ConsistencyTest(name, value <= 1.0, value, 1.0, *texts, detail, bad_points)
