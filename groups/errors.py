"""Every error that `groups` raises on purpose.

MixwrightError
|-- InvalidInputError                 a value that no calculation can start from
|   |-- OutOfRangeError               a number outside its allowed range
|   |-- FractionSumError              mole fractions that do not sum to one
|   |-- ShapeError                    lists whose lengths do not fit together
|   |-- DuplicateComponentError       one molecule given twice
|   |-- UnknownMethodError            a method identifier that does not exist
|   |-- MeasurementError              a measured point that cannot be read or be true
|   `-- TooFewPointsError             fewer measurements than what is asked of them needs
|-- StructureError                    a molecule that cannot be taken
|   |-- UnreadableSmilesError         not valid SMILES; says where
|   |-- UnknownNameError              a name or CAS number that the offline list lacks
|   `-- UnsupportedStructureError     valid SMILES, outside what group contribution describes
|       |-- EmptyMoleculeError
|       |-- IonError
|       |-- SaltError
|       |-- SeveralMoleculesError
|       |-- RadicalError
|       |-- MetalError
|       |-- PolymerError
|       |-- IsotopeError
|       `-- MoleculeTooLargeError
|-- PredictionError                   sound input for which no method here gives a number
|   |-- IncompleteAssignmentError     atoms that no group of the table covers
|   |-- MissingParameterError         a group pair without published parameter
|   |-- NoVapourPressureError         no source gives a vapour pressure
|   `-- FitRefusedError               an equation that cannot describe this liquid
|-- ConvergenceError                  an iteration that did not reach its equations
`-- DataError                         a data file of this project that fails its own record
"""

from collections.abc import Sequence


class MixwrightError(Exception):
    """Base of all errors raised on purpose; `cure` says what to do about it."""

    cure: str = ""

    def __init__(self, message: str, *, cure: str = "", field: str | None = None) -> None:
        super().__init__(message)
        self.cure = cure or type(self).cure
        self.field = field


class InvalidInputError(MixwrightError):
    """A value that no calculation can start from."""


class OutOfRangeError(InvalidInputError):
    """A number outside its allowed range."""

    def __init__(
        self, name: str, value: float, lower: float, upper: float, *, field: str | None = None
    ) -> None:
        super().__init__(
            f"The '{name}' must lie between {lower:g} and {upper:g}. Got {value!r} instead.",
            cure=f"Give a '{name}' between {lower:g} and {upper:g}{_unit_hint(name, value)}.",
            field=field or name,
        )
        self.name, self.value, self.lower, self.upper = name, value, lower, upper


def _unit_hint(name: str, value: float) -> str:
    """The unit that is asked for, and the value in it where it looks like another unit's."""
    if name.endswith("_K"):
        meant = f"; {value:g} °C is {value + 273.15:g} K" if -150.0 <= value <= 100.0 else ""
        return f", in kelvin{meant}"
    if name.endswith("_kPa"):
        meant = f"; {value:g} Pa is {value / 1000.0:g} kPa" if 1e5 < value < 1e8 else ""
        return f", in kilopascal{meant}"
    if "fraction" in name:
        return "; fractions of one, not per cent" if value > 1.0 else ""
    return ""


class FractionSumError(InvalidInputError):
    """Mole fractions that do not sum to one."""

    def __init__(self, total: float, *, field: str | None = None) -> None:
        super().__init__(
            f"The mole fractions must sum to 1. Got a sum of {total:.10g} instead.",
            cure="Divide each mole fraction by the sum, or correct the one that is wrong.",
            field=field,
        )
        self.total = total


class ShapeError(InvalidInputError):
    """Lists whose lengths do not fit together."""


class DuplicateComponentError(InvalidInputError):
    """One molecule given twice."""

    def __init__(self, canonical_smiles: str, first: int, second: int) -> None:
        super().__init__(
            f"Components {first} and {second} are the same molecule, {canonical_smiles}.",
            cure="Give each molecule once and add its mole fractions up.",
            field=f"components[{second}]",
        )
        self.canonical_smiles, self.first, self.second = canonical_smiles, first, second


class UnknownMethodError(InvalidInputError):
    """A method identifier that does not exist."""

    def __init__(self, method: str, allowed: Sequence[str]) -> None:
        super().__init__(
            f"There is no method '{method}'. Allowed: {', '.join(allowed)}.",
            cure="Use one of the identifiers listed by GET /v1/methods.",
            field="method",
        )
        self.method, self.allowed = method, tuple(allowed)


