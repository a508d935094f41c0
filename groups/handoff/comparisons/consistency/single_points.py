"""Pure ends against vapour pressures, points given twice, and outliers."""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.system import SaturationLine
from groups.handoff.comparisons.consistency.legendre import FlexibleFit
from groups.handoff.comparisons.consistency.record import ConsistencyTest, not_applicable
from groups.handoff.comparisons.measurements import VapourLiquidPoints

PURE = 1e-6
END_LIMIT = 1.0  # per cent
SAME_X = 5e-4
OUTLIER = 3.5
#: Scatter below the stated uncertainty is no reason to call a point an outlier.
LEAST_SCALE = 1.0
LEAST_POINTS = 6

END_CRITERION = (
    "The pressure at a pure end differs from the component's vapour pressure at that temperature "
    "by at most 1 %"
)
END_SOURCE = (
    "Kang, Diky, Chirico, Magee, Muzny, Abdulagatov, Kazakov & Frenkel, J. Chem. Eng. Data 55 "
    "(2010) 3631 (consistency with pure-compound vapour pressures)"
)
END_WEAKNESS = (
    "A difference may lie in the vapour pressure used here as well as in the measurement; give "
    "your own vapour pressure where you have one."
)
OUTLIER_CRITERION = (
    "A point whose pressure lies more than 3.5 robust standard deviations (median absolute "
    "deviation / 0.6745) off a flexible curve through all points is an outlier"
)
OUTLIER_SOURCE = "Iglewicz & Hoaglin, How to Detect and Handle Outliers (1993)"
OUTLIER_WEAKNESS = (
    "The curve bends towards an outlier, most of all at the ends and with few points."
)
DUPLICATE_CRITERION = (
    "Points at one composition and one temperature (pressure) agree within three times their "
    "stated uncertainty, and none is given twice"
)
DUPLICATE_SOURCE = "common practice, no source"
DUPLICATE_WEAKNESS = "Agreement shows that a measurement repeats, not that it is right."


def end_points_test(
    points: VapourLiquidPoints, lines: tuple[SaturationLine, SaturationLine]
) -> ConsistencyTest:
    """Measured pure ends against the vapour pressures.

    Parameters
    ----------
    points : VapourLiquidPoints
    lines : tuple of SaturationLine

    Returns
    -------
    ConsistencyTest
    """
    texts = (END_CRITERION, END_SOURCE, END_WEAKNESS)
    ends = [(points.x1 >= 1.0 - PURE, lines[0], 1), (points.x1 <= PURE, lines[1], 2)]
    if not any(at.any() for at, _, _ in ends):
        return not_applicable("pure ends", *texts, "no pure component was measured")
    worst, words, bad = 0.0, [], []
    for at, line, component in ends:
        if not at.any():
            continue
        off = 100.0 * np.expm1(
            np.log(points.pressure_kPa[at]) - line.ln_kPa(points.temperature_K[at])
        )
        worst = max(worst, float(np.abs(off).max()))
        words.append(f"component {component}: {float(off[np.argmax(np.abs(off))]):+.2f} %")
        bad += [int(k) for k in points.number[at][np.abs(off) > END_LIMIT]]
    passed = worst <= END_LIMIT
    return ConsistencyTest(
        "pure ends", passed, worst, END_LIMIT, *texts, "; ".join(words), tuple(bad)
    )


def outlier_test(points: VapourLiquidPoints, by_pressure: FlexibleFit) -> ConsistencyTest:
    """Points that the flexible curve through all of them does not reach.

    Parameters
    ----------
    points : VapourLiquidPoints
    by_pressure : FlexibleFit

    Returns
    -------
    ConsistencyTest
    """
    texts = (OUTLIER_CRITERION, OUTLIER_SOURCE, OUTLIER_WEAKNESS)
    if len(points.number) < LEAST_POINTS:
        return not_applicable("outliers", *texts, f"needs {LEAST_POINTS} points")
    off = by_pressure.standardised
    distance = np.abs(off - np.median(off))
    scale = max(float(np.median(distance)) / 0.6745, LEAST_SCALE)
    score = distance / scale
    bad = tuple(int(k) for k in points.number[score > OUTLIER])
    worst = float(score.max())
    detail = f"largest {worst:.1f} at point {int(points.number[int(np.argmax(score))])}"
    return ConsistencyTest("outliers", not bad, worst, OUTLIER, *texts, detail, bad)


def duplicate_test(points: VapourLiquidPoints) -> ConsistencyTest:
    """Points measured twice, and points given twice.

    Parameters
    ----------
    points : VapourLiquidPoints

    Returns
    -------
    ConsistencyTest
    """
    texts = (DUPLICATE_CRITERION, DUPLICATE_SOURCE, DUPLICATE_WEAKNESS)
    order = np.lexsort((points.temperature_K, points.x1))
    worst, bad, copies, pairs = 0.0, [], [], 0
    for first, second in zip(order[:-1].tolist(), order[1:].tolist(), strict=True):
        if abs(points.x1[first] - points.x1[second]) > SAME_X or not _same(points, first, second):
            continue
        pairs += 1
        both = (int(points.number[first]), int(points.number[second]))
        distance = _distance(points, first, second)
        worst = max(worst, distance)
        if distance == 0.0 and points.x1[first] == points.x1[second]:
            copies.append(both)
        elif distance > 3.0:
            bad.append(both)
    if not pairs:
        return not_applicable("duplicates", *texts, "no two points share a composition")
    detail = f"{pairs} pairs at one composition, the worst {worst:.1f} uncertainties apart"
    if copies:
        detail += f"; {len(copies)} given twice"
    named = tuple(sorted({k for pair in bad + copies for k in pair}))
    passed = not bad and not copies
    return ConsistencyTest("duplicates", passed, worst, 3.0, *texts, detail, named)


def _same(points: VapourLiquidPoints, first: int, second: int) -> bool:
    """Whether two points were meant to be the same state: one condition at least is shared."""
    dT = abs(points.temperature_K[first] - points.temperature_K[second])
    dP = abs(np.log(points.pressure_kPa[first] / points.pressure_kPa[second]))
    return bool(dT <= 0.1 or dP <= 0.005)


def _distance(points: VapourLiquidPoints, first: int, second: int) -> float:
    """Largest difference of two points in units of its uncertainty."""

    def apart(values: FloatArray, u: FloatArray) -> float:
        difference = abs(float(values[first] - values[second]))
        return difference / float(np.hypot(u[first], u[second]))

    found = [
        apart(points.temperature_K, points.u_temperature_K),
        apart(points.pressure_kPa, points.u_pressure_kPa),
    ]
    if np.isfinite(points.y1[[first, second]]).all():
        found.append(apart(points.y1, points.u_y1))
    return max(found)
