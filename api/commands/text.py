"""Plain-text tables and the doubts under them."""

import textwrap
from collections.abc import Sequence

from api.schemas.confidence import Confidence
from api.schemas.molecule import MoleculeIdentity, MoleculeResult

WIDTH = 96


def aligned(header: Sequence[str], rows: Sequence[Sequence[object]]) -> str:
    """Columns of equal width: texts to the left, numbers to the right."""
    cells = [[_cell(value) for value in row] for row in rows]
    widths = [max(map(len, column)) for column in zip(header, *cells, strict=True)]
    numeric = [
        all(value is None or isinstance(value, (int, float)) for value in column)
        for column in zip(*rows, strict=True)
    ] or [False] * len(header)
    lines = [_line(header, widths, numeric), _line(["-" * w for w in widths], widths, numeric)]
    return "\n".join([*lines, *(_line(row, widths, numeric) for row in cells)])


def _line(cells: Sequence[str], widths: Sequence[int], numeric: Sequence[bool]) -> str:
    padded = (
        cell.rjust(width) if right else cell.ljust(width)
        for cell, width, right in zip(cells, widths, numeric, strict=True)
    )
    return "  ".join(padded).rstrip()


def _cell(value: object) -> str:
    if value is None:
        return "-"
    if isinstance(value, float):
        return f"{value:.4f}" if 1e-3 <= abs(value) < 1e4 or value == 0.0 else f"{value:.3e}"
    return str(value)


def wrapped(text: str, indent: str = "") -> str:
    """Text in lines of the house width; the first starts with `indent`, the others align."""
    return textwrap.fill(text, WIDTH, initial_indent=indent, subsequent_indent=" " * len(indent))


def doubts(confidence: Confidence) -> str:
    """Grade and reasons."""
    lines = [f"Confidence: {confidence.grade}"]
    lines += [wrapped(reason.message, "  - ") for reason in confidence.reasons]
    lines += [wrapped(evidence.message, "  . ") for evidence in confidence.evidence]
    return "\n".join(lines)


def cautions_text(cautions: Sequence[str]) -> str:
    """The cautions as one paragraph."""
    return wrapped(" ".join(cautions))


def named(molecule: MoleculeIdentity | MoleculeResult | None) -> str:
    """Name and SMILES."""
    if molecule is None or molecule.canonical_smiles is None:
        return "(not described)"
    if molecule.name is None:
        return molecule.canonical_smiles
    return f"{molecule.name} ({molecule.canonical_smiles})"
