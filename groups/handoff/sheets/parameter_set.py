"""A parameter set as it leaves the house: exact equation, unit of each number, and sources.

Everything here is text, numbers and tuples, so `dataclasses.asdict` gives what JSON holds.
"""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Number:
    """One number with its unit; `standard_error` None where it was fixed or is not determined."""

    name: str
    value: float
    unit: str
    standard_error: float | None
    meaning: str


@dataclass(frozen=True, slots=True)
class PairSheet:
    """The parameters of one pair; `first` and `second` are 1-based, as in the subscripts.

    The residuals of ln gamma are None where measured points were fitted; `residual` says in words
    how far the fit lies from what it was fitted to.
    """

    first: int
    second: int
    numbers: tuple[Number, ...]
    accepted: bool
    residual: str
    rms_ln_gamma: float | None
    largest_ln_gamma: float | None
    notes: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class ConstantSheet:
    """One constant of a pure component with its source."""

    name: str
    value: float
    unit: str
    source: str
    estimated: bool


@dataclass(frozen=True, slots=True)
class ComponentSheet:
    """A component: its place, names, vapour pressure and constants."""

    index: int
    name: str | None
    cas: str | None
    smiles: str
    formula: str
    molar_mass_g_mol: float
    vapour_pressure_equation: str | None
    vapour_pressure_coefficients: tuple[tuple[str, float], ...]
    vapour_pressure_range_K: tuple[float, float] | None
    vapour_pressure_citation: str | None
    vapour_pressure_note: str | None
    constants: tuple[ConstantSheet, ...]


@dataclass(frozen=True, slots=True)
class ParameterSet:
    """A complete set of parameters for one mixture.

    Attributes
    ----------
    model, form : str
        Identifiers.
    equation, interactions : str
        The exact text of both.
    temperature_unit : str
        Always "K": T in every term is in kelvin.
    temperature_range_K : tuple of float
        The range that was fitted; outside it the set is an extrapolation.
    origin : str
        What it was fitted to, in words.
    predicted : bool
        True where no measurement stands behind it.
    components, pairs
    cautions : tuple of str
    """

    model: str
    form: str
    equation: str
    interactions: str
    temperature_unit: str
    temperature_range_K: tuple[float, float]
    origin: str
    predicted: bool
    components: tuple[ComponentSheet, ...]
    pairs: tuple[PairSheet, ...]
    cautions: tuple[str, ...]
