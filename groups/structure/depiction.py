"""A picture of a molecule with its groups marked, readable with and without colour.

Every atom carries the letter of its group and the number of the occurrence; the atoms of one
occurrence lie on one band of colour, with a gap between neighbouring bands. The legend names the
letters. Atoms without a group lie on a hatched band and carry a question mark.
"""

import math
import re
import textwrap
from collections.abc import Iterator
from dataclasses import dataclass
from xml.sax.saxutils import escape

from rdkit import Chem, rdBase
from rdkit.Chem import rdDepictor
from rdkit.Chem.Draw import rdMolDraw2D

from groups.structure.assignment import Assignment
from groups.structure.molecule import Molecule

# Tints of the palette of M. Okabe and K. Ito, Color Universal Design (2008), which people with
# any of the common colour deficiencies tell apart.
_TINTS = (
    "#9bd0f2",
    "#f7cf7f",
    "#8fd9bd",
    "#f0b48c",
    "#e3b3d0",
    "#8db9dc",
    "#f3ec98",
    "#c9c9c9",
)
_LETTERS = "ADEGJLMQRTXZ"  # those that are no symbol of an element, so that C is always carbon
_PIXELS_PER_UNIT = 38.0  # a bond is about 1.5 units long
_BAND_TO_BOND = 0.62  # leaves a gap between the bands of bonded groups
_WIDEST = 1_600
_SHORTEST_LABELLED_BOND = 26.0  # pixels; below it the labels run into each other
_MARGIN = 20.0
_ROW = 26.0
_TEXT_SIZE = 15
_CHARACTER = 8.9  # mean width of a character at that size in common sans-serif fonts
_OPTIONS: dict[str, bool | int | float] = {
    "clearBackground": False,
    "scalingFactor": _PIXELS_PER_UNIT,
    "padding": 0.1,
    "bondLineWidth": 2,
    "minFontSize": 12,
    "maxFontSize": 18,
    "annotationFontScale": 0.75,
}
_BODY = re.compile(r"<svg[^>]*>(?P<body>.*)</svg>", re.DOTALL)
_HATCH = (
    '<pattern id="no-group" width="7" height="7" patternUnits="userSpaceOnUse" '
    'patternTransform="rotate(45)"><rect width="7" height="7" fill="#ffffff"/>'
    '<line x1="0" y1="0" x2="0" y2="7" stroke="#a8a8a8" stroke-width="2.2"/></pattern>'
)


@dataclass(frozen=True, slots=True)
class _Mark:
    """One row of the legend and the bands that belong to it."""

    symbol: str
    fill: str
    text: str
    occurrences: tuple[tuple[int, ...], ...]


@dataclass(frozen=True, slots=True)
class _Drawing:
    """The bare molecule: its SVG elements, its size and where its atoms stand, in pixels."""

    body: str
    width: float
    height: float
    places: tuple[tuple[float, float], ...]
    bond_length: float
    labelled: bool


def depict(molecule: Molecule, assignment: Assignment) -> str:
    """Draw a molecule with its groups marked and a legend.

    Parameters
    ----------
    molecule
        The molecule.
    assignment
        Its groups by one method, complete or not.

    Returns
    -------
    str
        One SVG element with title and description for screen readers. The same input gives the
        same text.

    Source
    ------
    None: the look is this project's own.
    """
    marks = tuple(_marks(assignment))
    with rdBase.BlockLogs():
        drawing = _drawn(molecule.mol, _labels(marks))
    caption = molecule.name or _shortened(molecule.canonical_smiles)
    title = f"Groups of {caption} by {assignment.method}"
    lines = _lines(assignment, drawing)
    widest = max(len(title), *(len(mark.text) + 5 for mark in marks), *map(len, lines), 0)
    width = max(drawing.width, widest * _CHARACTER) + 2 * _MARGIN
    legend_top = _MARGIN + 2 * _ROW + drawing.height
    height = legend_top + _ROW * (len(marks) + len(lines)) + _MARGIN / 2
    return "\n".join(
        (
            _opening(width, height),
            f'<title id="title">{escape(title)}</title>',
            f'<desc id="description">{escape(_description(molecule, marks, assignment))}</desc>',
            f"<defs>{_HATCH}</defs>",
            f'<rect width="{width:.1f}" height="{height:.1f}" fill="#ffffff"/>',
            _text(_MARGIN, _MARGIN + 6, title, weight="bold"),
            *_picture(molecule.mol, marks, drawing, (width - drawing.width) / 2),
            *_legend(marks, lines, legend_top),
            "</svg>",
        )
    )


