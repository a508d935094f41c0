"""The one table from error class to problem type, and every other way a request can fail."""

from dataclasses import dataclass

from groups import errors


@dataclass(frozen=True, slots=True)
class ProblemType:
    """One kind of refusal: its stable slug, HTTP status, title, and what to do about it.

    `cure` stands in where the error itself brings none; `members` names the typed fields of the
    error that go into the answer beside the standard ones.
    """

    slug: str
    status: int
    title: str
    cure: str
    members: tuple[str, ...] = ()

    @property
    def uri(self) -> str:
        """The `type` of a problem: relative, so that it holds behind any host."""
        return f"/problems/{self.slug}"


class RequestProblemError(Exception):
    """A refusal that the HTTP side itself makes (shape, cap, media type)."""

    def __init__(self, slug: str, detail: str, *, cure: str = "", field: str | None = None) -> None:
        super().__init__(detail)
        self.slug, self.cure, self.field = slug, cure, field


_STRUCTURE = ("smiles", "atoms")

ERROR_TYPES: dict[type[errors.MixwrightError], ProblemType] = {
    errors.InvalidInputError: ProblemType(
        "invalid-input",
        422,
        "The input does not describe a calculation",
        "Correct the field named.",
    ),
    errors.OutOfRangeError: ProblemType(
        "out-of-range",
        422,
        "A number lies outside its allowed range",
        "Give a number inside the range; the unit stands in the field's name.",
    ),
    errors.FractionSumError: ProblemType(
        "fraction-sum",
        422,
        "The mole fractions do not sum to one",
        "Divide each mole fraction by the sum.",
        ("total",),
    ),
    errors.ShapeError: ProblemType(
        "lengths-do-not-fit",
        422,
        "Lists whose lengths do not fit together",
        "Give one value for each component or point.",
    ),
    errors.DuplicateComponentError: ProblemType(
        "duplicate-component",
        422,
        "A component is given twice",
        "Give each molecule once and add its mole fractions up.",
        ("canonical_smiles", "first", "second"),
    ),
    errors.UnknownMethodError: ProblemType(
        "unknown-method",
        422,
        "There is no such method",
        "Use one of the identifiers listed by GET /v1/methods.",
        ("method", "allowed"),
    ),
    errors.MeasurementError: ProblemType(
        "measurement",
        422,
        "A measured point cannot be read or cannot be true",
        "Correct the points named, or the units they are stated in.",
        ("points",),
    ),
    errors.TooFewPointsError: ProblemType(
        "too-few-points",
        422,
        "There are fewer measurements than the request needs",
        "Give more points, or ask for an equation with fewer parameters.",
        ("given", "needed"),
    ),
    errors.UnreadableSmilesError: ProblemType(
        "unreadable-smiles",
        422,
        "The SMILES cannot be read",
        "Correct the SMILES at the place named.",
        ("smiles", "position"),
    ),
    errors.UnknownNameError: ProblemType(
        "unknown-name",
        422,
        "The name or CAS number is not in the offline list",
        "Give the SMILES instead.",
    ),
    errors.UnsupportedStructureError: ProblemType(
        "unsupported-structure",
        422,
        "The structure is outside what group contribution describes",
        "Group contribution takes one neutral molecule of ordinary organic elements.",
        _STRUCTURE,
    ),
    errors.EmptyMoleculeError: ProblemType(
        "empty-molecule", 422, "The molecule has no atoms", "Give a molecule.", _STRUCTURE
    ),
    errors.IonError: ProblemType(
        "ion",
        422,
        "The molecule carries a charge",
        "Give the neutral molecule; no table here describes ions.",
        _STRUCTURE,
    ),
    errors.SaltError: ProblemType(
        "salt",
        422,
        "The SMILES is a salt",
        "Give the neutral acid or base; no table here describes electrolytes.",
        _STRUCTURE,
    ),
    errors.SeveralMoleculesError: ProblemType(
        "several-molecules",
        422,
        "The SMILES holds several molecules",
        "Give each molecule as a component of its own.",
        _STRUCTURE,
    ),
    errors.RadicalError: ProblemType(
        "radical",
        422,
        "The molecule has an unpaired electron",
        "Add the missing hydrogen, or leave the molecule out.",
        _STRUCTURE,
    ),
    errors.MetalError: ProblemType(
        "element-not-described",
        422,
        "The molecule holds a metal or another element that no table describes",
        "Leave the molecule out; no group-contribution table here describes this element.",
        _STRUCTURE,
    ),
    errors.PolymerError: ProblemType(
        "polymer",
        422,
        "The SMILES has an open attachment point",
        "Replace each '*' by a real end group; polymers are not described.",
        _STRUCTURE,
    ),
    errors.IsotopeError: ProblemType(
        "isotope",
        422,
        "The SMILES states an isotope",
        "Leave the isotope mark out; the tables describe the natural mixture.",
        _STRUCTURE,
    ),
    errors.MoleculeTooLargeError: ProblemType(
        "molecule-too-large",
        422,
        "The molecule has too many heavy atoms",
        "Give a smaller molecule; the tables were fitted to small ones.",
        ("smiles",),
    ),
    errors.IncompleteAssignmentError: ProblemType(
        "incomplete-assignment",
        422,
        "Some atoms belong to no group of the table",
        "Ask for another method; POST /v1/molecules names the atoms that no group covers.",
        ("smiles", "method", "atoms"),
    ),
    errors.MissingParameterError: ProblemType(
        "missing-parameter",
        422,
        "The table has no parameter for a group pair",
        "Set 'on_missing' to 'estimate', or ask for another method.",
        ("method", "pairs"),
    ),
    errors.NoVapourPressureError: ProblemType(
        "no-vapour-pressure",
        422,
        "No source gives a vapour pressure for a component",
        "Give your own 'vapour_pressure' for this component.",
        ("smiles",),
    ),
    errors.FitRefusedError: ProblemType(
        "fit-refused",
        422,
        "The equation cannot describe this liquid, or the data cannot fix its parameters",
        "Take another equation, or a form with fewer parameters.",
    ),
    errors.ConvergenceError: ProblemType(
        "not-converged",
        422,
        "The calculation did not reach its equations",
        "Try other conditions or another method; no unverified number is returned.",
        ("iterations",),
    ),
    errors.DataError: ProblemType(
        "faulty-data",
        500,
        "A data file of the service fails its own record",
        "Reinstall the service; its data files are damaged.",
    ),
}

