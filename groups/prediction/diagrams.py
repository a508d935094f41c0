"""Txy and Pxy diagrams of binaries."""

from collections.abc import Sequence
from typing import Literal, get_args

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Reason, graded
from groups.equilibrium import Diagram
from groups.equilibrium import diagram as solve_diagram
from groups.errors import InvalidInputError, OutOfRangeError
from groups.prediction.answers import DiagramAnswer
from groups.prediction.bands import Band
from groups.prediction.boiling_bands import (
    BoilingBands,
    KnownStates,
    bands_of,
    bubble_draws,
    dew_curve_band,
)
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.chances import AzeotropeChance, azeotrope_chance
from groups.prediction.checks import check_components, check_pressures, check_temperatures
from groups.prediction.component import Component
from groups.prediction.vapours import VapourAsked

DiagramKind = Literal["Txy", "Pxy"]
POINTS_RANGE = (2, 2001)


def diagram(
    kind: DiagramKind,
    components: Sequence[Component],
    *,
    pressure_kPa: float | None = None,
    temperature_K: float | None = None,
    points: int = 101,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
) -> DiagramAnswer:
    """Boiling and dew curve of a binary at one pressure ("Txy") or temperature ("Pxy").

    Parameters
    ----------
    kind : {"Txy", "Pxy"}
    components : sequence of two Component
    pressure_kPa : float
        For "Txy".
    temperature_K : float
        For "Pxy".
    points : int
        Equal steps in x1, both pure ends included, 2 to 2001.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one.

    Returns
    -------
    DiagramAnswer

    Raises
    ------
    InvalidInputError
        If the condition does not fit the kind, or a number lies outside its range.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    Modified Raoult's law; see `groups.equilibrium.diagram`.
    """
    check_components([component.molecule for component in components], least=2, most=2)
    _check_condition(kind, pressure_kPa, temperature_K)
    if not POINTS_RANGE[0] <= points <= POINTS_RANGE[1]:
        raise OutOfRangeError("points", points, *POINTS_RANGE)
    mixture = boiling_mixture(
        components,
        method,
        on_missing,
        temperature_K=temperature_K,
        pressure_kPa=pressure_kPa,
        vapour=vapour,
    )
    drawn = solve_diagram(
        mixture.system, kind, pressure_kPa=pressure_kPa, temperature_K=temperature_K, points=points
    )
    fractions = np.column_stack([drawn.x1, 1.0 - drawn.x1])
    vapours = np.column_stack([drawn.y1, 1.0 - drawn.y1])
    reasons = mixture.reasons(drawn.temperature_K, drawn.pressure_kPa, fractions, vapours)
    bands, dew, chance = _uncertainty(mixture, drawn, fractions, temperature_K, pressure_kPa)
    width = None if bands is None else float(np.nanmax(bands.ln_k_half_width))
    return DiagramAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        drawn,
        bands,
        dew,
        chance,
        mixture.lines,
        mixture.vapour,
        graded([*reasons, *_diagram_reasons(drawn)], mixture.liquid.evidence, half_width_ln=width),
    )


def _uncertainty(
    mixture: BoilingMixture,
    found: Diagram,
    fractions: FloatArray,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> tuple[BoilingBands, Band, AzeotropeChance] | tuple[None, None, None]:
    """Intervals along both curves and the chance of an azeotrope."""
    known = np.flatnonzero([text is None for text in found.failure])
    if not known.size:
        return None, None, None
    drawn = mixture.drawn(float(np.median(found.temperature_K[known])))
    if drawn is None:
        return None, None, None
    vapour = np.column_stack([found.y1, 1.0 - found.y1])
    ratio = np.column_stack([found.relative_volatility, np.ones(len(found.x1))])
    states = KnownStates(
        found.temperature_K[known],
        found.pressure_kPa[known],
        fractions[known],
        vapour[known],
        found.gamma[known],
        ratio[known],
        pressure_kPa is not None,
    )
    each = bubble_draws(drawn, mixture.system, states)
    bands = bands_of(each, states).spread(known, len(found.x1))
    dew = dew_curve_band(each, states).spread(known, len(found.x1))
    chance = azeotrope_chance(
        drawn, mixture.system, (0, 1), temperature_K=temperature_K, pressure_kPa=pressure_kPa
    )
    return bands, dew, chance


def _check_condition(
    kind: DiagramKind, pressure_kPa: float | None, temperature_K: float | None
) -> None:
    """A Txy diagram takes a pressure, a Pxy diagram a temperature, and not the other."""
    if kind not in get_args(DiagramKind):
        raise InvalidInputError(
            f"There is no diagram of kind '{kind}'. Allowed: {', '.join(get_args(DiagramKind))}.",
            cure="Ask for 'Txy' at one pressure or 'Pxy' at one temperature.",
            field="kind",
        )
    given, other = (
        (("pressure_kPa", pressure_kPa), ("temperature_K", temperature_K))
        if kind == "Txy"
        else (("temperature_K", temperature_K), ("pressure_kPa", pressure_kPa))
    )
    if given[1] is None or other[1] is not None:
        raise InvalidInputError(
            f"A {kind} diagram needs '{given[0]}' and no '{other[0]}'.",
            cure=f"Give '{given[0]}' alone, or ask for the other kind of diagram.",
            field=given[0],
        )
    if kind == "Txy":
        check_pressures(given[1])
    else:
        check_temperatures(given[1])


def _diagram_reasons(drawn: Diagram) -> list[Reason]:
    reasons = []
    if not drawn.stable.all():
        split = drawn.liquid_split
        where = "" if split is None else f" (x1 from {split.x1_lower:.4f} to {split.x1_upper:.4f})"
        reasons.append(
            Reason(
                "possible_liquid_split",
                f"By this method the boiling liquid splits in two{where}; inside the gap the "
                "three-phase line is given, and its place is more uncertain than the rest.",
                "liquid",
                "low",
            )
        )
    failed = sum(text is not None for text in drawn.failure)
    if failed:
        reasons.append(
            Reason(
                "not_converged",
                f"{failed} of {len(drawn.failure)} points have no verified state and are blank.",
                "diagram",
                "low",
            )
        )
    return reasons