def _picture(
    mol: Chem.Mol, marks: tuple[_Mark, ...], drawing: _Drawing, left: float
) -> Iterator[str]:
    """The bands with the molecule upon them, below the title."""
    yield f'<g transform="translate({left:.1f},{_MARGIN + _ROW:.1f})">'
    yield from _bands(mol, marks, drawing)
    yield drawing.body
    yield "</g>"


def _marks(assignment: Assignment) -> Iterator[_Mark]:
    for place, group in enumerate(assignment.groups):
        yield _Mark(
            symbol=_letter(place),
            fill=_TINTS[place % len(_TINTS)],
            text=f"{group.subgroup} \u00d7 {group.count}  (group {group.number}, "
            f"main group {group.main_group})",
            occurrences=group.atoms,
        )
    if assignment.unassigned_atoms:
        yield _Mark(
            symbol="?",
            fill="url(#no-group)",
            text=f"no group of {assignment.method}",
            occurrences=tuple((atom,) for atom in assignment.unassigned_atoms),
        )


def _letter(place: int) -> str:
    """A, D, E and so on, then AA, AD."""
    rest, last = divmod(place, len(_LETTERS))
    return (_letter(rest - 1) if rest else "") + _LETTERS[last]


def _labels(marks: tuple[_Mark, ...]) -> dict[int, str]:
    """What is written at each atom: the letter, and the occurrence where there are several."""
    labels: dict[int, str] = {}
    for mark in marks:
        numbered = len(mark.occurrences) > 1 and mark.symbol != "?"
        for number, atoms in enumerate(mark.occurrences, start=1):
            for atom in atoms:
                label = f"{mark.symbol}{number}" if numbered else mark.symbol
                labels[atom] = f"{labels[atom]}/{label}" if atom in labels else label
    return labels


def _drawn(mol: Chem.Mol, labels: dict[int, str]) -> _Drawing:
    flat = Chem.Mol(mol)
    rdDepictor.Compute2DCoords(flat, canonOrient=True)
    drawer = _drawer(flat, -1, -1)
    size = -1, -1
    if drawer.Width() > _WIDEST:
        size = _WIDEST, round(drawer.Height() * _WIDEST / drawer.Width()) + 60
        drawer = _drawer(flat, *size)
    labelled = _bond_length(flat, drawer) >= _SHORTEST_LABELLED_BOND
    if labelled:
        for atom, label in labels.items():
            flat.GetAtomWithIdx(atom).SetProp("atomNote", label)
        drawer = _drawer(flat, *size)
    places = [drawer.GetDrawCoords(index) for index in range(flat.GetNumAtoms())]
    bond_length = _bond_length(flat, drawer)
    drawer.FinishDrawing()
    return _Drawing(
        _elements(drawer.GetDrawingText()),
        drawer.Width(),
        drawer.Height(),
        tuple((place.x, place.y) for place in places),
        bond_length,
        labelled,
    )


def _elements(svg: str) -> str:
    """What stands inside the SVG element, without RDKit's comments."""
    found = _BODY.search(svg)
    body = "" if found is None else found["body"].strip()
    return re.sub(r"<!--.*?-->\s*", "", body, flags=re.DOTALL)


def _bond_length(flat: Chem.Mol, drawer: rdMolDraw2D.MolDraw2DSVG) -> float:
    """Of the shortest bond, in pixels; a lone atom has room as for a usual bond."""
    places = [drawer.GetDrawCoords(index) for index in range(flat.GetNumAtoms())]
    ends = ((places[b.GetBeginAtomIdx()], places[b.GetEndAtomIdx()]) for b in flat.GetBonds())
    lengths = [math.hypot(one.x - two.x, one.y - two.y) for one, two in ends]
    return min(lengths, default=1.5 * _PIXELS_PER_UNIT)


