"""From the vapour pressure in a request to the one that `groups.pure` takes, checked."""

from api.schemas.vapour_pressure import AntoineEquation, Dippr101Equation, MeasuredPoints
from groups.errors import MixwrightError
from groups.pure import AntoineInput, Dippr101Input, PointsInput, UserVapourPressure
from groups.pure.user import user_vapour_pressure

Given = AntoineEquation | Dippr101Equation | MeasuredPoints


def own_vapour_pressure(given: Given, field: str) -> UserVapourPressure:
    """What the user gave; a fault names `field`, the JSON pointer to it."""
    converted = _converted(given)
    try:
        user_vapour_pressure(converted)
    except MixwrightError as error:
        error.field = field
        raise
    return converted


def _converted(given: Given) -> UserVapourPressure:
    if isinstance(given, MeasuredPoints):
        return PointsInput(tuple(given.temperature_K), tuple(given.pressure_kPa))
    bounds = given.temperature_range_K
    range_K = None if bounds is None else (bounds[0], bounds[1])
    if isinstance(given, AntoineEquation):
        return AntoineInput(
            given.A,
            given.B,
            given.C,
            log_base=given.log_base,
            pressure_unit=given.pressure_unit,
            temperature_unit=given.temperature_unit,
            range_K=range_K,
        )
    return Dippr101Input(
        given.C1,
        given.C2,
        given.C3,
        given.C4,
        given.C5,
        pressure_unit=given.pressure_unit,
        range_K=range_K,
    )