REQUEST_TYPES: dict[str, ProblemType] = {
    problem.slug: problem
    for problem in (
        ProblemType(
            "invalid-request",
            422,
            "The request does not have the documented shape",
            "Compare the field named with the description at /reference.",
        ),
        ProblemType(
            "unreadable-body",
            400,
            "The body is not valid JSON",
            "Send one JSON document in UTF-8.",
        ),
        ProblemType(
            "not-found",
            404,
            "There is nothing at this address",
            "See /reference for the addresses.",
        ),
        ProblemType(
            "method-not-found",
            404,
            "There is no such method",
            "Use one of the identifiers listed by GET /v1/methods.",
        ),
        ProblemType(
            "verb-not-allowed",
            405,
            "This address does not take this HTTP verb",
            "Use one of the verbs in the 'Allow' header.",
        ),
        ProblemType(
            "not-acceptable",
            406,
            "The answer does not exist in the media type asked for",
            "Ask for one of the media types named, or leave the 'Accept' header out.",
        ),
        ProblemType(
            "body-too-large",
            413,
            "The body is larger than the service takes",
            "Split the request into several.",
        ),
        ProblemType(
            "unsupported-media-type",
            415,
            "The body is not sent as JSON",
            "Send 'Content-Type: application/json' and no 'Content-Encoding'.",
        ),
        ProblemType(
            "too-many-items",
            422,
            "A list is longer than the service takes",
            "Split the request into several.",
        ),
        ProblemType(
            "time-limit",
            503,
            "The request took longer than the time limit",
            "Ask for fewer points or molecules at once, or try again when there is less load.",
        ),
        ProblemType(
            "not-ready",
            503,
            "The service cannot compute yet",
            "Try again in a few seconds; if it stays so, the service's log says why.",
        ),
        ProblemType(
            "bad-request", 400, "The request cannot be taken", "Compare it with /reference."
        ),
        ProblemType(
            "internal-error",
            500,
            "The service failed",
            "The fault is the service's, not the request's. Report it with the time it happened.",
        ),
    )
}


def problem_type_of(error: errors.MixwrightError) -> ProblemType:
    """The type of the nearest class of the error's ancestry that the table holds."""
    for ancestor in type(error).__mro__:
        if ancestor in ERROR_TYPES:
            return ERROR_TYPES[ancestor]
    return REQUEST_TYPES["invalid-request"]


def all_problem_types() -> dict[str, ProblemType]:
    """Every problem type by slug, sorted."""
    every = {problem.slug: problem for problem in ERROR_TYPES.values()} | REQUEST_TYPES
    return dict(sorted(every.items()))
