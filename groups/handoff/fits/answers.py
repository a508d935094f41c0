"""What a fit answers, as plain frozen records."""

from dataclasses import dataclass

from groups.arrays import FloatArray
from groups.equilibrium import Azeotrope
from groups.handoff.correlations import CorrelativeModel


@dataclass(frozen=True, slots=True)
class FitNote:
    """Something the user of a fit must know; `grave` where the fit should not be used for it."""

    code: str
    message: str
    grave: bool


@dataclass(frozen=True, slots=True)
class FittedParameter:
    """One number of a fit, as it is printed, with its unit and standard error.

    `standard_error` is None for a number that was held fixed.
    """

    name: str
    value: float
    unit: str
    standard_error: float | None


@dataclass(frozen=True, slots=True)
class FitResidual:
    """How far the fitted ln gamma lies from what it was fitted to.

    Attributes
    ----------
    rms, largest : float
        Of ln gamma (fitted less target), over all values that are not zero by definition.
    rms_infinite_dilution : float
        Over the values at infinite dilution alone.
    temperature_K, x1, component
        Where the largest one stands; `component` is 0 or 1.
    weighted_rms : float
        In units of the target's own standard deviation.
    values : int
        How many values.
    """

    rms: float
    largest: float
    rms_infinite_dilution: float
    temperature_K: float
    x1: float
    component: int
    weighted_rms: float
    values: int


@dataclass(frozen=True, slots=True)
class SplitEffect:
    """The liquids of a split at one temperature, (x1 poor, x1 rich), by target and by fit."""

    temperature_K: float
    predicted: tuple[float, float] | None
    fitted: tuple[float, float] | None


@dataclass(frozen=True, slots=True)
class FitEffects:
    """What the fit does to the mixture, compared with what it was fitted to.

    Attributes
    ----------
    splits : tuple of SplitEffect
        At the lowest, the middle and the highest temperature of the grid.
    azeotropes_predicted, azeotropes_fitted : tuple of Azeotrope or None
        At `pressure_kPa`; None where no vapour pressures or no pressure were given.
    pressure_kPa : float or None
    ln_relative_volatility_rms, ln_relative_volatility_largest : float
        Of ln(alpha_12 fitted / alpha_12 predicted), over the grid.
    temperature_K, x1 : float
        Where the largest one stands.
    """

    splits: tuple[SplitEffect, ...]
    azeotropes_predicted: tuple[Azeotrope, ...] | None
    azeotropes_fitted: tuple[Azeotrope, ...] | None
    pressure_kPa: float | None
    ln_relative_volatility_rms: float
    ln_relative_volatility_largest: float
    temperature_K: float
    x1: float


@dataclass(frozen=True, slots=True)
class PairFit:
    """A correlative equation fitted to one pair of components.

    Attributes
    ----------
    name, form : str
        Identifiers of the equation and of its temperature form.
    pair : tuple of int
        Indices of the two components in their mixture.
    model : CorrelativeModel
        The fitted binary.
    parameters : tuple of FittedParameter
    covariance, correlation : FloatArray of shape (P, P)
        Of the fitted parameters, in their order; see `covariance_basis`.
    covariance_basis : str
        What the covariance stands on, in words.
    residual : FitResidual
    effects : FitEffects
    notes : tuple of FitNote
    accepted : bool
        False where a note is grave: the fit invents or loses a split or an azeotrope, or its
        equation has no finite value somewhere in the range.
    starts, agreeing_starts : int
        How many starts were tried, and how many arrived at the same minimum.
    """

    name: str
    form: str
    pair: tuple[int, int]
    model: CorrelativeModel
    parameters: tuple[FittedParameter, ...]
    covariance: FloatArray
    correlation: FloatArray
    covariance_basis: str
    residual: FitResidual
    effects: FitEffects
    notes: tuple[FitNote, ...]
    accepted: bool
    starts: int
    agreeing_starts: int


@dataclass(frozen=True, slots=True)
class RefusedPair:
    """A pair for which the equation was refused, and why."""

    name: str
    pair: tuple[int, int]
    reason: str


@dataclass(frozen=True, slots=True)
class TripleCheck:
    """The whole mixture's ln gamma inside one face of three components, fitted less predicted."""

    components: tuple[int, int, int]
    rms: float
    largest: float
    temperature_K: float
    mole_fractions: tuple[float, float, float]
    component: int


@dataclass(frozen=True, slots=True)
class MixtureFit:
    """All pairs of a mixture, and the mixture made of them.

    Attributes
    ----------
    pairs : tuple of PairFit
    refused : tuple of RefusedPair
    model : CorrelativeModel or None
        Of the whole mixture; None where a pair was refused, or the equation is for two components.
    triples : tuple of TripleCheck
        Every face of three components.
    """

    pairs: tuple[PairFit, ...]
    refused: tuple[RefusedPair, ...]
    model: CorrelativeModel | None
    triples: tuple[TripleCheck, ...]
