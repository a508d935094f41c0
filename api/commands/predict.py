"""`mixwright predict`: what is asked for, computed and laid out."""

import argparse
from collections.abc import Callable
from pathlib import Path
from typing import Any, Literal

from pydantic import BaseModel

from api import answers, tables
from api.commands.predict_text import (
    activity_text,
    azeotropes_text,
    diagram_text,
    dilution_text,
    point_text,
    split_text,
)
from api.commands.quantities import molecule
from groups import prediction
from groups.errors import InvalidInputError
from groups.prediction import Component

WHAT = ("bubble", "dew", "flash", "diagram", "azeotropes", "split", "activity", "dilution")


def predict(given: argparse.Namespace) -> str:
    """The text to print."""
    components = [Component(molecule(text)) for text in given.components]
    what = given.what or _implied(given, len(components))
    answer, as_text, as_csv = _COMMANDS[what](given, components)
    if given.json:
        return str(answer.model_dump_json(indent=2))
    return str(as_csv(answer)).rstrip() if given.csv else str(as_text(answer))


def _implied(given: argparse.Namespace, count: int) -> str:
    """What the conditions ask for where the user does not say it."""
    both = given.temperature is not None and given.pressure is not None
    if given.fractions is not None:
        return "flash" if both or given.vapour_fraction is not None else "bubble"
    if given.temperature is None and given.pressure is None:
        raise InvalidInputError(
            "Neither a temperature nor a pressure is given.",
            cure="Give one with -T or -P, for instance -P 1atm.",
        )
    return "diagram" if count == 2 else "azeotropes"


_Outcome = tuple[BaseModel, Callable[[Any], str], Callable[[Any], str]]


def _choice(given: argparse.Namespace) -> dict[str, Any]:
    return {"method": given.method, "on_missing": given.on_missing}


def _conditions(given: argparse.Namespace) -> dict[str, Any]:
    return {"temperature_K": given.temperature, "pressure_kPa": given.pressure, **_choice(given)}


def _boiling(given: argparse.Namespace) -> dict[str, Any]:
    return {**_conditions(given), "vapour": given.vapour}


def _fractions(given: argparse.Namespace) -> list[float]:
    if given.fractions is None:
        raise InvalidInputError(
            "The composition is missing.", cure="Give the mole fractions with -x, in order."
        )
    return list(given.fractions)


def _temperature(given: argparse.Namespace) -> float:
    if given.temperature is None:
        raise InvalidInputError("The temperature is missing.", cure="Give it with -T.")
    return float(given.temperature)


def _bubble(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    found = prediction.bubble_point(components, _fractions(given), **_boiling(given))
    return answers.phase_point(found), point_text, tables.phase_point_csv


def _dew(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    found = prediction.dew_point(components, _fractions(given), **_boiling(given))
    return answers.phase_point(found), point_text, tables.phase_point_csv


def _flash(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    if given.pressure is None and given.vapour_fraction is None:
        raise InvalidInputError(
            "The pressure is missing.", cure="Give it with -P, or a --vapour-fraction."
        )
    found = prediction.flash(
        components,
        _fractions(given),
        vapour_fraction=given.vapour_fraction,
        **_boiling(given),
    )
    return answers.phase_point(found), point_text, tables.phase_point_csv


def _diagram(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    kind: Literal["Txy", "Pxy"] = "Txy" if given.pressure is not None else "Pxy"
    found = prediction.diagram(kind, components, points=given.points, **_boiling(given))
    if given.picture is not None:
        from api.pictures import diagram_picture  # matplotlib is slow to import

        target = Path(given.picture)
        picture = diagram_picture(found, "png" if target.suffix.lower() == ".png" else "svg")
        target.write_bytes(picture)
    return answers.diagram(found), diagram_text, tables.diagram_csv


def _azeotropes(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    found = prediction.azeotropes(components, **_boiling(given))
    return answers.azeotropes(found), azeotropes_text, tables.azeotropes_csv


def _split(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    found = prediction.liquid_splits(
        components,
        temperature_K=_temperature(given),
        mole_fractions=given.fractions,
        **_choice(given),
    )
    return answers.liquid_split(found), split_text, tables.liquid_split_csv


def _activity(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    found = prediction.activity_coefficients(
        components, _temperature(given), [_fractions(given)], **_choice(given)
    )
    return answers.activity(found), activity_text, tables.activity_csv


def _dilution(given: argparse.Namespace, components: list[Component]) -> _Outcome:
    molecules = [component.molecule for component in components]
    temperature = _temperature(given)
    pairs = [(u, v, temperature) for u in molecules for v in molecules if u is not v]
    found = prediction.infinite_dilution(pairs, level=given.level, **_choice(given))
    return (
        answers.infinite_dilution(found, given.level),
        dilution_text,
        tables.infinite_dilution_csv,
    )


_COMMANDS: dict[str, Callable[[argparse.Namespace, list[Component]], _Outcome]] = {
    "bubble": _bubble,
    "dew": _dew,
    "flash": _flash,
    "diagram": _diagram,
    "azeotropes": _azeotropes,
    "split": _split,
    "activity": _activity,
    "dilution": _dilution,
}
