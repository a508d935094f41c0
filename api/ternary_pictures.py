"""Ternary diagrams and residue curve maps as pictures, readable in black and white."""

import textwrap
from collections.abc import Sequence
from typing import Any, Literal

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from api.pictures import drawing, picture_file
from groups.arrays import FloatArray
from groups.confidence import Confidence
from groups.prediction import ResidueMapAnswer, TernaryDiagramAnswer
from groups.prediction.ternary_diagrams import binodal_line, tie_lines_shown
from groups.structure.molecule import Molecule

Format = Literal["svg", "png"]
_EDGE, _GRID = "#222222", "#dcdcdc"
_BINODAL, _TIE, _THREE = "#12355b", "#7a7a7a", "#a6401b"
_CURVE, _BOUNDARY = "#12355b", "#a6401b"
_HEIGHT = float(np.sqrt(3.0) / 2.0)
_MARKS = {"stable node": ("o", "black"), "unstable node": ("o", "white"), "saddle": ("s", "white")}
_NAMES = {
    "stable node": "Stable node: curves end",
    "unstable node": "Unstable node: curves begin",
    "saddle": "Saddle: curves pass",
}


def ternary_picture(answer: TernaryDiagramAnswer, file_format: Format) -> bytes:
    """Binodals, tie lines and plait points in a triangle.

    Parameters
    ----------
    answer : TernaryDiagramAnswer
    file_format : {"svg", "png"}

    Returns
    -------
    bytes
        The file.
    """
    with drawing:
        figure, axes = _triangle(answer.components)
        _draw_regions(axes, answer)
        title = f"at {answer.found.temperature_K:g} K, liquid"
        _label(figure, axes, answer.components, title, answer.method, answer.confidence)
        return picture_file(figure, file_format)


def residue_picture(answer: ResidueMapAnswer, file_format: Format) -> bytes:
    """Residue curves, boundaries, nodes and saddles in a triangle.

    Parameters
    ----------
    answer : ResidueMapAnswer
    file_format : {"svg", "png"}

    Returns
    -------
    bytes
        The file.
    """
    with drawing:
        figure, axes = _triangle(answer.components)
        _draw_map(axes, answer)
        title = f"residue curves at {answer.found.pressure_kPa:g} kPa"
        _label(figure, axes, answer.components, title, answer.method, answer.confidence)
        return picture_file(figure, file_format)


