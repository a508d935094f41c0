"""Worked examples of the textbooks; the group counts are written out beside each."""

import csv
from pathlib import Path

import numpy as np
import pytest

from groups.activity import activity_model

EXAMPLES = list(
    csv.DictReader(
        Path(__file__).with_name("worked_examples.csv").read_text(encoding="utf-8").splitlines()
    )
)


def counts_of(text: str) -> dict[int, int]:
    return {int(number): int(n) for number, n in (part.split(":") for part in text.split())}


@pytest.mark.parametrize(
    "example", EXAMPLES, ids=lambda row: f"{row['name']}, {row['quantity']}{row['component']}"
)
def test_the_printed_value_is_reproduced(example: dict[str, str]) -> None:
    model = activity_model(
        [counts_of(text) for text in example["counts"].split(";")], example["method"]
    )
    x = [float(value) for value in example["x"].split(";")]
    computed = {
        "gamma": np.exp(model.ln_gamma(float(example["temperature_K"]), x)),
        "r": model.groups.volume,
        "q": model.groups.area,
    }[example["quantity"]]
    assert computed[int(example["component"]) - 1] == pytest.approx(
        float(example["value"]), abs=float(example["tolerance"])
    )
