"""Two-liquid regions of a ternary at one temperature: binodal, tie lines, plait points."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, graded
from groups.confidence.calibration import TableWeight
from groups.equilibrium import TernaryBinodal, TwoLiquidRegion, ternary_binodal
from groups.errors import OutOfRangeError
from groups.prediction.checks import check_components, check_temperatures
from groups.prediction.component import Component
from groups.prediction.split_method import split_reasons, splitting_liquid
from groups.structure.molecule import Molecule

TIE_LINES_RANGE = (2, 200)
#: Steps between tie lines of a region at least, so that its edge is drawn smoothly.
FINE = 48


@dataclass(frozen=True, slots=True)
class TernaryDiagramAnswer:
    """Every two-liquid region of a ternary, and triangles of three liquids."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    found: TernaryBinodal  # finely, for a smooth binodal
    every: int  # of its tie lines, one in so many was asked for
    confidence: Confidence


def ternary_diagram(
    components: Sequence[Component],
    *,
    temperature_K: float,
    tie_lines: int = 15,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> TernaryDiagramAnswer:
    """Where a ternary liquid splits at one temperature.

    Parameters
    ----------
    components : sequence of three Component
    temperature_K : float
    tie_lines : int
        Of each region, evenly spaced, 2 to 200.
    method : str
        An identifier of `ALL_METHODS`; "auto" takes the table fitted to splits where it holds.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    TernaryDiagramAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table gives the numbers.

    Source
    ------
    See `groups.equilibrium.binodal`.
    """
    molecules = tuple(component.molecule for component in components)
    check_components(molecules, least=3, most=3)
    T = float(check_temperatures(temperature_K)[0])
    if not TIE_LINES_RANGE[0] <= tie_lines <= TIE_LINES_RANGE[1]:
        raise OutOfRangeError("tie_lines", tie_lines, *TIE_LINES_RANGE)
    mixture, chosen = splitting_liquid(molecules, method, on_missing, T, T)
    every = -(-FINE // (tie_lines - 1))
    found = ternary_binodal(mixture.model, T, (tie_lines - 1) * every + 1)
    ends = [part for region in found.regions for part in (region.first, region.second)]
    probed = np.vstack(ends) if ends else np.full((1, 3), 1.0 / 3.0)
    reasons = [*chosen, *mixture.reasons(np.full(len(probed), T), probed)]
    reasons += split_reasons(mixture.method, bool(found.regions))
    return TernaryDiagramAnswer(
        molecules,
        mixture.method,
        mixture.methods_used,
        found,
        every,
        graded(reasons, mixture.evidence),
    )


def tie_lines_shown(region: TwoLiquidRegion, every: int) -> list[tuple[FloatArray, FloatArray]]:
    """The tie lines asked for, out of those that draw the edge.

    Parameters
    ----------
    region : TwoLiquidRegion
    every : int

    Returns
    -------
    list of pairs of arrays of shape (3,)
    """
    return list(zip(region.first[::every], region.second[::every], strict=True))


def binodal_line(region: TwoLiquidRegion) -> FloatArray:
    """The edge of a two-liquid region as one line, plait points included.

    Parameters
    ----------
    region : TwoLiquidRegion

    Returns
    -------
    array of shape (n_points, 3)
        Along the first liquids, over a plait point, back along the second liquids; closed over
        another plait point where there are two.
    """
    at_start = [p for p in region.plait_points if _nearer_start(p, region)]
    at_end = [p for p in region.plait_points if not _nearer_start(p, region)]
    return np.vstack([*at_start, region.first, *at_end, region.second[::-1], *at_start])


def _nearer_start(point: FloatArray, region: TwoLiquidRegion) -> bool:
    middles = 0.5 * (region.first + region.second)
    apart = np.abs(middles[[0, -1]] - point).max(axis=1)
    return bool(apart[0] < apart[1])
