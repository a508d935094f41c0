"""Measure every method on the open vapour-liquid states.

    python -m tests.bench.measure_vle

Prints, per method: the share of states it reaches, mean |dP|/P and |dP| of the bubble pressure at
the measured T (isothermal sets), mean |dT| of the bubble temperature at the measured P (isobaric
sets) and mean |dy1| where the vapour was analysed; then the same set by set. Pure ends are told
apart: they test vapour pressures, not activity coefficients. Sets with a stated u(P) that is a
large part of P are marked with a star; they count by |dP| alone, not in the mean of |dP|/P. Where
methods reach different sets, compare them set by set: the first table is not like for like.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.errors import PredictionError
from groups.prediction import ALL_METHODS, Component, PhasePointAnswer, bubble_point
from groups.structure.molecule import molecule_from_smiles
from tests.bench.open_data import VleSet, vle


@dataclass(frozen=True, slots=True)
class SetErrors:
    """Prediction less measurement of one set by one method; NaN where there is none."""

    measured: VleSet
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    y1: FloatArray

    @property
    def mixed(self) -> FloatArray:
        """True between the pure ends."""
        return (self.measured.x1 > 0.0) & (self.measured.x1 < 1.0)

    @property
    def reached(self) -> FloatArray:
        """True where the method gives a state."""
        return np.isfinite(self.temperature_K)


def errors_of_set(measured: VleSet, method: str) -> SetErrors:
    """Bubble points at every measured composition, less what was measured.

    Parameters
    ----------
    measured : VleSet
    method : str
        An identifier of `ALL_METHODS`. A table with a gap counts as not reaching the set, even
        though a completed one would stand in.

    Returns
    -------
    SetErrors
    """
    rows = np.full((3, len(measured.x1)), np.nan)
    components = [Component(molecule_from_smiles(smiles)) for smiles in measured.smiles]
    for k, x1 in enumerate(measured.x1):
        fixed = (
            {"temperature_K": float(measured.temperature_K[k])}
            if measured.isothermal
            else {"pressure_kPa": float(measured.pressure_kPa[k])}
        )
        try:
            answer = bubble_point(components, [x1, 1.0 - x1], **fixed, method=method)
        except PredictionError:
            break
        if _by(answer, method):
            rows[:, k] = answer.temperature_K, answer.pressure_kPa, answer.y[0]
    return SetErrors(
        measured,
        rows[0] - measured.temperature_K,
        rows[1] - measured.pressure_kPa,
        rows[2] - measured.y1,
    )


def _by(answer: PhasePointAnswer, method: str) -> bool:
    """Whether the method asked for gave the answer, and no stand-in."""
    return method == "auto" or answer.method == method


Pick = Callable[[SetErrors], FloatArray]


def relative_pressure(one: SetErrors) -> FloatArray:
    """|dP|/P of the mixed states of an isothermal set without a star."""
    if not one.measured.isothermal or one.measured.pressure_uncertainty_kPa is not None:
        return np.empty(0)
    return np.abs(one.pressure_kPa / one.measured.pressure_kPa)[one.mixed]


def starred_pressure_kPa(one: SetErrors) -> FloatArray:
    """|dP| in kPa of the mixed states of a starred set."""
    if one.measured.pressure_uncertainty_kPa is None:
        return np.empty(0)
    return np.abs(one.pressure_kPa)[one.mixed]


def temperature_K(one: SetErrors) -> FloatArray:
    """|dT| of the mixed states of an isobaric set."""
    return np.empty(0) if one.measured.isothermal else np.abs(one.temperature_K)[one.mixed]


def vapour_fraction(one: SetErrors) -> FloatArray:
    """|dy1| of the mixed states whose vapour was analysed."""
    return np.abs(one.y1)[one.mixed]


def mean_of(sets: list[SetErrors], pick: Pick) -> float:
    """Mean over all finite values of all sets, NaN if there is none."""
    values = np.concatenate([pick(one) for one in sets])
    values = values[np.isfinite(values)]
    return float(values.mean()) if values.size else float("nan")


def all_errors() -> dict[str, list[SetErrors]]:
    """The errors of every method on every set, in the order of `ALL_METHODS` and of the file."""
    sets = vle()
    return {method: [errors_of_set(one, method) for one in sets] for method in ALL_METHODS}


def main() -> None:
    """Print the tables."""
    errors = all_errors()
    print_overall(errors)
    print_by_set(errors)
    print_pure_ends(errors["ideal"])


def _shown(value: float, form: str, scale: float = 1.0) -> str:
    return "-" if np.isnan(value) else format(scale * value, form)


def print_overall(errors: dict[str, list[SetErrors]]) -> None:
    """One line a method over all sets."""
    first = next(iter(errors.values()))
    number = sum(len(one.measured.x1) for one in first)
    mixed = sum(int(one.mixed.sum()) for one in first)
    print(f"{number} states, {mixed} of them mixtures, {len(first)} sets")
    print("method | states % | |dP|/P % | |dP| kPa of starred sets | |dT| K | |dy1|")
    for method, sets in errors.items():
        reached = sum(int(one.reached.sum()) for one in sets) / number
        relative = _shown(mean_of(sets, relative_pressure), ".1f", 100.0)
        print(
            f"{method} | {100 * reached:.0f} | {relative}"
            f" | {_shown(mean_of(sets, starred_pressure_kPa), '.2f')}"
            f" | {_shown(mean_of(sets, temperature_K), '.2f')}"
            f" | {_shown(mean_of(sets, vapour_fraction), '.4f')}"
        )


def print_by_set(errors: dict[str, list[SetErrors]]) -> None:
    """One line a set; each method's error in the unit of the line."""
    print("\nset | system | condition | error | " + " | ".join(errors))
    kinds: tuple[tuple[str, Pick, str, float], ...] = (
        ("|dP|/P %", relative_pressure, ".1f", 100.0),
        ("|dP| kPa", starred_pressure_kPa, ".2f", 1.0),
        ("|dT| K", temperature_K, ".2f", 1.0),
        ("|dy1|", vapour_fraction, ".4f", 1.0),
    )
    for index, one in enumerate(errors["ideal"]):
        for unit, pick, form, scale in kinds:
            if not np.isfinite(pick(one)).any():
                continue
            cells = [_shown(mean_of([sets[index]], pick), form, scale) for sets in errors.values()]
            print(f"{_title(one.measured)} | {unit} | " + " | ".join(cells))


def _title(measured: VleSet) -> str:
    star = "" if measured.pressure_uncertainty_kPa is None else "*"
    fixed = (
        f"{measured.temperature_K[0]:.2f} K"
        if measured.isothermal
        else f"{measured.pressure_kPa[0]:.2f} kPa"
    )
    return f"{measured.set_id}{star} | {' / '.join(measured.names)} | {fixed}"


def print_pure_ends(sets: list[SetErrors]) -> None:
    """What the vapour pressures alone are out by, where a pure end was measured."""
    print("\npure ends | component | measured | error")
    for one in sets:
        for k in np.flatnonzero(~one.mixed):
            name = one.measured.names[0 if one.measured.x1[k] == 1.0 else 1]
            measured, error, unit = (
                (one.measured.pressure_kPa[k], one.pressure_kPa[k], "kPa")
                if one.measured.isothermal
                else (one.measured.temperature_K[k], one.temperature_K[k], "K")
            )
            print(
                f"{_title(one.measured).split(' | ')[0]} | {name} | {measured:.2f} {unit}"
                f" | {error:+.2f} {unit}"
            )


if __name__ == "__main__":
    main()
