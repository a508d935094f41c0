"""Liquid splits and azeotropes of several tables against handbook values, kind by kind.

    python tests/bench/measure_phase_behaviour.py [--details METHOD]

Prints for each kind and each method the number of cases it can say anything about, the splits or
azeotropes it misses, and its errors; with `--details` every prediction beside the measured value,
its deviation and source. The default method for liquid splits is chosen by the first table. The
handbook values are the files of `tests/reference/equilibrium`, with their sources.
"""

import argparse
import csv
import tomllib
from collections import defaultdict
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from groups.activity import activity_model
from groups.equilibrium import (
    System,
    azeotropes,
    binary_split,
    consolute_points,
    distribution_coefficients,
)
from groups.errors import MixwrightError
from groups.prediction.liquid import liquid
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles

FOLDER = Path(__file__).parents[1] / "reference" / "equilibrium"
METHODS = (
    "auto",
    "unifac",
    "unifac-lle",
    "unifac-dortmund",
    "unifac-lyngby",
    "unifac-nist",
    "unifac-2.0",
    "unifac-dortmund-2.0",
)
ATMOSPHERE_KPA = 101.325
#: Consolute points are looked for between these temperatures.
RANGE_K = (230.0, 480.0)


@dataclass(frozen=True)
class Comparison:
    """One number: predicted (None where the method finds no such state), measured, and error."""

    kind: str
    label: str
    predicted: float | None
    measured: float
    source: str
    relative: bool = False

    @property
    def deviation(self) -> float:
        """ln of the ratio for solubilities and distribution coefficients, else the difference."""
        if self.predicted is None:
            return float("nan")
        if self.relative:
            return float(np.log(self.predicted / self.measured))
        return self.predicted - self.measured


def rows(name: str) -> list[dict[str, str]]:
    """The handbook values of one file."""
    with (FOLDER / f"{name}.csv").open(encoding="utf-8") as file:
        return list(csv.DictReader(file))


def source(name: str) -> str:
    """Where the values of a file come from."""
    record = tomllib.loads((FOLDER / f"{name}.toml").read_text("utf-8"))
    return str(record["source"])


def built(smiles: list[str], method: str) -> System:
    """A mixture by one table, or by the weighted choice; raises where it is out of reach."""
    molecules = [molecule_from_smiles(each) for each in smiles]
    lines = tuple(vapour_pressure(each) for each in molecules)
    if method == "auto":
        return System(liquid(molecules, "auto", "estimate").model, lines)
    counts = [assign(each, method).counts for each in molecules]
    return System(activity_model(counts, method), lines)


def solubilities(method: str) -> Iterator[Comparison]:
    """Solubility of an organic liquid in water and of water in it, as ln of the ratio."""
    for row in rows("mutual_solubilities"):
        try:
            phases = built([row["smiles1"], "O"], method).activity
        except MixwrightError:
            continue
        split = binary_split(phases, float(row["temperature_K"]))
        low, high = (None, None) if split is None else (float(split[0][0]), float(split[1][1]))
        name, said = row["name1"], row["source"]
        measured = float(row["x1_in_water"]), float(row["x_water_in_1"])
        yield Comparison("solubility in water", name, low, measured[0], said, relative=True)
        yield Comparison("solubility of water", name, high, measured[1], said, relative=True)


def consolutes(method: str) -> Iterator[Comparison]:
    """Consolute temperatures in K."""
    for row in rows("consolute_points"):
        try:
            phases = built([row["smiles1"], row["smiles2"]], method).activity
        except MixwrightError:
            continue
        wanted = float(row["temperature_K"])
        points = [
            p.temperature_K for p in consolute_points(phases, *RANGE_K) if p.kind == row["kind"]
        ]
        best = min(points, key=lambda T: abs(T - wanted)) if points else None
        label = f"{row['name1']}/{row['name2']} ({row['kind']})"
        yield Comparison("consolute temperature, K", label, best, wanted, row["source"])


