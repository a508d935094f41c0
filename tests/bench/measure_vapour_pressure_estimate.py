"""Measure the errors of the pure-component estimates against published data.

    python tests/bench/measure_vapour_pressure_estimate.py

Reference boiling points: the CRC Handbook where the NIST WebBook or CAS Common Chemistry agrees
within 1.5 K. Reference curves: the published collections but for the largest and least checked one
(Landolt-Bornstein), where the audit holds nothing against them. All are read out of the open
`chemicals` package. The estimates see the structure only. No number here is fitted to the result,
but for the stated uncertainties, whose coverage is printed.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np
from chemicals import identifiers
from chemicals import phase_change as handbooks

from groups.arrays import FloatArray
from groups.errors import StructureError
from groups.pure.boiling import METHODS, estimated_boiling
from groups.pure.coefficients import candidates, every_registry_number
from groups.pure.constants import PureConstants, constants, published_constant
from groups.pure.corresponding_states import (
    ATMOSPHERE_KPA,
    Anchor,
    ambrose_walton,
    lee_kesler,
    riedel,
)
from groups.pure.critical import estimated_critical, joback_critical
from groups.pure.estimate import corresponding_states_curve, estimated_vapour_pressure
from groups.pure.published import slips_of
from groups.pure.saturation import VapourPressure
from groups.structure.molecule import Molecule, molecule_from_smiles

REDUCED = np.array([0.7, 0.8, 0.9, 0.95, 1.0, 1.1])  # of the boiling point
LOWEST_KPA = 0.5  # below it the references themselves scatter


@dataclass(frozen=True, slots=True)
class Known:
    """One molecule with a trustworthy boiling point and perhaps a trustworthy curve."""

    cas: str
    molecule: Molecule
    boiling_K: float
    curve: VapourPressure | None
    published: bool  # in any collection of vapour pressures


def organic_molecule(cas: str) -> Molecule | None:
    """The molecule of a CAS number, where the project takes it and it holds carbon."""
    try:
        molecule = molecule_from_smiles(identifiers.search_chemical(cas).smiles)
    except (StructureError, ValueError):
        return None
    has_carbon = any(atom.GetSymbol() == "C" for atom in molecule.mol.GetAtoms())
    return replace(molecule, cas=cas) if has_carbon and molecule.mol.GetNumAtoms() > 1 else None


def reference_curve(cas: str) -> VapourPressure | None:
    """The first evaluated curve without a finding of the audit, if it spans the boiling point."""
    for c in candidates(cas):
        if c.record.key == "landolt-antoine" or c.record.key in slips_of(cas):
            continue
        curve = VapourPressure("published", "", "", (), c.range_K, c.curve, 0.01)
        if not curve.extrapolated(curve.boiling_temperature(ATMOSPHERE_KPA)):
            return curve
    return None


def known_molecules() -> Iterator[Known]:
    """Every molecule whose boiling point two handbooks agree on, in the handbook's order."""
    with_curve = set(every_registry_number())
    for cas in handbooks.Tb_sources["CRC_ORG"].index:
        T = handbooks.Tb(cas, method="CRC_ORG")
        others = (handbooks.Tb(cas, method=m) for m in ("WEBBOOK", "COMMON_CHEMISTRY"))
        if T is None or not any(o is not None and abs(o - T) <= 1.5 for o in others):
            continue
        molecule = organic_molecule(cas)
        if molecule is not None:
            yield Known(cas, molecule, T, reference_curve(cas), cas in with_curve)


def line(name: str, errors: Sequence[float] | FloatArray, unit: str) -> None:
    """Print number, median, mean and 90 % quantile of absolute errors."""
    e = np.abs(np.asarray(errors, dtype=np.float64))
    e = e[np.isfinite(e)]
    median, wide = np.quantile(e, [0.5, 0.9])
    print(f"  {name:<44}{e.size:>6}{median:>10.3g}{e.mean():>9.3g}{wide:>9.3g} {unit}")


