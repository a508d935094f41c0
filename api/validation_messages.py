"""From pydantic's errors to the field (as a JSON pointer), what is wrong, and the cure."""

from collections.abc import Mapping, Sequence

from api.schemas.problem import FieldProblem

_LOOK_UP = "Compare the field with the description at /reference."

# pydantic error type -> (what is wrong, cure); {..} is filled from the error's own context.
_WORDS = {
    "missing": ("is missing", "Add this field."),
    "extra_forbidden": (
        "is not known here",
        "Remove this field or correct its spelling; this request has no such field.",
    ),
    "finite_number": (
        "must be a finite number",
        "Give a finite number; NaN and infinities are not values.",
    ),
    "float_type": (
        "must be a number",
        "Give a JSON number, without quotation marks, of ordinary size.",
    ),
    "int_type": ("must be a whole number", "Give a whole JSON number, without quotation marks."),
    "int_from_float": ("must be a whole number", "Give a whole number."),
    "int_parsing_size": ("is too large a number", "Give a number of ordinary size."),
    "string_type": ("must be a text", "Give a JSON text, in quotation marks."),
    "string_unicode": (
        "is not valid Unicode",
        "Give a text, and names of fields, of valid Unicode characters.",
    ),
    "string_too_long": (
        "is longer than {max_length} characters",
        "Give a text of at most {max_length} characters.",
    ),
    "string_too_short": ("is empty", "Give a text of at least {min_length} character."),
    "list_type": ("must be a list", "Give a JSON list, in square brackets."),
    "too_short": ("has {actual_length} items", "Give a list of at least {min_length}."),
    "too_long": ("has too many items", "Give a list of at most {max_length}."),
    "literal_error": ("is none of the allowed values", "Use one of {expected}."),
    "union_tag_not_found": (
        "lacks the field {discriminator}",
        "Add the field {discriminator}, which says what kind it is.",
    ),
    "union_tag_invalid": ("is of no known kind", "Set {discriminator} to one of {expected_tags}."),
    "greater_than_equal": ("is below {ge}", "Give a number of at least {ge}."),
    "model_type": ("must be an object", "Give a JSON object, in braces."),
    "model_attributes_type": ("must be an object", "Give a JSON object, in braces."),
}


def field_problems(
    errors: Sequence[Mapping[str, object]], body: object = None
) -> list[FieldProblem]:
    """One entry an error: where, what, and what to do. The offending value is never echoed.

    `body` is the parsed body, with which the path is told as the sender wrote it.
    """
    return [_field_problem(error, body) for error in errors]


def _field_problem(error: Mapping[str, object], body: object) -> FieldProblem:
    field = _pointer(error, body)
    kind, context = str(error.get("type")), error.get("ctx")
    values = context if isinstance(context, Mapping) else {}
    what, cure = _WORDS.get(kind, (None, _LOOK_UP))
    if what is None:
        detail = str(error.get("msg", "is wrong")).removeprefix("Value error, ").rstrip(".")
        detail = f"{_shown(field)}: {detail}."
        cure = str(values.get("cure", cure))
    else:
        detail, cure = f"{_shown(field)} {_filled(what, values)}.", _filled(cure, values)
    return FieldProblem(field=field, detail=_printable(detail), cure=_printable(cure))


def _filled(template: str, values: Mapping[str, object]) -> str:
    try:
        return template.format(**values)
    except KeyError:
        return template.replace("{", "").replace("}", "")


def _shown(field: str) -> str:
    return "The body" if field == "" else f"The field {field}"


def _pointer(error: Mapping[str, object], body: object) -> str:
    """JSON pointer (RFC 6901) into the body; the bare name of a query or path parameter."""
    location = error.get("loc")
    parts = list(location) if isinstance(location, (tuple, list)) else []
    source = parts.pop(0) if parts and parts[0] in {"body", "query", "path", "header"} else "body"
    if source != "body":
        return ".".join(_printable(str(part)) for part in parts)
    sent = _as_sent(parts, body, missing=error.get("type") == "missing")
    return "".join("/" + _escaped(part) for part in sent)


def _as_sent(parts: Sequence[object], body: object, *, missing: bool) -> list[object]:
    """The path without the steps that only the schema makes.

    A text stands for {"smiles": text}, a number for a list of one, and the kind of vapour
    pressure is a step of pydantic's own; none of these is in the body.
    """
    sent: list[object] = []
    here = body
    for index, part in enumerate(parts):
        if _holds(here, part):
            here = here[part]  # type: ignore[index]
        elif not (missing and index == len(parts) - 1):
            continue
        sent.append(part)
    return sent


def _holds(container: object, part: object) -> bool:
    if isinstance(container, list):
        return isinstance(part, int) and part < len(container)
    return isinstance(container, Mapping) and part in container


def _escaped(part: object) -> str:
    return _printable(str(part)).replace("~", "~0").replace("/", "~1")[:200]


def _printable(text: str) -> str:
    """Text that can be encoded whatever the request held."""
    return text.encode("utf-8", "replace").decode()