def binary_azeotropes(method: str) -> Iterator[Comparison]:
    """Heterogeneous azeotropes of the handbook: x1 and T."""
    for row in rows("azeotropes"):
        if row["heterogeneous"] != "yes":
            continue
        try:
            system = built([row["smiles1"], row["smiles2"]], method)
        except MixwrightError:
            continue
        found = [a for a in azeotropes(system, pressure_kPa=ATMOSPHERE_KPA) if a.heterogeneous]
        x = float(found[0].mole_fractions[0]) if found else None
        T = found[0].temperature_K if found else None
        label = f"{row['name1']}/{row['name2']}"
        yield Comparison("heteroazeotrope, x1", label, x, float(row["x1"]), row["source"])
        yield Comparison("heteroazeotrope, K", label, T, float(row["temperature_K"]), row["source"])


def ternary_azeotropes(method: str) -> Iterator[Comparison]:
    """Ternary azeotropes: x1, x2 and T."""
    for row in rows("ternary_azeotropes"):
        try:
            system = built([row[f"smiles{k}"] for k in (1, 2, 3)], method)
        except MixwrightError:
            continue
        found = [
            a for a in azeotropes(system, pressure_kPa=ATMOSPHERE_KPA) if len(a.components) == 3
        ]
        label = "/".join(row[f"name{k}"] for k in (1, 2, 3))
        for place in (0, 1):
            x = float(found[0].mole_fractions[place]) if found else None
            measured = float(row[f"x{place + 1}"])
            yield Comparison("ternary azeotrope, x", label, x, measured, row["source"])
        T = found[0].temperature_K if found else None
        yield Comparison(
            "ternary azeotrope, K", label, T, float(row["temperature_K"]), row["source"]
        )


def tie_lines(method: str) -> Iterator[Comparison]:
    """Distribution of the solute along a textbook's tie lines, as ln of the ratio."""
    for row in rows("tie_lines"):
        smiles = [row[f"smiles{k}"] for k in (1, 2, 3)]
        try:
            phases = built(smiles, method).activity
        except MixwrightError:
            continue
        mass = np.array([molecule_from_smiles(each).molar_mass_g_mol for each in smiles])
        layers = []
        for layer in ("water_layer", "other_layer"):
            moles = np.array([float(row[f"{layer}_wt{k}"]) for k in (1, 2, 3)]) / mass
            layers.append(moles / moles.sum())
        feed = 0.5 * (layers[0] + layers[1])
        found = distribution_coefficients(phases, float(row["temperature_K"]), feed)
        value = float(found.coefficient[0, 0])
        if np.isfinite(value):
            water = found.liquids.liquids[0, :2, 1]
            value = value if water[0] > water[1] else 1.0 / value
        measured = float(layers[1][0] / layers[0][0])
        label = f"{row['system']}, {row['water_layer_wt1']} wt%"
        said = row["source"]
        predicted = value if np.isfinite(value) else None
        yield Comparison("distribution, x''/x'", label, predicted, measured, said, relative=True)


KINDS: tuple[Callable[[str], Iterator[Comparison]], ...] = (
    solubilities,
    consolutes,
    binary_azeotropes,
    ternary_azeotropes,
    tie_lines,
)


def main() -> None:
    """Print the tables."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--details", choices=METHODS)
    options = parser.parse_args()
    if options.details:
        details(options.details)
        return
    table: dict[str, dict[str, list[Comparison]]] = defaultdict(dict)
    for method in METHODS:
        for kind in KINDS:
            for each in kind(method):
                table[each.kind].setdefault(method, []).append(each)
    for name, by_method in table.items():
        print(f"\n{name} (mean |deviation|, worst; relative ones as ln of the ratio)")
        for method, found in by_method.items():
            errors = np.abs([each.deviation for each in found if each.predicted is not None])
            missed = len(found) - len(errors)
            if len(errors):
                text = f"mean {errors.mean():7.3f}  worst {errors.max():7.3f}"
            print(f"  {method:22} cases {len(found):3}  missed {missed:2}  {text}")
    for name in ("mutual_solubilities", "consolute_points", "azeotropes", "tie_lines"):
        print(f"\n{name}: {source(name)}")


def details(method: str) -> None:
    """Every number of one method."""
    for kind in KINDS:
        for each in kind(method):
            said = "none found" if each.predicted is None else f"{each.predicted:11.4g}"
            print(
                f"{each.kind:26} {each.label:48.48} {said:>11} {each.measured:10.4g} "
                f"{each.deviation:8.3f}  {each.source}"
            )


if __name__ == "__main__":
    main()
