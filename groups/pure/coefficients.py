"""Published coefficients: which collections hold a compound, and the curves they give.

The coefficients themselves stay in the open `chemicals` package and are read from it at run time.
"""

import csv
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import lru_cache
from importlib.resources import files
from types import ModuleType

import numpy as np

from groups.arrays import FloatArray
from groups.pure.equations import (
    LN_10,
    LN_PA_PER_KPA,
    Antoine,
    Dippr101,
    ExtendedAntoine,
    SaturationEquation,
    Wagner,
)

WATER = "7732-18-5"
Record = Mapping[str, float]


@dataclass(frozen=True, slots=True)
class SourceRecord:
    """One published collection: its form, its citation and its usual scatter in ln P."""

    key: str
    equation: str
    citation: str
    uncertainty_ln: float


@dataclass(frozen=True, slots=True)
class Candidate:
    """One collection's curve for one compound."""

    record: SourceRecord
    curve: SaturationEquation
    coefficients: tuple[tuple[str, float], ...]
    range_K: tuple[float, float]
    critical_temperature_K: float | None = None
    critical_pressure_kPa: float | None = None

    def covered_K(self, span_K: tuple[float, float]) -> float:
        """Length of the part of `span_K` that lies within the range, K."""
        low, high = max(self.range_K[0], span_K[0]), min(self.range_K[1], span_K[1])
        return max(high - low, 0.0)


@lru_cache(maxsize=1)
def source_records() -> tuple[SourceRecord, ...]:
    """The published collections in order of precedence.

    Returns
    -------
    tuple of SourceRecord

    Source
    ------
    groups/pure/tables/published_sources.csv
    """
    text = (files("groups.pure") / "tables" / "published_sources.csv").read_text("utf-8")
    return tuple(
        SourceRecord(row["key"], row["equation"], row["citation"], float(row["uncertainty_ln"]))
        for row in csv.DictReader(text.splitlines())
    )


@lru_cache(maxsize=4096)
def candidates(cas: str) -> tuple[Candidate, ...]:
    """Every published curve of a compound, in order of precedence.

    Parameters
    ----------
    cas : str
        CAS registry number.

    Returns
    -------
    tuple of Candidate
        Empty where no collection holds the compound.
    """
    found = []
    for record in source_records():
        built = _BUILDERS[record.key](cas)
        if built is None:
            continue
        range_K = rising_part(built[0], built[2])
        if range_K is not None:
            found.append(Candidate(record, built[0], built[1], range_K, *built[3:]))
    return tuple(found)


def rising_part(
    curve: SaturationEquation, range_K: tuple[float, float]
) -> tuple[float, float] | None:
    """The part of a stated range, around its middle, in which pressure rises with temperature.

    Parameters
    ----------
    curve : SaturationEquation
    range_K : tuple of float
        As stated by the collection, K.

    Returns
    -------
    tuple of float or None
        K; None where the range is no range or the pressure falls in its middle.
    """
    low, high = range_K
    if not (0.0 < low < high):
        return None
    grid = np.linspace(low, high, 101)
    with np.errstate(all="ignore"):
        sound = (curve.slope(grid) > 0.0) & np.isfinite(curve.ln_kPa(grid))
    if not sound[50]:
        return None
    falls = np.flatnonzero(~sound)
    first = int(falls[falls < 50].max(initial=-1)) + 1
    last = int(falls[falls > 50].min(initial=101)) - 1
    return (float(grid[first]), float(grid[last])) if last > first else None


# --- one builder per collection ---------------------------------------------------------------

Built = tuple[
    SaturationEquation,
    tuple[tuple[str, float], ...],
    tuple[float, float],
    float | None,
    float | None,
]


def _collections() -> ModuleType:
    """The `chemicals` module, imported on first use because it pulls pandas in."""
    import chemicals.vapor_pressure as collections

    return collections


@lru_cache(maxsize=16)
def _rows(name: str) -> tuple[dict[str, int], tuple[str, ...], FloatArray]:
    """Index by CAS, numeric column names and values of one collection."""
    frame = getattr(_collections(), name)
    numeric = frame.select_dtypes("number")
    index = {str(cas): place for place, cas in enumerate(frame.index)}
    return index, tuple(map(str, numeric.columns)), numeric.to_numpy(dtype=np.float64)


def _record(name: str, cas: str) -> dict[str, float] | None:
    index, columns, values = _rows(name)
    place = index.get(cas)
    return None if place is None else dict(zip(columns, values[place].tolist(), strict=True))


def _letters(row: Record, names: str) -> tuple[tuple[str, float], ...]:
    return tuple((n, row[n]) for n in names.split())


