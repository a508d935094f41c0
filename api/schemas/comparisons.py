"""Measurements against models: the request and the answer."""

from typing import Literal

from pydantic import Field, model_validator
from pydantic_core import PydanticCustomError

from api.schemas.base import Number, StrictModel, WholeNumber
from api.schemas.confidence import Interval
from api.schemas.equilibrium import AzeotropeChance, AzeotropeResult
from api.schemas.fits import ALPHA, Alpha, FittedNumber, FormName, ModelName
from api.schemas.molecule import MoleculeIdentity, MoleculeInput
from api.schemas.parameter_sheet import ParameterSheet
from api.schemas.prediction import OnMissing, VapourChoice, VapourUsed
from api.schemas.vapour_pressure import VapourPressureUsed

Cell = Number | str | None
_POINTS = (
    "One object a point. Keys: temperature, pressure, x1, y1 (boiling states); gamma_inf_1, "
    "gamma_inf_2; gamma_1, gamma_2 with x1; x1_poor, x1_rich (two liquids); excess_enthalpy with "
    "x1; u_temperature, u_pressure, u_x1, u_y1, u_gamma, u_excess_enthalpy (standard "
    "uncertainties). A unit may follow the name: temperature_C, pressure_mmHg, x1_mass."
)


class MeasurementUnits(StrictModel):
    """Units of the columns whose names do not say one."""

    temperature: Literal["K", "C", "F"] = "K"
    pressure: Literal["kPa", "Pa", "MPa", "bar", "mbar", "atm", "mmHg", "torr", "psi"] = "kPa"
    composition: Literal["mole fraction", "mass fraction", "mole percent", "mass percent"] = (
        "mole fraction"
    )
    excess_enthalpy: Literal["J/mol", "kJ/mol", "cal/mol"] = "J/mol"


class ComparisonRequest(VapourChoice):
    """A binary and what was measured of it: exactly one of `points`, `csv` and `thermoml`."""

    components: list[MoleculeInput] = Field(
        min_length=2, description="Component 1 is the one that x1 and y1 belong to."
    )
    points: list[dict[str, Cell]] | None = Field(default=None, min_length=1, description=_POINTS)
    csv: str | None = Field(
        default=None, description="The same as CSV text: one header row, one row a point."
    )
    thermoml: str | None = Field(default=None, description="A ThermoML document.")
    units: MeasurementUnits = Field(default_factory=MeasurementUnits)
    methods: list[str] | None = Field(
        default=None, max_length=20, description="Predictions to compare; all without it."
    )
    models: list[ModelName] | None = Field(
        default=None, max_length=20, description="Equations to fit to the points; all without it."
    )
    form: FormName | Literal["auto"] = Field(
        default="auto", description="'auto' takes the temperature form that the points can carry."
    )
    alpha: Alpha = Field(default=0.3, description=ALPHA)
    on_missing: OnMissing = "estimate"
    pressure_kPa: Number | None = Field(
        default=None, description="Of the diagram before and after; else that of the points."
    )
    temperature_K: Number | None = Field(
        default=None, description="Of the diagram, in place of a pressure."
    )
    diagram_points: WholeNumber = Field(default=51, description="2 to 2001.")
    table: Literal["points", "regions"] = Field(
        default="points", description="Which table `Accept: text/csv` gives."
    )

    @model_validator(mode="after")
    def _one_kind(self) -> "ComparisonRequest":
        given = [n for n in ("points", "csv", "thermoml") if getattr(self, n) is not None]
        if len(given) != 1:
            raise PydanticCustomError(
                "one_kind_of_points",
                "A comparison needs exactly one of 'points', 'csv' and 'thermoml'; got {given}.",
                {
                    "given": " and ".join(given) or "none",
                    "cure": "Keep one of 'points', 'csv' and 'thermoml'.",
                },
            )
        return self


class Mark(StrictModel):
    """Something about the data or the answer that must be known; `points` count from 0."""

    code: str
    message: str
    points: list[int]