class MeasurementError(InvalidInputError):
    """A measured point that cannot be read or cannot be true; `points` are 0-based."""

    cure = "Correct the points named, or the units they are stated in."

    def __init__(
        self, message: str, *, points: Sequence[int] = (), cure: str = "", field: str | None = None
    ) -> None:
        super().__init__(message, cure=cure, field=field)
        self.points = tuple(points)


class TooFewPointsError(InvalidInputError):
    """Fewer measurements than a fit or a test needs."""

    cure = "Give more points, or ask for an equation with fewer parameters."

    def __init__(self, message: str, *, given: int, needed: int, field: str | None = None) -> None:
        super().__init__(message, field=field)
        self.given, self.needed = given, needed


class StructureError(MixwrightError):
    """A molecule that cannot be taken."""

    def __init__(
        self, message: str, *, smiles: str = "", atoms: Sequence[int] = (), cure: str = ""
    ) -> None:
        super().__init__(message, cure=cure)
        self.smiles, self.atoms = smiles, tuple(atoms)


class UnreadableSmilesError(StructureError):
    """Text that is not valid SMILES; `position` is the 0-based place, where known."""

    cure = (
        "Correct the SMILES at the place named. A name or a CAS number is given as "
        '{"name": ...} or {"cas": ...}.'
    )

    def __init__(self, message: str, *, smiles: str, position: int | None = None) -> None:
        super().__init__(message, smiles=smiles)
        self.position = position


class UnknownNameError(StructureError):
    """A name or CAS number that the offline list does not hold."""

    cure = "Give the SMILES instead; names and CAS numbers are resolved offline only."


class UnsupportedStructureError(StructureError):
    """Valid SMILES, but outside what a group-contribution method describes."""


class EmptyMoleculeError(UnsupportedStructureError):
    """No atom, or hydrogen alone."""


class IonError(UnsupportedStructureError):
    """A net charge."""


class SaltError(UnsupportedStructureError):
    """Oppositely charged parts in one SMILES."""


class SeveralMoleculesError(UnsupportedStructureError):
    """More than one neutral molecule in one SMILES."""


class RadicalError(UnsupportedStructureError):
    """An unpaired electron."""


class MetalError(UnsupportedStructureError):
    """A metal."""


class PolymerError(UnsupportedStructureError):
    """A wildcard atom: a repeat unit or an open attachment point."""


class IsotopeError(UnsupportedStructureError):
    """A stated isotope."""


class MoleculeTooLargeError(UnsupportedStructureError):
    """More heavy atoms than the cap."""


class PredictionError(MixwrightError):
    """Sound input for which no method here gives a number."""


class IncompleteAssignmentError(PredictionError):
    """Atoms that no group of the table covers."""

    cure = "Ask for another method, or see POST /v1/molecules for the atoms that no group covers."

    def __init__(self, message: str, *, smiles: str, method: str, atoms: Sequence[int]) -> None:
        super().__init__(message)
        self.smiles, self.method, self.atoms = smiles, method, tuple(atoms)


class MissingParameterError(PredictionError):
    """Main-group pairs (by number) for which the table publishes no parameter."""

    cure = "Set 'on_missing' to 'estimate', or ask for another method."

    def __init__(self, message: str, *, method: str, pairs: Sequence[tuple[int, int]]) -> None:
        super().__init__(message)
        self.method, self.pairs = method, tuple(pairs)


class NoVapourPressureError(PredictionError):
    """No source gives a vapour pressure for the molecule."""

    cure = "Give your own 'vapour_pressure' for this component."

    def __init__(self, message: str, *, smiles: str) -> None:
        super().__init__(message)
        self.smiles = smiles


class FitRefusedError(PredictionError):
    """An equation that cannot describe this liquid, or data that cannot fix its parameters."""

    cure = "Take another equation, or a form with fewer parameters."

    def __init__(self, message: str, *, cure: str = "", field: str | None = None) -> None:
        super().__init__(message, cure=cure, field=field)


class ConvergenceError(MixwrightError):
    """An iteration that did not reach its equations."""

    def __init__(self, message: str, *, iterations: int, residual: float) -> None:
        super().__init__(message)
        self.iterations, self.residual = iterations, residual


class DataError(MixwrightError):
    """A data file of this project that fails its own record."""
