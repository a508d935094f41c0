"""`mixwright plan`: what to measure to settle a question."""

import argparse

from api import answers
from api.commands.quantities import molecule
from api.commands.text import aligned, cautions_text
from api.schemas.measurement_plan import MeasurementPlanResponse
from groups import prediction
from groups.errors import InvalidInputError
from groups.prediction import Component


def plan(given: argparse.Namespace) -> str:
    """The text to print."""
    components = [molecule(text) for text in given.components]
    if given.solvents is not None:
        if given.temperature is None:
            raise InvalidInputError("The temperature is missing.", cure="Give it with -T.")
        solvents = [molecule(text) for text in given.solvents]
        found = prediction.ranking_plan(components, solvents, given.temperature, given.on_missing)
    else:
        found = prediction.measurement_plan(
            [Component(one) for one in components],
            "azeotrope" if given.fractions is None else "relative_volatility",
            mole_fractions=given.fractions,
            temperature_K=given.temperature,
            pressure_kPa=given.pressure,
            on_missing=given.on_missing,
        )
    answer = answers.measurement_plan(found, components)
    return str(answer.model_dump_json(indent=2)) if given.json else plan_text(answer)


def plan_text(answer: MeasurementPlanResponse) -> str:
    """The question as it stands, and the measurements in order."""
    now = answer.interval
    head = (
        f"Question: {answer.question}\n"
        f"As it stands: {now.lower:.3f} to {now.upper:.3f} with {now.level:.0%} probability, "
        f"{now.upper - now.lower:.3f} wide"
    )
    rows = [
        [k, one.what, f"{one.temperature_K:.1f}", f"{one.expected_width:.3f}"]
        for k, one in enumerate(answer.measurements, start=1)
    ]
    table = (
        aligned(["", "measure", "at T / K", "width expected after it"], rows)
        if rows
        else "No single measurement shrinks this doubt by a fiftieth."
    )
    return "\n\n".join([head, table, cautions_text(answer.cautions)])
