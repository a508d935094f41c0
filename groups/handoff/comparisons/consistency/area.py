"""The area test of Redlich & Kister and Herington, with its known weakness."""

import numpy as np
from numpy.polynomial import legendre

from groups.arrays import FloatArray
from groups.handoff.comparisons.consistency.record import ConsistencyTest, not_applicable
from groups.handoff.comparisons.measurements import VapourLiquidPoints
from groups.handoff.comparisons.observations import Observations

NAME = "area"
ISOTHERMAL_LIMIT = 10.0
HERINGTON_FACTOR = 150.0
CRITERION = (
    "The curve of ln(gamma1/gamma2) against x1 encloses equal areas above and below zero: "
    "D = 100 |A - B|/(A + B) below 10 at constant temperature; at constant pressure D - J below "
    "10, with J = 150 (T_max - T_min)/T_min for the neglected enthalpy of mixing"
)
SOURCE = (
    "Redlich & Kister, Ind. Eng. Chem. 40 (1948) 345; Herington, J. Inst. Pet. 37 (1951) 457; the "
    "limit of 10 as in Gmehling & Onken, Vapor-Liquid Equilibrium Data Collection"
)
WEAKNESS = (
    "The total pressure cancels in gamma1/gamma2: the test sees only y and the ratio of the vapour "
    "pressures, errors at one end may cancel those at the other, and J is a rule of thumb "
    "(Wisniak, Ind. Eng. Chem. Res. 33 (1994) 177). Passing it proves little."
)
LEAST_POINTS = 5
_GRID = 2001
#: Beyond this far from the ends the curve would be extrapolated over too much of its area.
_REACH = 0.3


def area_test(points: VapourLiquidPoints, seen: Observations) -> ConsistencyTest:
    """Areas above and below zero of ln(gamma1/gamma2), through a polynomial of the points.

    Parameters
    ----------
    points : VapourLiquidPoints
    seen : Observations
        Of the same points.

    Returns
    -------
    ConsistencyTest
    """
    inner = np.isfinite(points.y1) & (points.x1 > 0.0) & (points.x1 < 1.0)
    inner &= (points.y1 > 0.0) & (points.y1 < 1.0)
    why = ""
    if int(inner.sum()) < LEAST_POINTS:
        why = f"needs {LEAST_POINTS} points with measured vapour inside the diagram"
    elif points.x1[inner].min() > _REACH or points.x1[inner].max() < 1.0 - _REACH:
        why = "the points leave too much of the diagram open to integrate over it"
    elif points.condition == "mixed":
        why = "neither temperature nor pressure is constant"
    if why:
        return not_applicable(NAME, CRITERION, SOURCE, WEAKNESS, why)
    x1, y1 = points.x1[inner], points.y1[inner]
    ratio = np.log(y1 / (1.0 - y1)) - np.log(x1 / (1.0 - x1))
    ratio = ratio - (seen.ln_saturation[inner, 0] - seen.ln_saturation[inner, 1])
    above, below = _areas(x1, ratio)
    D = 100.0 * abs(above - below) / (above + below)
    J = 0.0
    if points.condition == "isobaric":
        T = points.temperature_K
        J = HERINGTON_FACTOR * float(T.max() - T.min()) / float(T.min())
    value = D - J
    detail = f"areas {above:.4f} and {below:.4f}, D = {D:.1f}"
    detail += f", J = {J:.1f}" if points.condition == "isobaric" else ""
    passed = value < ISOTHERMAL_LIMIT
    return ConsistencyTest(
        NAME, passed, value, ISOTHERMAL_LIMIT, CRITERION, SOURCE, WEAKNESS, detail
    )


def _areas(x1: FloatArray, ratio: FloatArray) -> tuple[float, float]:
    """Areas above and below zero of a polynomial of low order through the points."""
    order = min(4, len(x1) - 2, 1 + len(x1) // 4)
    series = legendre.legfit(2.0 * x1 - 1.0, ratio, order)
    grid = np.linspace(0.0, 1.0, _GRID)
    values = legendre.legval(2.0 * grid - 1.0, series)
    return (
        float(np.trapezoid(np.maximum(values, 0.0), grid)),
        float(np.trapezoid(np.maximum(-values, 0.0), grid)),
    )
