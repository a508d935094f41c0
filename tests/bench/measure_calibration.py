"""Measure the weights of `auto` and its intervals by cross-validation on whole groups.

    python -m tests.bench.measure_calibration [--figures FOLDER]

Prints, for folds of whole solvents, whole solutes, and solvents or aqueous solutes: rows answered,
mean absolute error, coverage in all and by group, interval score and median width against those of
the constant width, and the error by grade. With --figures, a reliability diagram and a histogram
of the widths are written as PNG and SVG.
"""

import argparse
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import matplotlib
import numpy as np
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure

from groups.arrays import BoolArray, IntArray
from groups.confidence.calibration.crossval import Held, cross_validate
from groups.confidence.calibration.features import TABLE_FEATURES
from groups.confidence.calibration.open_set import OpenSet, group_folds, read_open_set
from groups.confidence.calibration.training import Training, training
from groups.confidence.calibration.traits import traits
from groups.confidence.confidence import GRADES, grade_of_half_width
from tests.bench.open_data import OPEN_DATA

FOLDS = ("solvent or aqueous solute", "solvent", "solute")


@dataclass(frozen=True, slots=True)
class Prepared:
    """The open set with what the tables make of it; arrays hold the answered rows alone."""

    data: OpenSet
    known: BoolArray  # (rows in data,)
    rows: Training

    def folds(self, by: str, n_folds: int) -> IntArray:
        """Folds of the answered rows."""
        return group_folds(self.data.pairs, by, n_folds)[self.known]

    @property
    def answered(self) -> float:
        """Share of all rows of the file that have a number."""
        return float(self.known.sum()) / self.data.rows_in_file


@cache
def prepared() -> Prepared:
    """Read and predict the open set once."""
    data = read_open_set(OPEN_DATA / "gamma_infinity.csv")
    rows, known, _ = training(data)
    return Prepared(data, known, rows)


@cache
def held(by: str, n_folds: int = 8, n_inner: int = 5) -> Held:
    """Out-of-fold intervals for one kind of fold."""
    ready = prepared()
    inner = ready.folds("solvent or aqueous solute", n_inner)
    return cross_validate(ready.rows, ready.folds(by, n_folds), inner)


def row_groups() -> dict[str, BoolArray]:
    """The groups of rows in which the coverage is asked for."""
    ready = prepared()
    column = dict(zip(TABLE_FEATURES, ready.rows.features.T, strict=True))
    pairs = [pair for pair, known in zip(ready.data.pairs, ready.known, strict=True) if known]
    solvents = [traits(solvent) for _, solvent, _ in pairs]
    return {
        "water as solvent": column["water_is_solvent"] > 0.0,
        "completed parameters": column["weight_completed"] > 0.5,
        "polar aprotic solvent": np.array([v.polar_groups > 0 and v.donors == 0 for v in solvents]),
        "above 373.15 K": np.array([T > 373.15 for _, _, T in pairs]),
    }


def errors_by_grade(result: Held) -> dict[str, tuple[float, float]]:
    """Share of rows and mean absolute error of each grade."""
    grades = np.array([grade_of_half_width(float(h)) for h in result.half_width])
    size = np.abs(result.error)
    return {
        grade: (float(np.mean(grades == grade)), float(size[grades == grade].mean()))
        for grade in GRADES
        if (grades == grade).any()
    }


WIDEST_SHOWN = 2.5
BLUE = "#1f5fa8"


def write_figures(folder: Path) -> None:
    """Reliability diagram and histogram of the widths."""
    folder.mkdir(parents=True, exist_ok=True)
    _save(reliability_figure(held(FOLDS[0])), folder / "reliability")
    _save(width_figure(held(FOLDS[0])), folder / "widths")


def reliability_figure(result: Held) -> Figure:
    """Share of measurements inside against the stated probability."""
    figure = Figure(figsize=(4.5, 4.5), layout="constrained")
    axes = figure.add_subplot()
    axes.plot([0, 1], [0, 1], color="0.5", linewidth=1, linestyle="--", label="as stated")
    share = result.inside.mean(axis=1)
    axes.plot(result.levels, share, "o-", color=BLUE, label="measured, solvents and solutes unseen")
    axes.set(xlabel="Stated probability", ylabel="Share of measurements inside", aspect="equal")
    axes.set(xlim=(0, 1), ylim=(0, 1))
    axes.grid(color="0.88", linewidth=0.6)
    axes.legend(frameon=False, loc="upper left")
    return figure


def width_figure(result: Held) -> Figure:
    """How many measurements have which width."""
    figure = Figure(figsize=(5.5, 3.5), layout="constrained")
    axes = figure.add_subplot()
    shown = np.minimum(result.half_width, WIDEST_SHOWN)
    axes.hist(shown, bins=50, range=(0.0, WIDEST_SHOWN), color=BLUE)
    constant = float(np.median(result.constant_upper - result.constant_lower)) / 2.0
    axes.axvline(
        constant, color="black", linestyle="--", label=f"one width for all, {constant:.2f}"
    )
    middle = float(np.median(result.half_width))
    axes.axvline(middle, color="black", linestyle=":", label=f"median, {middle:.2f}")
    ticks = np.arange(0.0, WIDEST_SHOWN + 0.1, 0.5)
    axes.set_xticks(ticks, [*(f"{tick:.1f}" for tick in ticks[:-1]), f"≥ {WIDEST_SHOWN}"])
    axes.set(xlabel="Half-width of the 90 % interval of ln γ∞", ylabel="Measurements")
    axes.legend(frameon=False)
    return figure


def _save(figure: Figure, path: Path) -> None:
    """PNG and SVG; the same numbers give the same bytes."""
    FigureCanvasAgg(figure)
    figure.savefig(path.with_suffix(".png"), dpi=150)
    with matplotlib.rc_context({"svg.hashsalt": "mixwright"}):
        figure.savefig(path.with_suffix(".svg"), metadata={"Date": None})


def main() -> None:
    """Print the measurements; write the figures if asked."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--figures", type=Path, help="folder for the diagrams")
    folder: Path | None = parser.parse_args().figures
    ready = prepared()
    uncorrected = np.abs(ready.rows.error)
    print(f"weighted tables alone: mean |error| {uncorrected.mean():.4f}")
    print(f"answered {100 * ready.answered:.1f} % of {ready.data.rows_in_file} rows")
    for by in FOLDS:
        result = held(by)
        size = np.abs(result.error)
        print(f"\nwhole groups: {by}")
        print("  coverage by level", np.round(result.inside.mean(axis=1), 3))
        print(f"  mean |error| {size.mean():.4f}, median {np.median(size):.4f}")
        print(
            f"  coverage {result.coverage():.3f}, score ratio {result.score_ratio():.3f}, "
            f"width ratio {result.width_ratio():.3f}"
        )
        for name, rows in row_groups().items():
            print(f"  {name}: coverage {result.coverage(rows):.3f} of {rows.sum()} rows")
        for grade, (share, error) in errors_by_grade(result).items():
            print(f"  {grade}: {100 * share:.0f} % of rows, mean |error| {error:.3f}")
    if folder:
        write_figures(folder)


if __name__ == "__main__":
    main()
