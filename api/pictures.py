"""Boiling diagrams as pictures: told apart by line and mark, so that they print in black."""

import io
import textwrap
import threading
from dataclasses import dataclass
from typing import Literal

import matplotlib
import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium import Azeotrope, Diagram, SplitRange
from groups.prediction.answers import DiagramAnswer
from groups.structure.molecule import Molecule

# One drawing at a time: matplotlib's font cache is shared and not safe between threads.
drawing = threading.Lock()
matplotlib.rcParams["svg.hashsalt"] = "mixwright"  # the same diagram gives the same bytes

_LIQUID = "#12355b"
_VAPOUR = "#a6401b"
_SPLIT = "#5c5c5c"
_LIQUID_BAND, _VAPOUR_BAND = "#9db8d6", "#eac3b4"  # lightness differs too, for black and white


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
    with drawing:
        figure = Figure(figsize=(7.2, 6.0), layout="constrained")
        axes = figure.add_subplot()
        _draw_bands(axes, answer)
        _draw_curves(axes, answer.diagram)
        _draw_azeotropes(axes, answer.diagram)
        _tell_chance(axes, answer)
        _label(figure, axes, answer)
        return picture_file(figure, file_format)


def picture_file(figure: Figure, file_format: Literal["svg", "png"]) -> bytes:
    """The bytes of a figure, the same each time."""
    target = io.BytesIO()
    metadata = {"Date": None, "Creator": "Mixwright"} if file_format == "svg" else {}
    figure.savefig(target, format=file_format, dpi=150, metadata=metadata)
    return target.getvalue()


def _level(drawn: Diagram) -> FloatArray:
    return drawn.temperature_K if drawn.kind == "Txy" else drawn.pressure_kPa


def _level_of(kind: str, found: Azeotrope | SplitRange) -> float:
    return found.temperature_K if kind == "Txy" else found.pressure_kPa


def _draw_bands(axes: Axes, answer: DiagramAnswer) -> None:
    """Where nine of ten drawn mixtures boil and condense: filled, the vapour edged and dotted."""
    drawn, bands, dew = answer.diagram, answer.bands, answer.dew_band
    if bands is None or dew is None:
        return
    bubble = bands.temperature_K if drawn.kind == "Txy" else bands.pressure_kPa
    for at, band, colour, hatch, name in (
        (drawn.y1, dew, _VAPOUR_BAND, "....", "Vapour, 90 % interval"),
        (drawn.x1, bubble, _LIQUID_BAND, None, "Liquid, 90 % interval"),
    ):
        for k, run in enumerate(_runs(drawn.stable & np.isfinite(at) & np.isfinite(band.lower))):
            axes.fill_between(
                at[run],
                band.lower[run],
                band.upper[run],
                facecolor=colour,
                edgecolor=_VAPOUR if hatch else "none",
                hatch=hatch,
                linewidth=0.0,
                alpha=0.45,
                zorder=1.0,  # behind the curves
                label=None if k else name,
            )


def _runs(usable: BoolArray) -> list[slice]:
    """The stretches of neighbouring points that are usable."""
    edges = np.flatnonzero(np.diff(np.r_[False, usable, False].astype(int)))
    return [slice(*ends) for ends in zip(edges[::2], edges[1::2], strict=True)]


def _tell_chance(axes: Axes, answer: DiagramAnswer) -> None:
    """The probability of an azeotrope, and where it lies, as a line of the legend."""
    chance = answer.azeotrope_chance
    if chance is None:
        return
    text = f"Azeotrope: probability {chance.probability:.2f}"
    if chance.x1 is not None:
        text += f",\n$x_1$ from {chance.x1.lower:.3f} to {chance.x1.upper:.3f}"
    axes.plot([], [], " ", label=text)


def _draw_curves(axes: Axes, drawn: Diagram) -> None:
    branches = stable_branches(drawn.x1, drawn.y1, _level(drawn), drawn.stable)
    for branch in branches:
        axes.plot(branch.x1, branch.level, "-", color=_LIQUID, lw=1.8)
        axes.plot(branch.y1, branch.level, "--", color=_VAPOUR, lw=1.8)
    axes.plot([], [], "-", color=_LIQUID, lw=1.8, label="Liquid (bubble curve)")
    axes.plot([], [], "--", color=_VAPOUR, lw=1.8, label="Vapour (dew curve)")
    for split in drawn.liquid_splits:
        _close_curves(axes, branches, split, _level_of(drawn.kind, split))
    if drawn.liquid_splits:
        _mark_splits(axes, drawn)
    axes.set_xlim(0.0, 1.0)


