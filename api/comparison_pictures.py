"""Measured points and models as a picture: the diagram before and after, xy, and residuals.

Everything is told apart by line, mark and hatching, so that it prints in black.
"""

import textwrap
from typing import Literal

import matplotlib
import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from api.pictures import drawing, picture_file
from groups.arrays import FloatArray
from groups.handoff import ComparisonAnswer, Conditioned, UncertainDiagram
from groups.handoff.comparisons import ComparedModel

_LIQUID, _VAPOUR, _GREY = "#12355b", "#a6401b", "#6b6b6b"
_BEFORE, _AFTER = "#d4d4d4", "#9db8d6"
_MARKS = ("o", "s", "^", "D", "v", "P")
_LINES = ("-", "--", "-.", ":")
#: Models in the panel of residuals: more of them cannot be told apart.
_MOST_MODELS = 4
#: What the residuals are of, the first that was measured; with the words beside the axis.
_QUANTITIES = (
    ("temperature", "boiling temperature / K"),
    ("pressure", "boiling pressure / %"),
    ("ln_gamma_infinite", "ln activity coefficient at infinite dilution"),
    ("ln_gamma", "ln activity coefficient"),
    ("x1_poor", "mole fraction x1 of the poor liquid"),
    ("x1_rich", "mole fraction x1 of the rich liquid"),
    ("excess_enthalpy", "excess enthalpy / (J/mol)"),
)


def comparison_picture(
    answer: ComparisonAnswer, conditioned: Conditioned | None, file_format: Literal["svg", "png"]
) -> bytes:
    """A comparison as one picture of up to four panels.

    Parameters
    ----------
    answer : ComparisonAnswer
    conditioned : Conditioned or None
        The diagram before and after; left out where there is none.
    file_format : {"svg", "png"}

    Returns
    -------
    bytes
        The file.
    """
    shown = _shown(answer)
    with drawing, matplotlib.rc_context({"hatch.linewidth": 0.6}):
        rows = 1 if conditioned is None else 2
        figure = Figure(figsize=(11.5, 4.9 * rows), layout="constrained")
        panels = list(figure.subplots(rows, 2, squeeze=False).flat)
        if conditioned is not None:
            _diagram(panels.pop(0), answer, conditioned)
            _xy(panels.pop(0), answer, conditioned)
        _residuals(panels.pop(0), answer, shown, _main_quantity(answer))
        _residuals(panels.pop(0), answer, shown, _second_quantity(answer))
        _titles(figure, answer, conditioned)
        return picture_file(figure, file_format)


def _name(answer: ComparisonAnswer, k: int) -> str:
    molecule = answer.components[k]
    return molecule.name or molecule.canonical_smiles


def _shown(answer: ComparisonAnswer) -> list[ComparedModel]:
    """`auto`, Raoult's law and the best of the others, the best fitted one among them."""
    sound = [m for m in answer.models if np.isfinite(m.weighted_rms)]
    ordered = sorted(sound, key=lambda m: m.weighted_rms)
    first = [m for m in sound if m.name == "auto"]
    first += [m for m in ordered if m.kind == "fitted"][:1]
    first += [m for m in ordered if m.kind == "predicted" and m.name not in ("auto", "ideal")][:1]
    first += [m for m in sound if m.name == "ideal"]
    return first[:_MOST_MODELS]


def _measured(answer: ComparisonAnswer) -> set[str]:
    return {one.quantity for model in answer.models for one in model.points}


def _main_quantity(answer: ComparisonAnswer) -> str | None:
    found = _measured(answer)
    isobaric = answer.measurements.vapour_liquid.condition == "isobaric"
    boiling = ("temperature", "pressure") if isobaric else ("pressure", "temperature")
    ordered = (*boiling, *(name for name, _ in _QUANTITIES[2:]))
    return next((name for name in ordered if name in found), None)


def _second_quantity(answer: ComparisonAnswer) -> str | None:
    found, main = _measured(answer), _main_quantity(answer)
    if "y1" in found:
        return "y1"
    others = [name for name, _ in _QUANTITIES[2:] if name in found and name != main]
    return others[0] if others else None


