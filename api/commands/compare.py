"""`mixwright compare`: measured points tested, compared with every model, and put to use."""

import argparse
from pathlib import Path

from api import comparison_answers
from api.commands.fit import inputs
from api.commands.text import aligned, cautions_text, wrapped
from api.schemas.comparisons import (
    ComparedModel,
    ComparisonRequest,
    ComparisonResponse,
    Conditioned,
    MeasurementUnits,
)
from groups.errors import InvalidInputError, MeasurementError
from groups.handoff import parameters_of_fit, to_text
from groups.handoff.comparisons import points_to_csv, regions_to_csv

_LISTED_MODELS = 8
_MOST_POINTS = 5_000


def compare(given: argparse.Namespace) -> str:
    """The text to print."""
    request = _request(given)
    found = comparison_answers.compared(request, _MOST_POINTS)
    if given.picture is not None:
        from api.comparison_pictures import comparison_picture  # matplotlib is slow to import

        target = Path(given.picture)
        picture = comparison_picture(
            found.answer,
            found.conditioned,
            "png" if target.suffix.lower() == ".png" else "svg",
        )
        target.write_bytes(picture)
    if given.csv is not None:
        table = points_to_csv if given.csv == "points" else regions_to_csv
        return table(found.answer).rstrip()
    if given.sheet is not None:
        return to_text(parameters_of_fit(found.answer, given.sheet)).rstrip()
    answer = comparison_answers.comparison(found)
    return answer.model_dump_json(indent=2) if given.json else comparison_text(answer)


def _request(given: argparse.Namespace) -> ComparisonRequest:
    text = _text_of(Path(given.points))
    is_xml = text.lstrip("\ufeff \r\n\t").startswith("<")
    return ComparisonRequest(
        components=inputs(given.components),
        csv=None if is_xml else text.lstrip("\ufeff"),
        thermoml=text if is_xml else None,
        units=MeasurementUnits(
            temperature=given.temperature_unit,
            pressure=given.pressure_unit,
            composition=given.composition_unit,
        ),
        form=given.form,
        alpha=given.alpha,
        on_missing=given.on_missing,
        vapour=given.vapour,
        temperature_K=given.temperature,
        pressure_kPa=given.pressure,
    )


def _text_of(path: Path) -> str:
    if path.is_dir():
        raise InvalidInputError(f"'{path}' is a folder.", cure="Name the file with the points.")
    try:
        return path.read_text(encoding="utf-8")
    except UnicodeDecodeError as error:
        raise MeasurementError(
            f"'{path}' is no text in UTF-8.", cure="Save the points as CSV in UTF-8."
        ) from error


def comparison_text(answer: ComparisonResponse) -> str:
    """A comparison laid out for reading."""
    parts = [wrapped(answer.consistency.verdict, "Data: ")]
    parts += [
        wrapped("; ".join(one.reasons), f"  point {one.point + 1}: ")
        for one in answer.consistency.suspects
    ]
    parts += [wrapped(mark.message, "Note: ") for mark in answer.marks]
    parts.append(_models_text(answer.models))
    if answer.left_out:
        listed = ", ".join(one.name for one in answer.left_out)
        parts.append(wrapped(f"{listed} (reasons stand in --json)", "Not compared: "))
    parts.append(wrapped(answer.recommendation.text, "Recommended: "))
    if answer.conditioned is not None:
        parts.append(_conditioned_text(answer.conditioned))
    return "\n\n".join([*parts, cautions_text(answer.cautions)])


def _models_text(models: list[ComparedModel]) -> str:
    """The best models, by their distance from the points in standard deviations."""

    def rms(model: ComparedModel) -> float:
        found = model.regions[0].weighted_rms
        return float("inf") if found is None else found

    ordered = sorted(models, key=rms)
    listed = [m for k, m in enumerate(ordered) if k < _LISTED_MODELS or m.name in ("auto", "ideal")]
    header = ["model", "kind", *(region.region for region in listed[0].regions), "left out"]
    rows = [
        [
            m.name,
            m.kind,
            *(region.weighted_rms for region in m.regions),
            None if m.fit is None else m.fit.cross_validated_rms,
        ]
        for m in listed
    ]
    head = "Distance from the points in their standard deviations (rms):"
    return f"{head}\n{aligned(header, rows)}"


def _conditioned_text(found: Conditioned) -> str:
    """The diagram before and after at every fifth composition."""
    isobaric = found.kind == "Txy"
    name = "T / K" if isobaric else "P / kPa"
    rows: list[list[object]] = []
    for k in range(0, len(found.x1), 5):
        row: list[object] = [f"{found.x1[k]:.2f}"]
        for one in (found.before, found.after):
            centre, lower, upper = (
                (one.temperature_K, one.temperature_K_lower, one.temperature_K_upper)
                if isobaric
                else (one.pressure_kPa, one.pressure_kPa_lower, one.pressure_kPa_upper)
            )
            row += [_fixed(centre[k]), f"{_fixed(lower[k])} to {_fixed(upper[k])}"]
        rows.append(row)
    header = ["x1", f"{name} before", "90 %", f"{name} with the points", "90 %"]
    return f"{wrapped(found.text)}\n{aligned(header, rows)}"


def _fixed(value: float | None) -> str:
    return "-" if value is None else f"{value:.2f}"
