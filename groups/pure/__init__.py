"""Pure-component data: vapour pressure and the constants it rests on, by source."""

from groups.pure.choice import vapour_pressure
from groups.pure.saturation import VapourPressure

__all__ = ["VapourPressure", "vapour_pressure"]
