"""The answers of the prediction doors, as plain frozen records.

Arrays run over points first, components last. A number that could not be had is NaN, and the
matching `failure` (or the reasons of `confidence`) says why.
"""

from dataclasses import dataclass, replace

import numpy as np

from groups.arrays import FloatArray
from groups.confidence import Confidence, Interval
from groups.confidence.calibration import TableWeight
from groups.equilibrium import Azeotrope, Diagram
from groups.prediction.bands import Band
from groups.prediction.boiling_bands import BoilingBands
from groups.prediction.chances import AzeotropeChance, SplitChance
from groups.prediction.phases import PhaseAnswer
from groups.prediction.vapours import VapourUsed
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class ActivityAnswer:
    """Activity coefficients and excess properties at given points of one mixture."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    temperature_K: FloatArray  # (n_points,)
    mole_fractions: FloatArray  # (n_points, n_components)
    ln_gamma: FloatArray  # (n_points, n_components)
    ln_gamma_combinatorial: FloatArray  # (n_points, n_components)
    ln_gamma_residual: FloatArray  # (n_points, n_components)
    excess_gibbs_RT: FloatArray  # (n_points,), dimensionless
    excess_enthalpy_J_mol: FloatArray  # (n_points,)
    ln_gamma_band: Band | None  # of ln_gamma
    excess_gibbs_band: Band | None  # of excess_gibbs_RT
    confidence: tuple[Confidence, ...]  # one a point

    @property
    def gamma(self) -> FloatArray:
        """Activity coefficients, symmetric convention, shape (n_points, n_components)."""
        gamma: FloatArray = np.exp(self.ln_gamma)
        return gamma


@dataclass(frozen=True, slots=True)
class InfiniteDilutionAnswer:
    """ln gamma of one solute at infinite dilution in one solvent; NaN where refused."""

    solute: Molecule
    solvent: Molecule
    temperature_K: float
    ln_gamma_inf: float
    method: str | None
    methods_used: tuple[TableWeight, ...]
    interval: Interval | None  # of another level, if one was asked for
    confidence: Confidence


@dataclass(frozen=True, slots=True)
class PhasePointAnswer:
    """One bubble point, dew point or flash of a mixture."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    temperature_K: float
    pressure_kPa: float
    vapour_fraction: float  # 0 at a bubble point, 1 at a dew point
    x: FloatArray  # (n_components,) liquid
    y: FloatArray  # (n_components,) vapour
    gamma: FloatArray  # (n_components,)
    saturation_kPa: FloatArray  # (n_components,)
    relative_volatility: FloatArray  # (n_components,) K_i over the K of the last component
    liquid_stable: bool | None
    failure: str | None
    vapour_pressures: tuple[VapourPressure, ...]
    bands: BoilingBands | None  # of one point; None for a flash or without calibration
    phases: tuple[PhaseAnswer, ...]  # liquids first, then the vapour
    vapour: VapourUsed
    confidence: Confidence


@dataclass(frozen=True, slots=True)
class LiquidSplitAnswer:
    """Liquids in equilibrium at one temperature, or none (`phases` empty)."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    temperature_K: float
    splits: bool
    phases: tuple[FloatArray, ...]  # compositions (n_components,) of the coexisting liquids
    ln_gamma: tuple[FloatArray, ...]
    fractions: tuple[float, ...] | None  # moles of each liquid; None without an overall composition
    distribution: tuple[FloatArray, ...]  # mole fraction in each liquid over that in the first
    chance: SplitChance | None  # of a binary
    failure: str | None
    confidence: Confidence


@dataclass(frozen=True, slots=True)
class AzeotropeAnswer:
    """All azeotropes of a mixture at one pressure or one temperature."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    pressure_kPa: float | None
    temperature_K: float | None
    azeotropes: tuple[Azeotrope, ...]
    chances: tuple[AzeotropeChance, ...]  # one for each pair of components
    vapour_pressures: tuple[VapourPressure, ...]
    vapour: VapourUsed
    confidence: Confidence


@dataclass(frozen=True, slots=True)
class DiagramAnswer:
    """A Txy or Pxy diagram of a binary."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    diagram: Diagram
    bands: BoilingBands | None  # at the given liquids
    dew_band: Band | None  # T or P of the dew curve at the vapours, (n_points,)
    azeotrope_chance: AzeotropeChance | None
    vapour_pressures: tuple[VapourPressure, ...]
    vapour: VapourUsed
    confidence: Confidence


@dataclass(frozen=True, slots=True)
class PlannedMeasurement:
    """One measurement worth making, and how wide the interval is expected to be after it."""

    kind: str  # "gamma_infinity", "P-x point" or "boiling_point"
    what: str
    components: tuple[int, ...]
    temperature_K: float
    mole_fractions: tuple[float, ...] | None
    expected_width: float = float("nan")

    def after(self, width: float) -> "PlannedMeasurement":
        """The same with the width expected once it and those before it are made."""
        return replace(self, expected_width=width)


@dataclass(frozen=True, slots=True)
class MeasurementPlan:
    """The few measurements that shrink the doubt about a question most, the best first."""

    question: str
    level: float
    interval: tuple[float, float]  # as it stands now, in the unit of the question
    measurements: tuple[PlannedMeasurement, ...]
