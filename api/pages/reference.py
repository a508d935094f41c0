"""The reference page, made from the OpenAPI description."""

import json
from collections.abc import Iterator
from html import escape
from typing import Any

from api.pages.frame import page

_VERBS = ("get", "post")


def reference_page(described: dict[str, Any]) -> str:
    """HTML of every address: what it takes, what it gives, an example, its problems."""
    schemas = described["components"]["schemas"]
    parts = [f"<h1>Reference, version {escape(described['info']['version'])}</h1>"]
    parts.append(_molecules(schemas))
    for path, operations in described["paths"].items():
        for verb in _VERBS:
            if verb in operations:
                parts.append(_operation(path, verb, operations[verb], schemas))
    return page("Reference", "".join(parts))


def _molecules(schemas: dict[str, Any]) -> str:
    """How a molecule is given, with the user's own vapour pressure."""
    as_object = schemas["MoleculeInput"]["anyOf"][1]
    forms = ("AntoineEquation", "Dippr101Equation", "MeasuredPoints")
    parts = [
        "<h2>MoleculeInput</h2><p>A molecule is SMILES as a text, or an object with exactly one of "
        "<code>smiles</code>, <code>name</code> and <code>cas</code>, and the vapour pressure you "
        "have measured, if any.</p>" + _fields(as_object, schemas)
    ]
    for name in forms:
        described = escape(schemas[name].get("description", ""))
        parts.append(f"<h3>vapour_pressure: {described}</h3>" + _fields(schemas[name], schemas))
    return "".join(parts)


def _operation(path: str, verb: str, operation: dict[str, Any], schemas: dict[str, Any]) -> str:
    address = f"<code>{verb.upper()} {escape(path)}</code>"
    parts = [
        f'<h2 id="{escape(operation["operationId"])}">{address}</h2>'
        f"<p>{escape(operation['summary'])}. {escape(operation.get('description', ''))}</p>"
    ]
    asked = operation.get("requestBody", {}).get("content", {}).get("application/json", {})
    if asked:
        parts.append("<h3>Takes</h3>" + _fields(asked["schema"], schemas))
        parts += [_example(name, given) for name, given in asked.get("examples", {}).items()]
    answer = operation["responses"].get("200", {}).get("content", {})
    if answer.get("application/json", {}).get("schema"):
        parts.append("<h3>Gives</h3>" + _fields(answer["application/json"]["schema"], schemas))
    others = [media for media in answer if media != "application/json"]
    if others:
        parts.append(f"<p>Also as {escape(', '.join(others))}, by the Accept header.</p>")
    return "".join(parts) + _problems(operation)


def _example(name: str, given: dict[str, Any]) -> str:
    text = json.dumps(given["value"], indent=2, ensure_ascii=False)
    return f"<p>Example: {escape(name)}</p><pre>{escape(text)}</pre>"


def _problems(operation: dict[str, Any]) -> str:
    contents = [answer.get("content", {}) for answer in operation["responses"].values()]
    kinds = [content.get("application/problem+json", {}) for content in contents]
    slugs = sorted(slug for kind in kinds for slug in kind.get("examples", {}))
    links = ", ".join(f'<a href="/problems/{escape(slug)}">{escape(slug)}</a>' for slug in slugs)
    return f"<p>Problems: {links}.</p>" if slugs else ""


def _fields(schema: dict[str, Any], schemas: dict[str, Any]) -> str:
    rows = "".join(
        f"<tr><td><code>{escape(name)}</code></td><td>{escape(kind)}</td><td>{escape(text)}</td></tr>"
        for name, kind, text in _rows(schema, schemas)
    )
    return f"<table><tr><th>field</th><th>type</th><th></th></tr>{rows}</table>"


def _rows(
    schema: dict[str, Any], schemas: dict[str, Any], prefix: str = "", depth: int = 0
) -> Iterator[tuple[str, str, str]]:
    target = _resolved(schema, schemas)
    required = set(target.get("required", ()))
    for name, field in target.get("properties", {}).items():
        text = field.get("description", "")
        if depth == 0 and name not in required and "default" in field:
            text = f"Default {json.dumps(field['default'])}. {text}"
        yield prefix + name, _kind(field, schemas), text
        inner = field.get("items", field)
        if depth < 2 and "$ref" in inner and "properties" in _resolved(inner, schemas):
            mark = "[]." if "items" in field else "."
            yield from _rows(inner, schemas, prefix + name + mark, depth + 1)


def _resolved(schema: dict[str, Any], schemas: dict[str, Any]) -> dict[str, Any]:
    found = schemas[schema["$ref"].rsplit("/", 1)[1]] if "$ref" in schema else schema
    assert isinstance(found, dict)
    return found


def _kind(field: dict[str, Any], schemas: dict[str, Any]) -> str:
    if "$ref" in field:
        return str(field["$ref"]).rsplit("/", 1)[1]
    if "const" in field:
        return json.dumps(field["const"])
    if "enum" in field:
        return " | ".join(json.dumps(value) for value in field["enum"])
    options = field.get("anyOf") or field.get("oneOf")
    if options:
        return " or ".join(dict.fromkeys(_kind(option, schemas) for option in options))
    if field.get("type") == "array":
        return f"list of {_kind(field.get('items', {}), schemas)}"
    return str(field.get("type", "any"))