def _diagram(axes: Axes, answer: ComparisonAnswer, found: Conditioned) -> None:
    """The boiling curve with its interval before and after, and the measured points."""
    for one, colour, hatch, words in (
        (found.before, _BEFORE, "////", "90 % interval before"),
        (found.after, _AFTER, None, "90 % interval with the points"),
    ):
        lower, upper = _level_band(one, found.kind)
        edge = _GREY if hatch else _LIQUID
        axes.fill_between(
            one.diagram.x1,
            lower,
            upper,
            facecolor="none" if hatch else colour,
            edgecolor=edge,
            hatch=hatch,
            linewidth=0.6,
            label=f"Liquid, {words}",
        )
    before, after = found.before.diagram, found.after.diagram
    axes.plot(before.x1, _level(found.before, found.kind), ":", color="black", lw=1.5)
    axes.plot(after.x1, _level(found.after, found.kind), "-", color=_LIQUID, lw=1.8)
    axes.plot(after.y1, _level(found.after, found.kind), "--", color=_VAPOUR, lw=1.6)
    marks = _diagram_points(axes, answer, found)
    axes.set_xlim(0.0, 1.0)
    axes.set_xlabel(f"Mole fraction of {_name(answer, 0)}", parse_math=False)
    axes.set_ylabel("Temperature / K" if found.kind == "Txy" else "Pressure / kPa")
    handles, labels = axes.get_legend_handles_labels()
    extra = [
        (Line2D([], [], ls=":", color="black", lw=1.5), "Liquid, predicted before"),
        (Line2D([], [], ls="-", color=_LIQUID, lw=1.8), "Liquid, with the points"),
        (Line2D([], [], ls="--", color=_VAPOUR, lw=1.6), "Vapour, with the points"),
        *marks,
    ]
    axes.legend(
        [*handles, *(line for line, _ in extra)],
        [*labels, *(text for _, text in extra)],
        fontsize=7.5,
        framealpha=0.92,
    )
    _tidy(axes, "Before and after the points")


def _diagram_points(
    axes: Axes, answer: ComparisonAnswer, found: Conditioned
) -> list[tuple[Line2D, str]]:
    """Measured liquids and vapours at the diagram's condition, and their entries in the legend."""
    if not _fits_condition(answer, found):
        return []
    points = answer.measurements.vapour_liquid
    level = points.temperature_K if found.kind == "Txy" else points.pressure_kPa
    marks = []
    for at, mark, face, words in (
        (points.x1, "o", "black", "liquid"),
        (points.y1, "s", "white", "vapour"),
    ):
        if np.isfinite(at).any():
            [line] = axes.plot(at, level, mark, color="black", mfc=face, ms=6, mew=1.4, zorder=5)
            marks.append((line, f"Measured {words}"))
    return marks


def _level(one: UncertainDiagram, kind: str) -> FloatArray:
    return one.diagram.temperature_K if kind == "Txy" else one.diagram.pressure_kPa


def _level_band(one: UncertainDiagram, kind: str) -> tuple[FloatArray, FloatArray]:
    band = one.bands.temperature_K if kind == "Txy" else one.bands.pressure_kPa
    return band.lower, band.upper


def _fits_condition(answer: ComparisonAnswer, found: Conditioned) -> bool:
    """Whether the points were measured at the diagram's pressure or temperature, within 1 %."""
    points = answer.measurements.vapour_liquid
    if not len(points.number):
        return False
    if found.kind == "Txy":
        fixed = float(np.nanmedian(found.before.diagram.pressure_kPa))
        return bool(np.abs(points.pressure_kPa / fixed - 1.0).max() < 0.01)
    fixed = float(np.nanmedian(found.before.diagram.temperature_K))
    return bool(np.abs(points.temperature_K - fixed).max() < 1.0)