def heading(text: str) -> None:
    """Print a table's heading."""
    print(f"\n{text}\n  {'':<44}{'n':>6}{'median':>10}{'mean':>9}{'90 %':>9}")


def boiling_points(known: Sequence[Known]) -> None:
    """Errors of every candidate for the boiling point, and of the choice."""
    answers = [estimated_boiling(k.molecule.mol) for k in known]
    for name, method in METHODS.items():
        found = [(method(k.molecule.mol), k.boiling_K) for k in known]
        line(f"{name}", [T - true for T, true in found if T is not None], "K")
    pairs = [(a, k.boiling_K) for a, k in zip(answers, known, strict=True) if a is not None]
    line("the choice: median of the three", [a.value_K - true for a, true in pairs], "K")
    within = np.mean([abs(a.value_K - true) < a.uncertainty_K for a, true in pairs])
    wide = np.mean([abs(a.value_K - true) < 1.645 * a.uncertainty_K for a, true in pairs])
    print(f"  within one stated standard deviation {within:.0%}, within 1.645 of them {wide:.0%}")


def critical_points(known: Sequence[Known]) -> None:
    """Relative errors of both critical points with the true boiling point."""
    joback, fallback = [], []
    for k in known:
        Tc, Pc = published_constant(k.cas, "Tc"), published_constant(k.cas, "Pc")
        estimate = estimated_critical(k.molecule.mol, k.boiling_K)
        if Tc is not None and Pc is not None and estimate is not None:
            miss_T = 100.0 * (estimate.temperature_K.value / Tc.value - 1.0)
            miss_P = 100.0 * (estimate.pressure_kPa.value / Pc.value - 1.0)
            chosen = joback if "Joback" in estimate.temperature_K.source else fallback
            chosen.append((miss_T, miss_P))
    for name, errors in (("Joback-Reid", joback), ("Wilson-Jasperson where it fails", fallback)):
        line(f"Tc, {name}", [e[0] for e in errors], "%")
        line(f"Pc, {name}", [e[1] for e in errors], "%")


def shape_errors(known: Sequence[Known], *, published: bool) -> None:
    """Errors of ln P with the true boiling point, by equation."""
    errors: dict[str, list[FloatArray]] = {}
    for k in known:
        assert k.curve is not None
        Tb = k.curve.boiling_temperature(ATMOSPHERE_KPA)
        point = critical_point(k, Tb, published=published)
        if point is None or point[0] <= 1.05 * Tb:
            continue
        anchor = Anchor(Tb, *point)
        equations = {
            "Lee-Kesler": lee_kesler(anchor),
            "Riedel": riedel(anchor),
            "Ambrose-Walton": ambrose_walton(anchor),
            "the choice (Vetere for alcohols)": corresponding_states_curve(
                k.molecule.mol, anchor
            ).curve,
        }
        T, true = reference_points(k.curve, Tb)
        for name, equation in equations.items():
            errors.setdefault(name, []).append(equation.ln_kPa(T) - true)
    for name, rows in errors.items():
        by_temperature(name, np.array(rows))


def critical_point(k: Known, Tb: float, *, published: bool) -> tuple[float, float] | None:
    """Critical temperature and pressure, published or by Joback."""
    if published:
        Tc, Pc = published_constant(k.cas, "Tc"), published_constant(k.cas, "Pc")
        return None if Tc is None or Pc is None else (Tc.value, Pc.value)
    estimate = joback_critical(k.molecule.mol, Tb)
    return None if estimate is None else (estimate.temperature_K.value, estimate.pressure_kPa.value)


def reference_points(curve: VapourPressure, Tb: float) -> tuple[FloatArray, FloatArray]:
    """Temperatures, and the true ln P there: NaN where out of range or too low to be known."""
    T = REDUCED * Tb
    ln_P = curve.ln_kPa(T)
    return T, np.where(curve.extrapolated(T) | (ln_P < np.log(LOWEST_KPA)), np.nan, ln_P)