def stable_branches(
    x1: FloatArray, y1: FloatArray, level: FloatArray, stable: BoolArray
) -> list[_Branch]:
    """The runs of points that converged over a stable liquid."""
    usable = stable & np.isfinite(y1) & np.isfinite(level)
    return [_Branch(x1[run], y1[run], level[run]) for run in _runs(usable)]


def _close_curves(axes: Axes, branches: list[_Branch], split: SplitRange, level: float) -> None:
    """Lead the branches beside a gap from their last grid point to the three-phase line."""
    left = [branch for branch in branches if branch.x1[-1] <= split.x1_lower + 1e-9]
    right = [branch for branch in branches if branch.x1[0] >= split.x1_upper - 1e-9]
    ends = [(left[-1], -1, split.x1_lower)] if left else []
    ends += [(right[0], 0, split.x1_upper)] if right else []
    for branch, k, x_end in ends:
        axes.plot([branch.x1[k], x_end], [branch.level[k], level], "-", color=_LIQUID, lw=1.8)
        axes.plot([branch.y1[k], split.y1], [branch.level[k], level], "--", color=_VAPOUR, lw=1.8)


def _mark_splits(axes: Axes, drawn: Diagram) -> None:
    """A level line where two liquids boil together, and hatching where they stand without vapour.

    Below the boiling line of a Txy diagram, above that of a Pxy diagram, there is liquid only.
    """
    bottom, top = axes.get_ylim()
    room = 0.06 * (top - bottom)
    bottom, top = (bottom - room, top) if drawn.kind == "Txy" else (bottom, top + room)
    edge = bottom if drawn.kind == "Txy" else top
    for k, split in enumerate(drawn.liquid_splits):
        level = _level_of(drawn.kind, split)
        ends = [min(split.x1_lower, split.y1), max(split.x1_upper, split.y1)]
        axes.plot(
            ends,
            [level, level],
            "-.",
            color=_SPLIT,
            lw=1.4,
            label=None if k else "Two liquids boil together",
        )
        axes.fill_between(
            [split.x1_lower, split.x1_upper],
            level,
            edge,
            facecolor="none",
            edgecolor=_SPLIT,
            hatch="///",
            linewidth=0.0,
            alpha=0.5,
            label=None if k else "Two liquids, no single one",
        )
    axes.set_ylim(bottom, top)


def _draw_azeotropes(axes: Axes, drawn: Diagram) -> None:
    unit = "K" if drawn.kind == "Txy" else "kPa"
    for found in drawn.azeotropes:
        x1, level = float(found.mole_fractions[0]), _level_of(drawn.kind, found)
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
    axes.set_ylabel("Temperature / K" if answer.diagram.kind == "Txy" else "Pressure / kPa")
    axes.grid(color="#d8d8d8", lw=0.6)
    axes.set_axisbelow(True)
    named = zip(*axes.get_legend_handles_labels(), strict=True)
    handles, labels = zip(*sorted(named, key=lambda one: "interval" in one[1]), strict=True)
    axes.legend(handles, labels, fontsize=8.5, frameon=True, framealpha=0.92)
    figure.supxlabel(_footnote(answer), fontsize=7.5, x=0.02, ha="left", parse_math=False)


def _name(molecule: Molecule) -> str:
    return molecule.name or molecule.canonical_smiles


def _methods(answer: DiagramAnswer) -> str:
    """The method, or how many tables carry `auto` and which of them most."""
    used = answer.methods_used
    if len(used) < 2:
        return used[0].method if used else answer.method
    return f"{answer.method}: {len(used)} tables, {used[0].method} with {used[0].weight:.0%}"


def _fixed(answer: DiagramAnswer) -> str:
    drawn = answer.diagram
    if drawn.kind == "Txy":
        return f"at {np.nanmax(drawn.pressure_kPa):g} kPa"
    return f"at {np.nanmax(drawn.temperature_K):g} K"


def _footnote(answer: DiagramAnswer) -> str:
    doubts = [reason for reason in answer.confidence.reasons if reason.cap != "high"]
    lines = ["A prediction, not data; not for relief sizing, safety-critical or final design."]
    lines += [f"At most {reason.cap}: {reason.message}" for reason in doubts[:2]]
    if len(doubts) > 2:
        lines.append(f"{len(doubts) - 2} more reasons stand in the answer as JSON.")
    return "\n".join(
        piece for line in lines for piece in textwrap.wrap(line, 118, subsequent_indent="   ")
    )
