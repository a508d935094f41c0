"""The vapour over measured boiling points: ideal, or real where the mixture needs it."""

from collections.abc import Sequence

import numpy as np

from groups.activity.choice import OnMissing
from groups.equilibrium import VapourModel
from groups.handoff.comparisons import Measurements
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.checks import check_components
from groups.prediction.component import Component
from groups.prediction.vapours import VapourAsked, VapourUsed


def vapour_over(
    components: Sequence[Component],
    points: Measurements,
    asked: VapourAsked = "auto",
    on_missing: OnMissing = "estimate",
) -> tuple[VapourModel, VapourUsed] | None:
    """The vapour to compare boiling points under.

    Parameters
    ----------
    components : sequence of two Component
    points : Measurements
    asked : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one at the median pressure.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    tuple of VapourModel and VapourUsed, or None
        None where no boiling point was measured.

    Raises
    ------
    ShapeError, DuplicateComponentError
        If the components are not two different molecules.
    PredictionError
        If no table or no vapour pressure is to be had.
    """
    check_components([one.molecule for one in components], least=2, most=2)
    boiling = points.vapour_liquid
    if not len(boiling.number):
        return None
    pressure = float(np.median(boiling.pressure_kPa))
    mixture = boiling_mixture(components, "auto", on_missing, pressure_kPa=pressure, vapour=asked)
    return mixture.system.vapour, mixture.vapour
