"""What the requests and answers of all predictions share."""

from typing import Literal

from pydantic import Field

from api.schemas.base import StrictModel
from api.schemas.confidence import MethodUse
from api.schemas.molecule import MoleculeIdentity, MoleculeInput
from api.schemas.vapour_pressure import VapourPressureUsed

OnMissing = Literal["refuse", "estimate"]


class MethodChoice(StrictModel):
    """Which method to use, and what to do where it has no published parameter."""

    method: str = Field(
        default="auto", max_length=100, description="An identifier of GET /v1/methods."
    )
    on_missing: OnMissing = Field(
        default="estimate",
        description="'estimate' falls back on a completed table (grade at most low); "
        "'refuse' gives no number.",
    )


class MixtureRequest(MethodChoice):
    """A mixture by its components."""

    components: list[MoleculeInput] = Field(min_length=1)


class PredictionResponse(StrictModel):
    """What every answer about one mixture states."""

    components: list[MoleculeIdentity]
    method: str
    methods_used: list[MethodUse]
    cautions: list[str]


class VapourChoice(StrictModel):
    """Which vapour to reckon with."""

    vapour: Literal["auto", "ideal", "virial"] = Field(
        default="auto",
        description="'virial' is a real vapour with dimers of acids; 'auto' takes it where the "
        "mixture needs it, and the answer says why.",
    )


class BoilingRequest(MixtureRequest, VapourChoice):
    """A mixture that boils."""


class VapourUsed(StrictModel):
    """The vapour of an answer."""

    kind: Literal["ideal", "virial", "psrk"]
    reason: str = Field(description="Why this one, in a chemist's words.")


class VapourPredictionResponse(PredictionResponse):
    """An answer that also rests on vapour pressures and on a vapour."""

    vapour_pressures: list[VapourPressureUsed] = Field(
        description="Empty by the equation of state, which has its own"
    )
    vapour: VapourUsed
