"""A parameter sheet: exact equation, unit of each number, and sources."""

from pydantic import Field

from api.schemas.base import StrictModel


class SheetNumber(StrictModel):
    """One number with its unit; the subscripts in its name are 1-based."""

    name: str
    value: float | None
    unit: str
    standard_error: float | None = Field(description="Null where fixed or not determined.")
    meaning: str


class SheetPair(StrictModel):
    """The parameters of one pair; `first` and `second` are 1-based."""

    first: int
    second: int
    numbers: list[SheetNumber]
    accepted: bool = Field(description="False: not to be used before the notes are read.")
    residual: str
    rms_ln_gamma: float | None
    largest_ln_gamma: float | None
    notes: list[str]


class SheetConstant(StrictModel):
    """One constant of a pure component with its source."""

    name: str
    value: float | None
    unit: str
    source: str
    estimated: bool


class SheetComponent(StrictModel):
    """A component: its place, names, vapour pressure and constants."""

    index: int
    name: str | None
    cas: str | None
    smiles: str
    formula: str
    molar_mass_g_mol: float
    vapour_pressure_equation: str | None
    vapour_pressure_coefficients: list[tuple[str, float | None]]
    vapour_pressure_range_K: list[float] | None
    vapour_pressure_citation: str | None
    vapour_pressure_note: str | None
    constants: list[SheetConstant]


class ParameterSheet(StrictModel):
    """A complete set of parameters for one mixture, to be typed into a flowsheet."""

    model: str
    form: str
    equation: str = Field(description="The exact equation of ln gamma.")
    interactions: str = Field(description="The exact temperature form of the interactions.")
    temperature_unit: str
    temperature_range_K: list[float]
    origin: str
    predicted: bool = Field(description="True where no measurement stands behind it.")
    components: list[SheetComponent]
    pairs: list[SheetPair]
    cautions: list[str]
