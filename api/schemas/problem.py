"""A refusal as it goes over the wire (RFC 9457, application/problem+json)."""

from pydantic import BaseModel, ConfigDict, Field

from api.problem_types import all_problem_types


class FieldProblem(BaseModel):
    """One offending field of a request with several."""

    field: str = Field(description="JSON pointer into the request body, e.g. /components/1/smiles")
    detail: str
    cure: str


class Problem(BaseModel):
    """Why a request was refused, which field is to blame, and what to do about it."""

    model_config = ConfigDict(extra="allow")

    type: str = Field(
        description="Stable identifier of the kind of problem; GET it for a description.",
        json_schema_extra={"enum": [problem.uri for problem in all_problem_types().values()]},
    )
    title: str = Field(description="The kind of problem in words, the same for every occurrence.")
    status: int = Field(description="The HTTP status.")
    detail: str = Field(description="What is wrong in this request.")
    field: str | None = Field(
        default=None,
        description="JSON pointer to the offending field of the body, e.g. /mole_fractions/0; "
        "a name alone for a parameter of the address or a header.",
    )
    cure: str = Field(description="What to do about it.")
    errors: list[FieldProblem] = Field(
        default_factory=list, description="Every offending field, where there are several."
    )
