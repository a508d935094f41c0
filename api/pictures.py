"""Boiling diagrams as pictures: told apart by line and mark, so that they print in black."""

import io
import textwrap
import threading
from dataclasses import dataclass
from typing import Literal

import matplotlib
import numpy as np
from matplotlib.axes import Axes
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.figure import Figure

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium import Azeotrope
from groups.prediction.answers import DiagramAnswer
from groups.structure.molecule import Molecule

# One drawing at a time: matplotlib's font cache is shared and not safe between threads.
_drawing = threading.Lock()
matplotlib.rcParams["svg.hashsalt"] = "mixwright"  # the same diagram gives the same bytes

_LIQUID = "#12355b"
_VAPOUR = "#a6401b"
_SPLIT = "#5c5c5c"


@dataclass(frozen=True, slots=True)
class _Branch:
    """One stretch of stable liquid with its vapour; `level` is T or P."""

    x1: FloatArray
    y1: FloatArray
    level: FloatArray


def diagram_picture(answer: DiagramAnswer, file_format: Literal["svg", "png"]) -> bytes:
    """A diagram as a picture.

    Parameters
    ----------
    answer : DiagramAnswer
    file_format : {"svg", "png"}

    Returns
    -------
    bytes
        The file. Where the liquid splits, the homogeneous curve is left out and the gap is marked.
    """
    with _drawing:
        figure = Figure(figsize=(7.2, 6.0), layout="constrained")
        axes = figure.add_subplot()
        _draw_curves(axes, answer)
        _draw_azeotropes(axes, answer)
        _label(figure, axes, answer)
        return _file(figure, file_format)


def _file(figure: Figure, file_format: Literal["svg", "png"]) -> bytes:
    target = io.BytesIO()
    if file_format == "svg":
        FigureCanvasSVG(figure).print_svg(target, metadata={"Date": None, "Creator": "Mixwright"})
    else:
        FigureCanvasAgg(figure)
        figure.savefig(target, format="png", dpi=150, metadata={"Software": "Mixwright"})
    return target.getvalue()


def _level(answer: DiagramAnswer) -> FloatArray:
    return answer.temperature_K if answer.kind == "Txy" else answer.pressure_kPa


def _draw_curves(axes: Axes, answer: DiagramAnswer) -> None:
    branches = stable_branches(answer.x1, answer.y1, _level(answer), answer.stable)
    for k, branch in enumerate(branches):
        first = k == 0
        liquid, vapour = ("Liquid (bubble curve)", "Vapour (dew curve)") if first else ("", "")
        axes.plot(branch.x1, branch.level, "-", color=_LIQUID, lw=1.8, label=liquid or None)
        axes.plot(branch.y1, branch.level, "--", color=_VAPOUR, lw=1.8, label=vapour or None)
    if answer.liquid_split is not None:
        _draw_split(axes, answer, branches)
    axes.set_xlim(0.0, 1.0)


def stable_branches(
    x1: FloatArray, y1: FloatArray, level: FloatArray, stable: BoolArray
) -> list[_Branch]:
    """The runs of points that converged over a stable liquid."""
    usable = stable & np.isfinite(y1) & np.isfinite(level)
    edges = np.flatnonzero(np.diff(np.r_[False, usable, False].astype(int)))
    return [
        _Branch(x1[start:stop], y1[start:stop], level[start:stop])
        for start, stop in zip(edges[::2], edges[1::2], strict=True)
    ]


def _draw_split(axes: Axes, answer: DiagramAnswer, branches: list[_Branch]) -> None:
    """The two liquids in equilibrium with one vapour: a level line, and the gap hatched."""
    assert answer.liquid_split is not None
    lower, upper = sorted(answer.liquid_split)
    meeting = _three_phase(answer)
    if meeting is None:
        return
    y_meeting, level = meeting
    _close_curves(axes, branches, (lower, upper), y_meeting, level)
    ends = [min(lower, y_meeting), max(upper, y_meeting)]
    axes.plot(ends, [level, level], "-.", color=_SPLIT, lw=1.4, label="Two liquids and vapour")
    bottom, top = axes.get_ylim()
    # Below the boiling line in Txy, above it in Pxy, there is liquid only.
    edge = bottom if answer.kind == "Txy" else top
    axes.fill_between(
        [lower, upper],
        level,
        edge,
        facecolor="none",
        edgecolor=_SPLIT,
        hatch="////",
        linewidth=0.0,
        alpha=0.55,
        label="Two liquids: no single liquid exists here",
    )
    axes.set_ylim(bottom, top)