def _xy(axes: Axes, answer: ComparisonAnswer, found: Conditioned) -> None:
    for one, colour, hatch, words in (
        (found.before, _BEFORE, "////", "90 % interval before"),
        (found.after, _AFTER, None, "90 % interval with the points"),
    ):
        band = one.bands.vapour
        axes.fill_between(
            one.diagram.x1,
            band.lower[:, 0],
            band.upper[:, 0],
            facecolor="none" if hatch else colour,
            edgecolor=_GREY if hatch else _LIQUID,
            hatch=hatch,
            linewidth=0.6,
            label=words,
        )
    axes.plot(found.before.diagram.x1, found.before.diagram.y1, ":", color="black", label="before")
    axes.plot(
        found.after.diagram.x1,
        found.after.diagram.y1,
        "-",
        color=_LIQUID,
        lw=1.8,
        label="with the points",
    )
    axes.plot([0.0, 1.0], [0.0, 1.0], "-", color=_GREY, lw=0.8)
    points = answer.measurements.vapour_liquid
    if _fits_condition(answer, found) and np.isfinite(points.y1).any():
        axes.plot(points.x1, points.y1, "o", color="black", ms=6, label="measured", zorder=5)
    axes.set_xlim(0.0, 1.0)
    axes.set_ylim(0.0, 1.0)
    axes.set_xlabel(f"{_name(answer, 0)} in the liquid, mole fraction", parse_math=False)
    axes.set_ylabel(f"{_name(answer, 0)} in the vapour, mole fraction", parse_math=False)
    axes.legend(fontsize=7.5, framealpha=0.92, loc="upper left")
    _tidy(axes, "Vapour over liquid")


def _residuals(
    axes: Axes, answer: ComparisonAnswer, shown: list[ComparedModel], quantity: str | None
) -> None:
    """Calculated less measured of one quantity, over composition, for the models shown."""
    if quantity is None:
        axes.set_axis_off()
        return
    words = "vapour mole fraction y1" if quantity == "y1" else dict(_QUANTITIES)[quantity]
    for k, model in enumerate(shown):
        rows = sorted((p for p in model.points if p.quantity == quantity), key=lambda p: p.x1)
        if not rows:
            continue
        off = np.array([p.calculated - p.measured for p in rows])
        if quantity == "pressure":
            off = 100.0 * off / np.array([p.measured for p in rows])
        axes.plot(
            [p.x1 for p in rows],
            off,
            marker=_MARKS[k],
            ls=_LINES[k],
            lw=1.0,
            color=("black", _LIQUID, _VAPOUR, _GREY)[k],
            mfc="white" if k % 2 else None,
            ms=6,
            label=f"{model.name}{' (fitted)' if model.kind == 'fitted' else ''}",
        )
    axes.axhline(0.0, color="black", lw=0.8)
    axes.set_xlim(-0.02, 1.02)
    axes.set_xlabel(f"Mole fraction of {_name(answer, 0)}", parse_math=False)
    axes.set_ylabel(f"Calculated less measured:\n{words}")
    axes.legend(fontsize=7.5, framealpha=0.92)
    _tidy(axes, "Residuals by composition")


def _tidy(axes: Axes, title: str) -> None:
    axes.set_title(title, fontsize=10, loc="left")
    axes.grid(color="#d8d8d8", lw=0.6)
    axes.set_axisbelow(True)


def _titles(figure: Figure, answer: ComparisonAnswer, found: Conditioned | None) -> None:
    at = ""
    if found is not None and found.kind == "Txy":
        at = f" at {np.nanmedian(found.before.diagram.pressure_kPa):.5g} kPa"
    elif found is not None:
        at = f" at {np.nanmedian(found.before.diagram.temperature_K):.5g} K"
    count = answer.measurements.n_points
    figure.suptitle(
        f"{_name(answer, 0)} (1) + {_name(answer, 1)} (2){at}: "
        f"{count} measured point{'s' if count > 1 else ''}",
        fontsize=12,
        x=0.02,
        ha="left",
        parse_math=False,
    )
    text = f"{answer.recommendation.text} {answer.consistency.verdict}"
    foot = "\n".join(textwrap.wrap(text, 170)[:4])
    figure.supxlabel(foot, fontsize=7.5, x=0.02, ha="left", parse_math=False)
