"""What a comparison answers, as plain frozen records."""

from dataclasses import dataclass
from typing import Literal

from groups.equilibrium import LiquidModel
from groups.handoff.comparisons.consistency import Consistency
from groups.handoff.comparisons.deviations import PointDeviation, RegionDeviations
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations
from groups.handoff.comparisons.regression import PointFit
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class Mark:
    """Something about the data or the answer that the user must know."""

    code: str
    message: str
    points: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True)
class ComparedModel:
    """One model beside the points.

    Attributes
    ----------
    name : str
        Identifier of a method or correlation; "auto" says in `table` what it took.
    kind : {"predicted", "fitted"}
    table : str
        The method or equation behind it.
    model : LiquidModel
    regions : tuple of RegionDeviations
        All points, dilute in 1, middle, dilute in 2.
    points : tuple of PointDeviation
    fit : PointFit or None
        Parameters, covariance, AICc and cross-validation of a fitted one.
    """

    name: str
    kind: Literal["predicted", "fitted"]
    table: str
    model: LiquidModel
    regions: tuple[RegionDeviations, ...]
    points: tuple[PointDeviation, ...]
    fit: PointFit | None

    @property
    def weighted_rms(self) -> float:
        """Over all points."""
        return self.regions[0].weighted_rms


@dataclass(frozen=True, slots=True)
class LeftOut:
    """A model that was not compared, and why."""

    name: str
    reason: str


@dataclass(frozen=True, slots=True)
class Recommendation:
    """Which model to take, where, and why, in words.

    Attributes
    ----------
    model : str or None
        None where none describes the points.
    kind : str or None
    by_region : tuple of (region, name of the best predicted model, its weighted rms)
    holds_for : str
        The region of composition and temperature.
    text : str
    """

    model: str | None
    kind: str | None
    by_region: tuple[tuple[str, str, float], ...]
    holds_for: str
    text: str


@dataclass(frozen=True, slots=True)
class ComparisonAnswer:
    """Measured points of one binary against every model here.

    `seen` holds the points as residuals: a prediction is conditioned on them through
    `seen.of_model`, its derivatives and their standard deviations.
    """

    components: tuple[Molecule, Molecule]
    measurements: Measurements
    seen: Observations
    consistency: Consistency
    models: tuple[ComparedModel, ...]
    left_out: tuple[LeftOut, ...]
    recommendation: Recommendation
    marks: tuple[Mark, ...]
    vapour_pressures: tuple[VapourPressure, VapourPressure] | None
