"""All consistency tests of one data set, and the points that any of them names."""

from dataclasses import dataclass

from groups.equilibrium.system import SaturationLine
from groups.errors import ConvergenceError
from groups.handoff.comparisons.consistency.area import area_test
from groups.handoff.comparisons.consistency.legendre import flexible_fit
from groups.handoff.comparisons.consistency.point_to_point import (
    direct_test,
    fredenslund_test,
    van_ness_test,
)
from groups.handoff.comparisons.consistency.record import ConsistencyTest, Suspect
from groups.handoff.comparisons.consistency.single_points import (
    duplicate_test,
    end_points_test,
    outlier_test,
)
from groups.handoff.comparisons.measurements import VapourLiquidPoints
from groups.handoff.comparisons.observations import Observations


@dataclass(frozen=True, slots=True)
class Consistency:
    """Tests of a data set, the points to look at again, and the whole in words."""

    tests: tuple[ConsistencyTest, ...]
    suspects: tuple[Suspect, ...]
    verdict: str


def consistency(
    points: VapourLiquidPoints,
    seen: Observations,
    lines: tuple[SaturationLine, SaturationLine] | None,
) -> Consistency:
    """Test measured boiling points.

    Parameters
    ----------
    points : VapourLiquidPoints
    seen : Observations
        Of the same points.
    lines : tuple of SaturationLine or None
        None where no boiling point was measured.

    Returns
    -------
    Consistency
        Without tests where no boiling point was measured. No point is ever dropped.
    """
    if not len(points.number) or lines is None:
        return Consistency((), (), "No boiling points were given, so there is nothing to test.")
    tests = [end_points_test(points, lines), duplicate_test(points)]
    try:
        by_pressure = flexible_fit(seen, with_vapour=False)
        both = flexible_fit(seen, with_vapour=True)
    except ConvergenceError:
        return Consistency(tuple(tests), _suspects(tests), "No smooth curve follows these points.")
    tests += [
        outlier_test(points, by_pressure),
        area_test(points, seen),
        van_ness_test(points, by_pressure),
        direct_test(points, by_pressure),
        fredenslund_test(points, seen, both),
    ]
    return Consistency(tuple(tests), _suspects(tests), _verdict(tests))


def _suspects(tests: list[ConsistencyTest]) -> tuple[Suspect, ...]:
    named = sorted({k for test in tests for k in test.points})
    return tuple(
        Suspect(k, tuple(f"{t.name}: {t.criterion}" for t in tests if k in t.points)) for k in named
    )


def _verdict(tests: list[ConsistencyTest]) -> str:
    failed = [test.name for test in tests if test.passed is False]
    applied = [test.name for test in tests if test.passed is not None]
    if not applied:
        return "No test applies to these points; they can be neither trusted nor doubted by them."
    if not failed:
        return f"No reason to doubt the points: passed {', '.join(applied)}."
    passed = [name for name in applied if name not in failed]
    good = f"; passed {', '.join(passed)}" if passed else ""
    return (
        f"Doubtful: failed {', '.join(failed)}{good}. Look at the points named before using them."
    )