def _drawer(flat: Chem.Mol, width: int, height: int) -> rdMolDraw2D.MolDraw2DSVG:
    drawer = rdMolDraw2D.MolDraw2DSVG(width, height)
    options = drawer.drawOptions()  # its stubs type each option as the class itself
    options.useBWAtomPalette()
    options.setAnnotationColour((0.0, 0.0, 0.0))
    for name, value in _OPTIONS.items():
        setattr(options, name, value)
    rdMolDraw2D.PrepareAndDrawMolecule(drawer, flat, kekulize=True)
    return drawer


def _bands(mol: Chem.Mol, marks: tuple[_Mark, ...], drawing: _Drawing) -> Iterator[str]:
    """A round-ended band under the atoms and inner bonds of each occurrence."""
    width = _BAND_TO_BOND * drawing.bond_length
    yield f'<g stroke-linecap="round" stroke-width="{width:.1f}">'
    for mark in marks:
        for atoms in mark.occurrences:
            for atom in atoms:
                x, y = drawing.places[atom]
                yield (
                    f'<circle cx="{x:.1f}" cy="{y:.1f}" r="{width / 2:.1f}" fill="{mark.fill}"/>'
                )
            yield from _inner_bonds(mol, atoms, mark.fill, drawing)
    yield "</g>"


def _inner_bonds(
    mol: Chem.Mol, atoms: tuple[int, ...], fill: str, drawing: _Drawing
) -> Iterator[str]:
    for bond in mol.GetBonds():
        if bond.GetBeginAtomIdx() in atoms and bond.GetEndAtomIdx() in atoms:
            x1, y1 = drawing.places[bond.GetBeginAtomIdx()]
            x2, y2 = drawing.places[bond.GetEndAtomIdx()]
            yield f'<line x1="{x1:.1f}" y1="{y1:.1f}" x2="{x2:.1f}" y2="{y2:.1f}" stroke="{fill}"/>'


def _legend(marks: tuple[_Mark, ...], lines: list[str], top: float) -> Iterator[str]:
    for row, mark in enumerate(marks):
        y = top + row * _ROW
        yield (
            f'<rect x="{_MARGIN:.1f}" y="{y - 16:.1f}" width="30" height="22" rx="5" '
            f'fill="{mark.fill}" stroke="#333333"/>'
        )
        if mark.symbol == "?":  # a clear ground, or the hatching would hide the sign
            yield f'<circle cx="{_MARGIN + 15:.1f}" cy="{y - 5:.1f}" r="9" fill="#ffffff"/>'
        yield _text(_MARGIN + 15, y, mark.symbol, weight="bold", anchor="middle")
        yield _text(_MARGIN + 40, y, mark.text)
    for row, line in enumerate(lines):
        yield _text(_MARGIN, top + (len(marks) + row) * _ROW, line)


def _lines(assignment: Assignment, drawing: _Drawing) -> list[str]:
    """What stands below the legend."""
    text = assignment.explanation or ""
    if not drawing.labelled:
        text += " The molecule is too large for labels at its atoms."
    return textwrap.wrap(text.strip(), max(48, int(drawing.width / _CHARACTER)))


def _description(molecule: Molecule, marks: tuple[_Mark, ...], assignment: Assignment) -> str:
    parts = [
        f"{mark.symbol}: {mark.text}, atoms "
        + "; ".join(" ".join(map(str, atoms)) for atoms in mark.occurrences)
        for mark in marks
    ]
    ending = [assignment.explanation] if assignment.explanation else []
    return ". ".join([f"SMILES {molecule.canonical_smiles}", *parts, *ending]) + "."


def _opening(width: float, height: float) -> str:
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{width:.0f}" height="{height:.0f}" '
        f'viewBox="0 0 {width:.1f} {height:.1f}" role="img" '
        'aria-labelledby="title description" font-family="Helvetica, Arial, sans-serif" '
        f'font-size="{_TEXT_SIZE}">'
    )


def _text(x: float, y: float, text: str, *, weight: str = "normal", anchor: str = "start") -> str:
    return (
        f'<text x="{x:.1f}" y="{y:.1f}" font-weight="{weight}" text-anchor="{anchor}" '
        f'fill="#111111">{escape(text)}</text>'
    )


def _shortened(text: str, length: int = 40) -> str:
    return text if len(text) <= length else text[: length - 1] + "\u2026"
