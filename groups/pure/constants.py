"""Boiling point, critical point and acentric factor of one molecule, each with its source."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache
from statistics import median
from types import ModuleType

import numpy as np
from rdkit import Chem

from groups.pure.boiling import estimated_boiling
from groups.pure.constant import Constant
from groups.pure.corresponding_states import Anchor, lee_kesler_acentric_factor
from groups.pure.critical import estimated_critical
from groups.pure.published import published_vapour_pressure
from groups.pure.registry import registry_number
from groups.structure.molecule import Molecule

_BOILING_SOURCES = {
    "CRC_ORG": "CRC Handbook of Chemistry and Physics",
    "CRC_INORG": "CRC Handbook of Chemistry and Physics",
    "WEBBOOK": "NIST Chemistry WebBook",
    "COMMON_CHEMISTRY": "CAS Common Chemistry",
}
_YAWS = "Yaws, Thermophysical Properties of Chemicals and Hydrocarbons (may itself be an estimate)"
_CRITICAL_SOURCES = {
    "IUPAC": "IUPAC critical properties of organic compounds, J. Chem. Eng. Data (1995 to 2015)",
    "CRC": "CRC Handbook of Chemistry and Physics",
    "HEOS": "reference equation of state",
    "MATTHEWS": "Mathews, Chem. Rev. 72 (1972) 71",
    "PSRK": "Horstmann et al., Fluid Phase Equilib. 227 (2005) 157",
    "PINAMARTINES": "Pina-Martinez et al., Fluid Phase Equilib. 485 (2019) 264",
    "YAWS": _YAWS,
}
_ACENTRIC_SOURCES = {"HEOS": "reference equation of state", "PSRK": _CRITICAL_SOURCES["PSRK"]}

_SAME_BOILING_K = 3.0
"""Boiling points closer than this count as agreeing; rounding and barometer, common practice."""

_UNSURE_BOILING_K = 10.0
"""Standard deviation given to a boiling point that no second source bears out."""


@dataclass(frozen=True, slots=True)
class PureConstants:
    """The constants of one molecule; None where neither published nor within an estimate's reach.

    Parameters
    ----------
    normal_boiling_K, critical_temperature_K : Constant or None
        K.
    critical_pressure_kPa : Constant or None
        kPa.
    acentric_factor : Constant or None
        Dimensionless.
    """

    normal_boiling_K: Constant | None
    critical_temperature_K: Constant | None
    critical_pressure_kPa: Constant | None
    acentric_factor: Constant | None


def constants(molecule: Molecule) -> PureConstants:
    """Published constants where there are any, estimates from structure where not.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    PureConstants

    Source
    ------
    Published values from the compilations named in each `source`, read through the open
    `chemicals` package; estimates by Stein & Brown (1994), Constantinou & Gani (1994), Joback &
    Reid (1987), Wilson & Jasperson (1996), and the acentric factor by Lee & Kesler (1975).
    """
    cas = registry_number(molecule)
    boiling = _boiling(molecule.mol, cas)
    Tc = None if cas is None else published_constant(cas, "Tc")
    Pc = None if cas is None else published_constant(cas, "Pc")
    if Tc is not None and boiling is not None and Tc.value <= boiling.value:
        Tc, Pc = None, None  # a pair that contradicts itself is no anchor
    if boiling is not None and (Tc is None or Pc is None):
        estimate = estimated_critical(molecule.mol, boiling.value)
        if estimate is not None:
            Tc, Pc = Tc or estimate.temperature_K, Pc or estimate.pressure_kPa
    return PureConstants(boiling, Tc, Pc, _acentric_factor(cas, boiling, Tc, Pc))


def _boiling(mol: Chem.Mol, cas: str | None) -> Constant | None:
    published = None if cas is None else published_boiling(cas)
    if published is not None:
        return published
    estimate = estimated_boiling(mol)
    if estimate is None:
        return None
    source = "median of " + ", ".join(name for name, _ in estimate.by_method)
    if len(estimate.by_method) < 3:
        source = "Stein & Brown, J. Chem. Inf. Comput. Sci. 34 (1994) 581"
    return Constant(estimate.value_K, source, True, estimate.uncertainty_K)


@lru_cache(maxsize=8192)
def published_boiling(cas: str) -> Constant | None:
    """The normal boiling point that the handbooks agree on.

    Parameters
    ----------
    cas : str
        CAS registry number.

    Returns
    -------
    Constant or None
        K. The median of the handbooks; of two that differ, the first in order of precedence; its
        uncertainty tells whether a second one bears it out.
    """
    found = {k: T for k in _BOILING_SOURCES if (T := _lookup("Tb", cas, k)) is not None}
    if not found:
        alone = _lookup("Tb", cas, "YAWS")
        return None if alone is None else Constant(alone, _YAWS, False, _UNSURE_BOILING_K)
    values = list(found.values())
    value = median(values) if len(values) != 2 else values[0]
    near = [k for k, T in found.items() if abs(T - value) <= _SAME_BOILING_K]
    spread = float(np.std([found[k] for k in near]))
    unsure = _UNSURE_BOILING_K if len(near) < 2 else max(0.5, spread)
    return Constant(value, "; ".join(_BOILING_SOURCES[k] for k in near), False, unsure)


@lru_cache(maxsize=16384)
def published_constant(cas: str, kind: str) -> Constant | None:
    """Critical temperature in K or critical pressure in kPa out of the open compilations.

    Parameters
    ----------
    cas : str
        CAS registry number.
    kind : str
        "Tc" or "Pc".

    Returns
    -------
    Constant or None
        The first in order of precedence that lies close to the median of all: one compilation
        alone may hold a slip (phenanthrene stands at 0.869 K in one, for 869 K).
    """
    scale, share, bound = (1.0, 0.005, 0.05) if kind == "Tc" else (1e-3, 0.03, 0.25)
    found = {m: v for m in _CRITICAL_SOURCES if (v := _lookup(kind, cas, m)) is not None and v > 0}
    if not found:
        return None
    middle = median(found.values())
    sound = [m for m, v in found.items() if abs(v / middle - 1.0) <= bound]
    chosen = sound[0] if sound else next(iter(found))
    value = found[chosen] * scale
    spread = float(np.std([found[m] for m in sound])) * scale if sound else 0.2 * value
    return Constant(value, _CRITICAL_SOURCES[chosen], False, max(share * value, spread))


def _acentric_factor(
    cas: str | None, boiling: Constant | None, Tc: Constant | None, Pc: Constant | None
) -> Constant | None:
    """By its definition at 0.7 Tc, from a table, or by Lee and Kesler, in this order."""
    if Tc is None or Pc is None:
        return None
    if cas is not None and not Tc.estimated:
        at = 0.7 * Tc.value
        curve = published_vapour_pressure(cas, (at, at))
        if curve is not None and not curve.extrapolated(at):
            value = float((np.log(Pc.value) - curve.ln_kPa(at)) / np.log(10.0)) - 1.0
            return Constant(value, f"definition, {curve.citation}", False, 0.01)
        for method, title in _ACENTRIC_SOURCES.items():
            table = _lookup("omega", cas, method)
            if table is not None:
                return Constant(table, title, False, 0.01)
    if boiling is None:
        return None
    anchor = Anchor(boiling.value, Tc.value, Pc.value)
    source = "Lee & Kesler, AIChE J. 21 (1975) 510"
    return Constant(lee_kesler_acentric_factor(anchor), source, True, 0.05)


def _library() -> ModuleType:
    """The `chemicals` package, imported on first use because it pulls pandas in."""
    import chemicals

    return chemicals


def _lookup(kind: str, cas: str, method: str) -> float | None:
    look: Callable[..., float | None] = getattr(_library(), kind)
    value = look(cas, method=method)
    return None if value is None or not np.isfinite(value) else float(value)