def _three_phase(answer: DiagramAnswer) -> tuple[float, float] | None:
    """Vapour and level where two liquids boil: constant across the gap."""
    level = _level(answer)
    inside = np.flatnonzero(~answer.stable & np.isfinite(level) & np.isfinite(answer.y1))
    if inside.size:
        return float(answer.y1[inside[0]]), float(level[inside[0]])
    for found in answer.azeotropes:  # a gap narrower than the grid
        if not found.stable_liquid:
            return float(found.mole_fractions[0]), _azeotrope_level(answer, found)
    return None


def _close_curves(
    axes: Axes,
    branches: list[_Branch],
    split: tuple[float, float],
    y_meeting: float,
    level: float,
) -> None:
    """Lead each branch from its last stable point to the end of the gap."""
    for branch in branches:
        at_left = branch.x1[-1] <= split[0] + 1e-9
        k, x_end = (-1, split[0]) if at_left else (0, split[1])
        axes.plot([branch.x1[k], x_end], [branch.level[k], level], "-", color=_LIQUID, lw=1.8)
        axes.plot([branch.y1[k], y_meeting], [branch.level[k], level], "--", color=_VAPOUR, lw=1.8)


def _azeotrope_level(answer: DiagramAnswer, found: Azeotrope) -> float:
    return found.temperature_K if answer.kind == "Txy" else found.pressure_kPa


def _draw_azeotropes(axes: Axes, answer: DiagramAnswer) -> None:
    unit = "K" if answer.kind == "Txy" else "kPa"
    for found in answer.azeotropes:
        x1, level = float(found.mole_fractions[0]), _azeotrope_level(answer, found)
        mark = "D" if found.stable_liquid else "s"
        name = "Azeotrope" if found.stable_liquid else "Heterogeneous azeotrope"
        axes.plot(
            x1,
            level,
            mark,
            color="black",
            mfc="white",
            ms=8,
            mew=1.6,
            ls="none",
            label=f"{name}: $x_1$ = {x1:.3f}, {level:.1f} {unit}",
            zorder=5,
        )


def _label(figure: Figure, axes: Axes, answer: DiagramAnswer) -> None:
    first, second = (_name(molecule) for molecule in answer.components)
    fixed = _fixed(answer)
    axes.set_title(
        f"{first} (1) + {second} (2) {fixed}\n"
        f"predicted with {_methods(answer)}; confidence: {answer.confidence.grade}",
        fontsize=11,
        loc="left",
        parse_math=False,
    )
    axes.set_xlabel(f"Mole fraction of {first}, liquid or vapour", parse_math=False)
    axes.set_ylabel("Temperature / K" if answer.kind == "Txy" else "Pressure / kPa")
    axes.grid(color="#d8d8d8", lw=0.6)
    axes.set_axisbelow(True)
    axes.legend(fontsize=8.5, frameon=True, framealpha=0.92)
    figure.supxlabel(_footnote(answer), fontsize=7.5, x=0.02, ha="left", parse_math=False)


def _name(molecule: Molecule) -> str:
    return molecule.name or molecule.canonical_smiles


def _methods(answer: DiagramAnswer) -> str:
    used = [use.method for use in answer.methods_used]
    return " and ".join(used) or answer.method


def _fixed(answer: DiagramAnswer) -> str:
    if answer.kind == "Txy":
        return f"at {float(answer.pressure_kPa[0]):g} kPa"
    return f"at {float(answer.temperature_K[0]):g} K"


def _footnote(answer: DiagramAnswer) -> str:
    doubts = [reason.message for reason in answer.confidence.reasons if reason.cap != "high"]
    lines = ["A prediction, not data; not for relief sizing, safety-critical or final design."]
    lines += [f"Doubt: {message}" for message in doubts[:2]]
    if len(doubts) > 2:
        lines.append(f"{len(doubts) - 2} more reasons stand in the answer as JSON.")
    return "\n".join(
        piece for line in lines for piece in textwrap.wrap(line, 118, subsequent_indent="   ")
    )
