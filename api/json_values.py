"""Records of `groups` as JSON values: arrays become lists, what is not finite null."""

import dataclasses
import math

import numpy as np

JsonValue = None | bool | int | float | str | list["JsonValue"] | dict[str, "JsonValue"]


def json_value(value: object) -> JsonValue:
    """What JSON can hold of a record, an array, a sequence or a number.

    Raises `TypeError` for anything else, such as a model.
    """
    if value is None or isinstance(value, (bool, str)):
        return value
    if isinstance(value, (int, np.integer)):
        return int(value)
    if isinstance(value, (float, np.floating)):
        return float(value) if math.isfinite(value) else None
    if isinstance(value, np.ndarray):
        return json_value(value.tolist())
    if isinstance(value, (tuple, list)):
        return [json_value(one) for one in value]
    if dataclasses.is_dataclass(value):
        names = [field.name for field in dataclasses.fields(value)]
        return {name: json_value(getattr(value, name)) for name in names}
    raise TypeError(f"{type(value).__name__} is nothing that JSON holds")
