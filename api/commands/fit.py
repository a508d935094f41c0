"""`mixwright fit`: parameters for a flowsheet, fitted to the prediction."""

import argparse
from pathlib import Path

from api import fit_answers
from api.commands.quantities import molecule
from api.commands.text import aligned, cautions_text, doubts, named, wrapped
from api.routers.fits import fitted
from api.schemas.fits import FitRequest, FitResponse, FittedPair
from api.schemas.molecule import MoleculeInput
from groups import handoff
from groups.errors import FitRefusedError, InvalidInputError


def inputs(texts: list[str]) -> list[MoleculeInput]:
    """Molecules as the service takes them."""
    return [MoleculeInput(smiles=molecule(text).canonical_smiles) for text in texts]


def fit(given: argparse.Namespace) -> str:
    """The text to print."""
    components = inputs(given.components)
    if len(components) < 2:
        raise InvalidInputError("A fit needs two components.", cure="Name two molecules or more.")
    request = FitRequest(
        components=components,
        model=given.model,
        form=given.form,
        alpha=given.alpha,
        temperature_range_K=given.temperature_range,
        pressure_kPa=given.pressure,
        method=given.method,
        on_missing=given.on_missing,
    )
    answer = fitted(request)
    if given.thermoml is not None:
        Path(given.thermoml).write_text(handoff.predicted_thermoml(answer), encoding="utf-8")
    if given.json:
        return fit_answers.fit(answer, request).model_dump_json(indent=2)
    if answer.parameters is None:
        raise FitRefusedError(answer.fit.refused[0].reason)
    if given.csv:
        return handoff.to_csv(answer.parameters).rstrip()
    told = fit_answers.fit(answer, request)
    return handoff.to_text(answer.parameters) + "\n" + _effects_text(told)


def _effects_text(told: FitResponse) -> str:
    parts = [wrapped(told.weighting, "Weights: ")]
    for pair in told.pairs:
        parts.append(_pair_text(told, pair))
    parts += [
        wrapped(one.reason, f"Pair {one.components[0] + 1}, {one.components[1] + 1} refused: ")
        for one in told.refused
    ]
    parts += [wrapped(note.message, "Note: ") for note in told.notes]
    return "\n\n".join([*parts, doubts(told.confidence), cautions_text(told.cautions)])


def _pair_text(told: FitResponse, pair: FittedPair) -> str:
    """Prediction and fit side by side."""
    i, j = pair.components
    effects = pair.effects
    rows: list[list[object]] = [
        [f"two liquids at {one.temperature_K:.1f} K", _liquids(one.predicted), _liquids(one.fitted)]
        for one in effects.splits
        if one.predicted is not None or one.fitted is not None
    ]
    for k in range(
        max(len(effects.azeotropes_predicted or ()), len(effects.azeotropes_fitted or ()))
    ):
        cells = [
            f"x1 {found[k].x1:.4f} at {found[k].temperature_K:.2f} K" if len(found) > k else "none"
            for found in (effects.azeotropes_predicted or [], effects.azeotropes_fitted or [])
        ]
        rows.append([f"azeotrope at {effects.pressure_kPa:g} kPa", *cells])
    largest = effects.ln_relative_volatility_largest
    change = "-" if largest is None else f"at most {100.0 * abs(largest):.1f} % off"
    rows.append(["relative volatility", "", change])
    heads = [f"{named(told.components[i])} / {named(told.components[j])}", "predicted", "fitted"]
    return aligned(heads, rows)


def _liquids(found: list[float] | None) -> str:
    return "one liquid" if found is None else f"x1 {found[0]:.4f} and {found[1]:.4f}"