def place(mole_fractions: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Where compositions of shape (..., 3) lie: 1 at the lower left, 2 lower right, 3 on top."""
    x = np.asarray(mole_fractions)
    return x[..., 1] + 0.5 * x[..., 2], _HEIGHT * x[..., 2]


def _triangle(components: Sequence[Molecule]) -> tuple[Figure, Axes]:
    figure = Figure(figsize=(7.4, 7.6), layout="constrained")
    axes = figure.add_subplot()
    corners = np.vstack([np.eye(3), [1.0, 0.0, 0.0]])
    axes.plot(*place(corners), "-", color=_EDGE, lw=1.3, zorder=3)
    for step in np.arange(0.1, 0.95, 0.1):
        for k in range(3):
            ends = np.zeros((2, 3))
            ends[:, k] = step
            ends[0, (k + 1) % 3] = ends[1, (k + 2) % 3] = 1.0 - step
            axes.plot(*place(ends), "-", color=_GRID, lw=0.6, zorder=1)
        _tick(axes, step)
    names = [molecule.name or molecule.canonical_smiles for molecule in components]
    for k, (x, y, side) in enumerate(((-0.02, -0.07, "left"), (1.02, -0.07, "right"))):
        axes.text(x, y, f"{names[k]} ({k + 1})", ha=side, va="top", parse_math=False)
    axes.text(0.5, _HEIGHT + 0.055, f"{names[2]} (3)", ha="center", va="bottom", parse_math=False)
    axes.set_aspect("equal")
    axes.set_axis_off()
    axes.set_xlim(-0.1, 1.1)
    axes.set_ylim(-0.13, _HEIGHT + 0.1)
    return figure, axes


def _tick(axes: Axes, step: float) -> None:
    """One mark an edge: x2 along the bottom, x3 up the right, x1 down the left."""
    style: dict[str, Any] = {"fontsize": 7, "color": "#555555"}
    bottom, right, left = (
        np.array([1.0 - step, step, 0.0]),
        np.array([0.0, 1.0 - step, step]),
        np.array([step, 0.0, 1.0 - step]),
    )
    x, y = place(bottom)
    axes.text(float(x), float(y) - 0.015, f"$x_2$={step:.1f}", ha="center", va="top", **style)
    x, y = place(right)
    axes.text(float(x) + 0.012, float(y), f"$x_3$={step:.1f}", ha="left", va="center", **style)
    x, y = place(left)
    axes.text(float(x) - 0.012, float(y), f"$x_1$={step:.1f}", ha="right", va="center", **style)


def _draw_regions(axes: Axes, answer: TernaryDiagramAnswer) -> None:
    for number, region in enumerate(answer.found.regions):
        first = number == 0
        axes.plot(
            *place(binodal_line(region)),
            "-",
            color=_BINODAL,
            lw=2.0,
            zorder=4,
            label="Binodal" if first else None,
        )
        for k, ends in enumerate(tie_lines_shown(region, answer.every)):
            label = "Tie lines: two liquids in equilibrium" if first and k == 0 else None
            axes.plot(*place(np.array(ends)), "--", color=_TIE, lw=0.9, zorder=2, label=label)
        for k, point in enumerate(region.plait_points):
            label = "Plait point" if first and k == 0 else None
            _mark(axes, point, "D", "white", label)
    for k, corners in enumerate(answer.found.triangles):
        axes.fill(
            *place(corners),
            facecolor="none",
            edgecolor=_THREE,
            hatch="xxx",
            lw=1.2,
            zorder=2,
            label=None if k else "Three liquids",
        )
    if not answer.found.regions:
        axes.text(0.5, 0.3, "One liquid everywhere", ha="center", fontsize=12)


def _draw_map(axes: Axes, answer: ResidueMapAnswer) -> None:
    for k, curve in enumerate(answer.found.curves):
        label = None if k else "Residue curves, towards higher temperature"
        axes.plot(*place(curve.mole_fractions), "-", color=_CURVE, lw=1.1, zorder=2, label=label)
        _arrow(axes, curve.mole_fractions)
    for k, curve in enumerate(answer.found.boundaries):
        label = None if k else "Distillation boundaries"
        axes.plot(
            *place(curve.mole_fractions), "--", color=_BOUNDARY, lw=2.2, zorder=3, label=label
        )
    told: set[str] = set()
    for point in answer.found.fixed_points:
        kind = point.stability
        mark, fill = _MARKS[kind]
        _mark(axes, point.mole_fractions, mark, fill, None if kind in told else _NAMES[kind])
        told.add(kind)
        _temperature(axes, point.mole_fractions, point.temperature_K)


def _temperature(axes: Axes, x: FloatArray, temperature_K: float) -> None:
    across, up = (float(value) for value in place(x))
    axes.annotate(
        f"{temperature_K:.1f} K",
        (across, up),
        xytext=(7, 7),
        textcoords="offset points",
        fontsize=8,
        zorder=6,
        bbox={"boxstyle": "round,pad=0.15", "fc": "white", "ec": "none", "alpha": 0.8},
    )


def _mark(axes: Axes, x: FloatArray, mark: str, fill: str, label: str | None) -> None:
    across, up = place(x)
    axes.plot(
        [float(across)],
        [float(up)],
        mark,
        color="black",
        mfc=fill,
        ms=8,
        mew=1.6,
        ls="none",
        zorder=5,
        label=label,
    )


def _arrow(axes: Axes, path: FloatArray) -> None:
    """A head at the middle of a path, pointing the way of rising temperature."""
    if len(path) < 4:
        return
    across, up = place(path)
    k = len(path) // 2
    axes.annotate(
        "",
        (float(across[k + 1]), float(up[k + 1])),
        xytext=(float(across[k]), float(up[k])),
        arrowprops={"arrowstyle": "-|>", "color": _CURVE, "lw": 1.1},
        zorder=2,
    )


def _label(
    figure: Figure,
    axes: Axes,
    components: Sequence[Molecule],
    what: str,
    method: str,
    confidence: Confidence,
) -> None:
    names = " + ".join(molecule.name or molecule.canonical_smiles for molecule in components)
    head = "\n".join(textwrap.wrap(f"{names}, {what}", 80))
    figure.suptitle(
        f"{head}\npredicted with {method}; confidence: {confidence.grade}",
        fontsize=11,
        x=0.02,
        ha="left",
        parse_math=False,
    )
    if axes.get_legend_handles_labels()[0]:
        axes.legend(fontsize=8, loc="upper left", bbox_to_anchor=(-0.02, 1.0), framealpha=0.95)
    doubts = [reason for reason in confidence.reasons if reason.cap != "high"][:2]
    lines = ["A prediction, not data; not for relief sizing, safety-critical or final design."]
    lines += [f"At most {reason.cap}: {reason.message}" for reason in doubts]
    note = "\n".join(piece for line in lines for piece in textwrap.wrap(line, 112))
    figure.supxlabel(note, fontsize=7.5, x=0.02, ha="left", parse_math=False)
