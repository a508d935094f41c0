"""Measure what a real vapour, and the equation of state, change on the open vapour-liquid states.

    python -m tests.bench.measure_vapour_choice

One line a set: mean |dP|/P in % (|dP| in kPa for sets with a star, |dT| in K for isobaric sets) and
mean |dy1| of the mixed states, by the weighted choice under an ideal vapour, under the vapour that
`auto` takes (named), and by the equation of state. No activity model is refitted in between, so a
set whose tables were fitted under an ideal vapour may well get worse.
"""

from dataclasses import dataclass

import numpy as np

from groups.errors import PredictionError
from groups.prediction import Component, bubble_point
from groups.prediction.vapours import VapourAsked
from groups.structure.molecule import molecule_from_smiles
from tests.bench.open_data import VleSet, vle

WAYS: tuple[tuple[str, str, VapourAsked], ...] = (
    ("ideal vapour", "auto", "ideal"),
    ("vapour by need", "auto", "auto"),
    ("equation of state", "psrk", "auto"),
)


@dataclass(frozen=True, slots=True)
class Errors:
    """Mean errors of one set in one way; NaN where there is none."""

    condition: float
    y1: float
    kind: str


def errors(measured: VleSet, method: str, vapour: VapourAsked) -> Errors:
    """Bubble points of the mixed states of a set, less what was measured."""
    components = [Component(molecule_from_smiles(smiles)) for smiles in measured.smiles]
    found: list[tuple[float, float]] = []
    kind = "-"
    for k in np.flatnonzero((measured.x1 > 0.0) & (measured.x1 < 1.0)):
        x1 = float(measured.x1[k])
        T, P = float(measured.temperature_K[k]), float(measured.pressure_kPa[k])
        at_T, at_P = (T, None) if measured.isothermal else (None, P)
        try:
            answer = bubble_point(
                components,
                [x1, 1.0 - x1],
                temperature_K=at_T,
                pressure_kPa=at_P,
                method=method,
                vapour=vapour,
            )
        except PredictionError:
            break
        kind = answer.vapour.kind
        off = answer.pressure_kPa - P if measured.isothermal else answer.temperature_K - T
        if measured.isothermal and measured.pressure_uncertainty_kPa is None:
            off *= 100.0 / P
        found.append((abs(off), abs(float(answer.y[0]) - float(measured.y1[k]))))
    condition, y1 = (_mean([pair[place] for pair in found]) for place in (0, 1))
    return Errors(condition, y1, kind)


def _mean(values: list[float]) -> float:
    known = [value for value in values if np.isfinite(value)]
    return float(np.mean(known)) if known else float("nan")


def _shown(value: float, form: str) -> str:
    return "-" if np.isnan(value) else format(value, form)


def main() -> None:
    """Print the table."""
    names = " | ".join(f"{name}: error | dy1" for name, _, _ in WAYS)
    print(f"| set | system | condition | unit | vapour taken | {names} |")
    print("| --- " * (5 + 2 * len(WAYS)) + "|")
    for measured in vle():
        star = measured.pressure_uncertainty_kPa is not None
        unit = "K" if not measured.isothermal else "kPa" if star else "%"
        fixed = (
            f"{measured.temperature_K[0]:.2f} K"
            if measured.isothermal
            else f"{measured.pressure_kPa[0]:.2f} kPa"
        )
        ways = [errors(measured, method, vapour) for _, method, vapour in WAYS]
        cells = " | ".join(f"{_shown(w.condition, '.2f')} | {_shown(w.y1, '.4f')}" for w in ways)
        title = f"{measured.set_id}{'*' if star else ''} | {' / '.join(measured.names)}"
        print(f"| {title} | {fixed} | {unit} | {ways[1].kind} | {cells} |")


if __name__ == "__main__":
    main()
