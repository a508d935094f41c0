"""`mixwright advise`: which class of property method a mixture needs."""

import argparse

from api import advice_answers
from api.commands.quantities import molecule
from api.commands.text import aligned, cautions_text, doubts, named, wrapped
from api.schemas.advice import AdviceResponse
from groups import prediction
from groups.errors import InvalidInputError
from groups.prediction import Component


def advise(given: argparse.Namespace) -> str:
    """The text to print."""
    components = [Component(molecule(text)) for text in given.components]
    answer = advice_answers.advice(
        prediction.advice(
            components,
            temperature_K=_range("temperature", "-T", given.temperature),
            pressure_kPa=_range("pressure", "-P", given.pressure),
            on_missing=given.on_missing,
        )
    )
    if given.json:
        return str(answer.model_dump_json(indent=2))
    return advice_answers.advice_csv(answer).rstrip() if given.csv else advice_text(answer)


def _range(name: str, option: str, values: list[float]) -> tuple[float, float]:
    """One value stands for both ends."""
    if len(values) > 2:
        raise InvalidInputError(
            f"There are {len(values)} values for the {name}.",
            cure=f"Give the lowest and the highest after {option}, or one value.",
        )
    return values[0], values[-1]


def advice_text(answer: AdviceResponse) -> str:
    """Verdicts, costs, recommendation and reasons."""
    costs = (answer.vapour.cost_of_ideal_gas, answer.liquid.cost_of_ideal_solution)
    rows = [
        [
            f"to call it an {name}",
            verdict,
            f"{cost.pressure_percent:.1f} %",
            f"{cost.vapour_mole_fraction:.3f}",
            f"{cost.relative_volatility_percent:.1f} %",
        ]
        for name, verdict, cost in zip(
            ("ideal gas", "ideal solution"),
            (answer.vapour.verdict, answer.liquid.verdict),
            costs,
            strict=True,
        )
    ]
    header = ["what it would cost", "it is a(n)", "in P", "in y", "in rel. volatility"]
    mixture = ", ".join(named(component) for component in answer.components)
    said = answer.recommended
    verdict = [
        wrapped(said.flowsheet_class, "For a flowsheet: "),
        f"Here: method {said.method} with {said.vapour} vapour",
        wrapped(said.why),
    ]
    found = [wrapped(finding.message, "  - ") for finding in answer.findings[:-1]]
    return "\n\n".join(
        [
            f"{mixture}\n\n{aligned(header, rows)}",
            "\n".join(verdict),
            "\n".join(["Found:", *found]),
            doubts(answer.confidence),
            cautions_text(answer.cautions),
        ]
    )
