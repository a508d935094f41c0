"""What to measure: the question and the plan."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel
from api.schemas.confidence import LevelInterval
from api.schemas.molecule import MoleculeIdentity, MoleculeInput
from api.schemas.prediction import OnMissing


class MeasurementPlanRequest(StrictModel):
    """A mixture and the question whose doubt is to shrink."""

    components: list[MoleculeInput] = Field(
        min_length=2, description="For a ranking: the two that a solvent is to part."
    )
    question: Literal["azeotrope", "relative_volatility", "ranking"]
    mole_fractions: list[Number] | None = Field(
        default=None, description="Liquid at which a relative volatility is asked for."
    )
    temperature_K: Number | None = None
    pressure_kPa: Number | None = None
    solvents: list[MoleculeInput] | None = Field(
        default=None, description="For a ranking: two or more, at `temperature_K`."
    )
    on_missing: OnMissing = "estimate"


class PlannedMeasurement(StrictModel):
    """One measurement, and the width expected once it and those before it are made."""

    kind: str = Field(description="gamma_infinity, P-x point or boiling_point")
    what: str
    components: list[int]
    temperature_K: float
    mole_fractions: list[float] | None
    expected_width: float


class MeasurementPlanResponse(StrictModel):
    """The few measurements that shrink the doubt most, the best first."""

    question: str
    interval: LevelInterval = Field(description="As it stands now, in the unit of the question.")
    components: list[MoleculeIdentity]
    measurements: list[PlannedMeasurement]
    cautions: list[str]
