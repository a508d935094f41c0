"""The user's own vapour pressure, in one of three forms, and the one that an answer used."""

from typing import Annotated, Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel

PressureUnit = Literal["kPa", "Pa", "bar", "mmHg", "atm"]
TemperatureRange = Annotated[
    list[Number], Field(min_length=2, max_length=2, examples=[[273.15, 373.15]])
]


class AntoineEquation(StrictModel):
    """log(P) = A - B / (T + C), with the base and the units stated."""

    equation: Literal["antoine"]
    A: Number
    B: Number
    C: Number
    log_base: Literal["10", "e"] = Field(description="The logarithm: '10' or 'e'.")
    pressure_unit: PressureUnit
    temperature_unit: Literal["K", "C"]
    temperature_range_K: TemperatureRange | None = None


class Dippr101Equation(StrictModel):
    """ln P = C1 + C2/T + C3 ln T + C4 T^C5, T in K."""

    equation: Literal["dippr-101"]
    C1: Number
    C2: Number
    C3: Number = 0.0
    C4: Number = 0.0
    C5: Number = 1.0
    pressure_unit: PressureUnit = "Pa"
    temperature_range_K: TemperatureRange | None = None


class MeasuredPoints(StrictModel):
    """Measured points, which are fitted."""

    equation: Literal["points"]
    temperature_K: list[Number] = Field(min_length=1, max_length=1000)
    pressure_kPa: list[Number] = Field(min_length=1, max_length=1000)


VapourPressureInput = Annotated[
    AntoineEquation | Dippr101Equation | MeasuredPoints, Field(discriminator="equation")
]


class VapourPressureUsed(StrictModel):
    """The vapour pressure that an answer rests on."""

    source: str = Field(description="user, published, published boiling point, or estimated")
    equation: str
    citation: str
    temperature_range_K: list[float]
    uncertainty_ln: float = Field(description="About one standard deviation of ln P in the range.")
    notes: list[str]