def by_temperature(name: str, rows: FloatArray) -> None:
    """Print median and 90 % quantile of |error of ln P| at each reduced temperature."""
    median, wide = (np.nanquantile(np.abs(rows), q, axis=0) for q in (0.5, 0.9))
    cells = "  ".join(f"{m:.3f}/{w:.3f}" for m, w in zip(median, wide, strict=True))
    pooled = np.nanquantile(np.abs(rows[:, REDUCED <= 0.9]), 0.683)
    print(f"  {name:<42}{len(rows):>5}  {cells}  68 % to 0.9: {pooled:.3f}")


def whole_estimate(
    known: Sequence[Known], name: str, taken: Callable[[Molecule], PureConstants]
) -> None:
    """Errors of ln P of the whole estimate, and how often the stated uncertainty covers them."""
    rows, scaled = [], []
    for k in known:
        assert k.curve is not None
        estimate = estimated_vapour_pressure(k.molecule.mol, taken(k.molecule))
        if estimate is None:
            continue
        T, true = reference_points(k.curve, k.curve.boiling_temperature(ATMOSPHERE_KPA))
        rows.append(estimate.ln_kPa(T) - true)
        scaled.append(rows[-1] / estimate.uncertainty(T))
    by_temperature(name, np.array(rows))
    z = np.abs(np.array(scaled))
    z = z[np.isfinite(z)]
    print(f"  within one stated standard deviation {np.mean(z < 1):.0%}, ", end="")
    print(f"within 1.645 of them {np.mean(z < 1.645):.0%}")


def unpublished(molecule: Molecule) -> PureConstants:
    """Constants as they are for a molecule that no compilation holds."""
    return constants(replace(molecule, cas="0-00-0"))


def continuation(known: Sequence[Known]) -> None:
    """Error of a curve cut to 10 to 200 kPa and continued straight, relative to its length."""
    for name, pressures in (
        ("down to 1 kPa", (1.0, 2.0, 5.0)),
        ("up to 1500 kPa", (400.0, 1500.0)),
    ):
        errors: list[float] = []
        for k in known:
            assert k.curve is not None
            low, high = k.curve.inverse([10.0, 200.0])
            T = k.curve.inverse(pressures)
            T = T[~k.curve.extrapolated(T)]
            if not k.curve.extrapolated([low, high]).any():
                cut = replace(k.curve, range_K=(float(low), float(high)))
                length = cut.ln_kPa(T) - cut.ln_kPa(np.clip(T, low, high))
                errors.extend(((cut.ln_kPa(T) - k.curve.ln_kPa(T)) / length).tolist())
        line(name, errors, "")


def main() -> None:
    """Print every table."""
    known = list(known_molecules())
    curved = [k for k in known if k.curve is not None]
    heading("Boiling point: molecules with a published vapour pressure")
    boiling_points([k for k in known if k.published])
    heading("Boiling point: molecules with an evaluated vapour-pressure curve")
    boiling_points(curved)
    heading("Boiling point: all molecules")
    boiling_points(known)
    heading("Critical point, boiling point known")
    critical_points(known)
    cells = "  ".join(f"{r:>11.2f}" for r in REDUCED)
    print(f"\nln P, median/90 % of the error, at T/Tb:{'':>7}{cells}")
    print(" boiling and critical point published")
    shape_errors(curved, published=True)
    print(" boiling point published, critical point by Joback and Reid")
    shape_errors(curved, published=False)
    print(" as the project answers")
    whole_estimate(curved, "published constants, no published equation", constants)
    whole_estimate(curved, "structure alone", unpublished)
    heading("Continuation outside the range, relative error of ln(P/P_edge)")
    continuation(curved)


if __name__ == "__main__":
    main()
