"""What all schemas share: strict models and number types that refuse NaN and infinities."""

from typing import Annotated

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, WithJsonSchema


class StrictModel(BaseModel):
    """A model that refuses unknown fields, NaN and infinities."""

    model_config = ConfigDict(extra="forbid", allow_inf_nan=False, populate_by_name=True)


Number = Annotated[float, Field(strict=True, allow_inf_nan=False)]
"""A finite JSON number; texts and booleans are refused."""

WholeNumber = Annotated[int, Field(strict=True)]


def _as_list(value: object) -> object:
    return [value] if isinstance(value, (int, float)) and not isinstance(value, bool) else value


NumberOrList = Annotated[
    list[Number],
    BeforeValidator(_as_list, json_schema_input_type=float | list[float]),
    WithJsonSchema({"anyOf": [{"type": "number"}, {"type": "array", "items": {"type": "number"}}]}),
]
"""One number, or a list of them."""
