"""Residue curves of a ternary at one pressure."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, Reason, graded
from groups.confidence.calibration import TableWeight
from groups.equilibrium import ResidueMap
from groups.equilibrium import residue_curves as solve_residue_curves
from groups.errors import ShapeError
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.checks import check_components, check_fractions, check_pressures
from groups.prediction.component import Component
from groups.prediction.vapours import VapourAsked, VapourUsed
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule

MOST_STARTS = 50


@dataclass(frozen=True, slots=True)
class ResidueMapAnswer:
    """Paths of an open still, its nodes and saddles, and distillation boundaries."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    found: ResidueMap
    vapour_pressures: tuple[VapourPressure, ...]
    vapour: VapourUsed
    confidence: Confidence


def residue_curves(
    components: Sequence[Component],
    *,
    pressure_kPa: float,
    starts: ArrayLike | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
) -> ResidueMapAnswer:
    """How the liquid in an open still changes as it boils away.

    Parameters
    ----------
    components : sequence of three Component
    pressure_kPa : float
    starts : array_like of shape (n_starts, 3), optional
        Mole fractions that curves shall pass through, 1 to 50; ten spread over the triangle
        where left out.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}

    Returns
    -------
    ResidueMapAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    See `groups.equilibrium.residue_curves`.
    """
    molecules = tuple(component.molecule for component in components)
    check_components(molecules, least=3, most=3)
    P = float(check_pressures(pressure_kPa)[0])
    through = None if starts is None else check_starts(starts)
    mixture = boiling_mixture(components, method, on_missing, pressure_kPa=P, vapour=vapour)
    found = solve_residue_curves(mixture.system, P, through)
    points = np.array([point.mole_fractions for point in found.fixed_points])
    T = np.array([point.temperature_K for point in found.fixed_points])
    reasons = mixture.reasons(T, np.full(len(T), P), points)
    return ResidueMapAnswer(
        molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        found,
        mixture.lines,
        mixture.vapour,
        graded([*reasons, *_map_reasons(found)], mixture.liquid.evidence),
    )


def check_starts(starts: ArrayLike) -> FloatArray:
    """Starts as mole fractions of shape (n_starts, 3)."""
    try:
        fractions = check_fractions(starts, 3)
    except ShapeError as error:
        error.field = "starts"
        raise
    if len(fractions) > MOST_STARTS:
        raise ShapeError(
            f"There may be 1 to {MOST_STARTS} starts. Got {len(fractions)} instead.",
            cure="Ask for fewer curves at once.",
            field="starts",
        )
    return fractions


def _map_reasons(found: ResidueMap) -> list[Reason]:
    reasons = []
    if not found.index_balanced:
        text = (
            "The nodes and saddles found make no possible map (topological index): an azeotrope "
            "is missing, or two nearly coincide. Do not trust the boundaries."
        )
        reasons.append(Reason("map_not_balanced", text, "azeotropes", "low"))
    stopped = [c for c in found.curves if c.begins is None or c.ends is None]
    if stopped:
        text = f"{len(stopped)} of {len(found.curves)} curves stop before they reach a node."
        reasons.append(Reason("curves_incomplete", text, "residue curves", "moderate"))
    return reasons