class ConsistencyTest(StrictModel):
    """One published test of the data."""

    name: str
    passed: bool | None = Field(description="Null where the test does not apply.")
    value: float | None
    limit: float | None
    criterion: str
    source: str
    weakness: str = Field(description="What the test cannot see.")
    detail: str
    points: list[int] = Field(description="Points that fail on their own, from 0.")


class Suspect(StrictModel):
    """A point to look at again; it is never dropped."""

    point: int
    reasons: list[str]


class Consistency(StrictModel):
    """Can the data be believed?"""

    tests: list[ConsistencyTest]
    suspects: list[Suspect]
    verdict: str


class Deviation(StrictModel):
    """Calculated less measured, of one quantity in one region."""

    quantity: str
    unit: str
    points: int
    mean_absolute: float | None
    bias: float | None
    largest: float | None
    largest_point: int


class RegionDeviations(StrictModel):
    """One model over all points, or dilute in 1, in the middle, dilute in 2."""

    region: str
    points: int
    weighted_rms: float | None = Field(
        description="In standard deviations of the data: about 1 is as good as they are."
    )
    deviations: list[Deviation]


class PointDeviation(StrictModel):
    """One measured number beside the calculated one."""

    point: int
    quantity: str
    unit: str
    temperature_K: float | None
    x1: float | None
    measured: float | None
    calculated: float | None


class PointFit(StrictModel):
    """An equation fitted to the points."""

    form: str
    parameters: list[FittedNumber]
    covariance: list[list[float | None]]
    correlation: list[list[float | None]]
    weighted_rms: float | None
    aicc: float | None = Field(description="Information criterion; lower is better.")
    cross_validated_rms: float | None = Field(description="For points left out of the fit.")
    folds: int
    sheet: ParameterSheet


class ComparedModel(StrictModel):
    """One model beside the points."""

    name: str
    kind: Literal["predicted", "fitted"]
    table: str
    regions: list[RegionDeviations]
    points: list[PointDeviation]
    fit: PointFit | None


class LeftOut(StrictModel):
    """A model that was not compared, and why."""

    name: str
    reason: str


class BestInRegion(StrictModel):
    """The best prediction of one region."""

    region: str
    model: str
    weighted_rms: float | None


class Recommendation(StrictModel):
    """Which model to take, where, and why."""

    model: str | None
    kind: str | None
    by_region: list[BestInRegion]
    holds_for: str
    text: str


class UncertainDiagram(StrictModel):
    """A boiling diagram of `auto` with its 90 % intervals."""

    y1: list[float | None]
    temperature_K: list[float | None]
    pressure_kPa: list[float | None]
    y1_lower: list[float | None]
    y1_upper: list[float | None]
    temperature_K_lower: list[float | None]
    temperature_K_upper: list[float | None]
    pressure_kPa_lower: list[float | None]
    pressure_kPa_upper: list[float | None]
    relative_volatility_lower: list[float | None]
    relative_volatility_upper: list[float | None]
    azeotropes: list[AzeotropeResult]
    azeotrope_chance: AzeotropeChance
    ln_gamma_infinite: list[float] = Field(description="Of 1 dilute in 2, and of 2 dilute in 1.")
    ln_gamma_infinite_90: list[Interval]


class Conditioned(StrictModel):
    """The prediction before and after the points."""

    kind: Literal["Txy", "Pxy"]
    x1: list[float]
    before: UncertainDiagram
    after: UncertainDiagram
    scatter: float = Field(
        description="How much more the points scatter than their uncertainties say; 1 or more."
    )
    text: str


class ComparisonResponse(StrictModel):
    """Whether the points can be believed, every model beside them, and what they change."""

    components: list[MoleculeIdentity]
    points: int
    marks: list[Mark]
    consistency: Consistency
    models: list[ComparedModel]
    left_out: list[LeftOut]
    recommendation: Recommendation
    conditioned: Conditioned | None = Field(
        description="Null where no diagram is to be had, or the points do not move it."
    )
    vapour_pressures: list[VapourPressureUsed]
    vapour: VapourUsed | None = Field(description="Null where no boiling point was measured.")
    notes: list[str] = Field(description="What was left out of a ThermoML document.")
    cautions: list[str]