def _wagner(
    name: str, exponents: tuple[float, ...], lowest: str, floor: float = 0.0
) -> Callable[[str], Built | None]:
    """`floor` is the lowest reduced temperature taken where a collection states no lower limit."""

    def build(cas: str) -> Built | None:
        row = _record(name, cas)
        if row is None:
            return None
        Tc, Pc = row["Tc"], row["Pc"] / 1000.0
        letters = _letters(row, "A B C D")
        curve = Wagner(tuple(v for _, v in letters), exponents, Tc, Pc)
        return curve, letters, (max(row[lowest], floor * Tc), Tc), Tc, Pc

    return build


def _water(cas: str) -> Built | None:
    if cas != WATER:
        return None
    tables = files("groups.pure") / "tables"
    text = (tables / "water_iapws.csv").read_text("utf-8")
    record = tomllib.loads((tables / "water_iapws.toml").read_text("utf-8"))
    rows = list(csv.DictReader(text.splitlines()))
    terms = tuple(float(r["coefficient"]) for r in rows)
    exponents = tuple(float(r["exponent"]) for r in rows)
    Tc, Pc = record["critical_temperature_K"], record["critical_pressure_kPa"]
    curve = Wagner(terms, exponents, Tc, Pc)
    letters = tuple((f"a{k + 1}", a) for k, a in enumerate(terms))
    return curve, letters, (record["lowest_temperature_K"], Tc), Tc, Pc


def _dippr101(cas: str) -> Built | None:
    row = _record("Psat_data_Perrys2_8", cas)
    if row is None:
        return None
    letters = _letters(row, "C1 C2 C3 C4 C5")
    curve = Dippr101(row["C1"] - LN_PA_PER_KPA, *(v for _, v in letters[1:]))
    return curve, letters, (row["Tmin"], row["Tmax"]), None, None


def _antoine(name: str, ln_base: float) -> Callable[[str], Built | None]:
    def build(cas: str) -> Built | None:
        row = _record(name, cas)
        if row is None:
            return None
        curve = Antoine(row["A"] * ln_base - LN_PA_PER_KPA, row["B"] * ln_base, row["C"])
        return curve, _letters(row, "A B C"), (row["Tmin"], row["Tmax"]), None, None

    return build


def _extended(cas: str) -> Built | None:
    row = _record("Psat_data_AntoineExtended", cas)
    if row is None:
        return None
    letters = _letters(row, "A B C n E F to Tc")
    start = row["to"] + 273.15  # the collection gives it in degrees Celsius
    A, B, C, n, E, F = (row[k] for k in ("A", "B", "C", "n", "E", "F"))
    curve = ExtendedAntoine(A, B, C, n, E, F, start, row["Tc"])
    return curve, letters, (row["Tmin"], row["Tmax"]), row["Tc"], None


_BUILDERS: Mapping[str, Callable[[str], Built | None]] = {
    "iapws": _water,
    "wagner-mcgarry": _wagner("Psat_data_WagnerMcGarry", (1.0, 1.5, 3.0, 6.0), "Tmin"),
    "wagner-poling": _wagner("Psat_data_WagnerPoling", (1.0, 1.5, 2.5, 5.0), "Tmin"),
    "vdi-ppds": _wagner("Psat_data_VDI_PPDS_3", (1.0, 1.5, 2.5, 5.0), "Tm", 0.4),
    "perry-dippr101": _dippr101,
    "antoine-extended": _extended,
    "antoine-poling": _antoine("Psat_data_AntoinePoling", LN_10),
    "landolt-antoine": _antoine("Psat_data_Landolt_Antoine", 1.0),
}


def every_registry_number() -> tuple[str, ...]:
    """CAS numbers of all compounds that any collection holds.

    Returns
    -------
    tuple of str
        Sorted.
    """
    return tuple(sorted({cas for name in _FRAMES for cas in _rows(name)[0]}))


def name_of(cas: str) -> str:
    """The name under which the first collection that holds a compound lists it.

    Parameters
    ----------
    cas : str
        CAS registry number.

    Returns
    -------
    str
        Empty where none holds it.
    """
    for name, column in _FRAMES.items():
        frame = getattr(_collections(), name)
        if cas in _rows(name)[0]:
            return str(frame.at[cas, column]).strip()
    return ""


_FRAMES = {
    "Psat_data_Landolt_Antoine": "Name",
    "Psat_data_Perrys2_8": "Chemical",
    "Psat_data_VDI_PPDS_3": "Chemical",
    "Psat_data_AntoinePoling": "Chemical",
    "Psat_data_AntoineExtended": "Chemical",
    "Psat_data_WagnerPoling": "Name",
    "Psat_data_WagnerMcGarry": "Name",
}
"""Name column of each collection; McGarry's rows come last, since some bear another's name."""
