"""Pure-component data: vapour pressure and the constants it rests on, by source."""

from groups.pure.choice import vapour_pressure
from groups.pure.constant import Constant
from groups.pure.constants import PureConstants, constants
from groups.pure.points import PointsInput
from groups.pure.saturation import VapourPressure
from groups.pure.user import AntoineInput, Dippr101Input, UserVapourPressure

__all__ = [
    "AntoineInput",
    "Constant",
    "Dippr101Input",
    "PointsInput",
    "PureConstants",
    "UserVapourPressure",
    "VapourPressure",
    "constants",
    "vapour_pressure",
]
