"""What a real vapour needs to know of one molecule, each number with its source."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache
from types import ModuleType

import numpy as np

from groups.pure import constants
from groups.pure.registry import registry_number
from groups.structure.molecule import Molecule
from groups.vapour.polar_terms import PolarTerms, polar_terms
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3

#: Compilations of critical volumes and measured dipole moments in the open package `chemicals`.
_VOLUME_SOURCES = {
    "IUPAC": "IUPAC critical properties of organic compounds, J. Chem. Eng. Data (1995 to 2015)",
    "CRC": "CRC Handbook of Chemistry and Physics",
    "MATTHEWS": "Mathews, Chem. Rev. 72 (1972) 71",
    "PSRK": "Horstmann et al., Fluid Phase Equilib. 227 (2005) 157",
}
_DIPOLE_SOURCES = {
    "CCCBDB": "NIST Computational Chemistry Comparison and Benchmark Database",
    "POLING": "Poling, Prausnitz, O'Connell, The Properties of Gases and Liquids, 5th ed. (2001)",
}
_ESTIMATED_VOLUME = "Zc = 0.2905 - 0.085 omega, Lee & Kesler, AIChE J. 21 (1975) 510"
#: Critical compressibility factors outside this belong to a slip in a table.
_USUAL_Zc = (0.15, 0.35)


@dataclass(frozen=True, slots=True)
class GasConstants:
    """Constants of one molecule for equations of the vapour.

    Parameters
    ----------
    critical_temperature_K, critical_pressure_kPa, acentric_factor : float
    critical_volume_cm3_mol : float
    polar : PolarTerms
        Terms a and b of the second virial coefficient.
    sources : tuple of (quantity, source)
    estimated : tuple of str
        The quantities that no published value stands behind.
    """

    critical_temperature_K: float
    critical_pressure_kPa: float
    acentric_factor: float
    critical_volume_cm3_mol: float
    polar: PolarTerms
    sources: tuple[tuple[str, str], ...]
    estimated: tuple[str, ...]


def gas_constants(molecule: Molecule) -> GasConstants | None:
    """Critical constants, acentric factor and polar terms of a molecule.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    GasConstants or None
        None where no critical point or acentric factor is known or can be estimated.

    Source
    ------
    `groups.pure.constants`; critical volumes and dipole moments out of the compilations that the
    open package `chemicals` carries, named in `sources`.
    """
    return _gas_constants(molecule.canonical_smiles, molecule)


_CACHE: dict[str, GasConstants | None] = {}
_CACHE_SIZE = 4096


def _gas_constants(key: str, molecule: Molecule) -> GasConstants | None:
    if key not in _CACHE:
        if len(_CACHE) >= _CACHE_SIZE:
            _CACHE.clear()
        _CACHE[key] = _collected(molecule)
    return _CACHE[key]


def _collected(molecule: Molecule) -> GasConstants | None:
    known, cas = constants(molecule), registry_number(molecule)
    Tc, Pc, omega = (
        known.critical_temperature_K,
        known.critical_pressure_kPa,
        known.acentric_factor,
    )
    if Tc is None or Pc is None or omega is None:
        return None
    volume, volume_source = _critical_volume(cas, Tc.value, Pc.value, omega.value)
    dipole, dipole_source = _published(cas, "dipole_moment", _DIPOLE_SOURCES)
    polar = polar_terms(molecule.mol, dipole, Tc.value, Pc.value)
    named = (
        ("critical temperature", Tc.source, Tc.estimated),
        ("critical pressure", Pc.source, Pc.estimated),
        ("acentric factor", omega.source, omega.estimated),
        ("critical volume", volume_source, volume_source == _ESTIMATED_VOLUME),
        ("dipole moment", dipole_source or "not known", False),
    )
    return GasConstants(
        Tc.value,
        Pc.value,
        omega.value,
        volume,
        polar,
        tuple((name, source) for name, source, _ in named),
        tuple(name for name, _, estimated in named if estimated),
    )


def _critical_volume(cas: str | None, Tc: float, Pc: float, omega: float) -> tuple[float, str]:
    value, source = _published(cas, "Vc", _VOLUME_SOURCES)
    unit = GAS_CONSTANT_KPA_CM3 * Tc / Pc
    if value is not None and source is not None:
        volume = value * 1e6
        if _USUAL_Zc[0] < volume / unit < _USUAL_Zc[1]:
            return volume, source
    return (0.2905 - 0.085 * omega) * unit, _ESTIMATED_VOLUME


def _published(
    cas: str | None, kind: str, sources: dict[str, str]
) -> tuple[float | None, str | None]:
    """The first of the compilations that holds the number."""
    if cas is None:
        return None, None
    for method, title in sources.items():
        value = _lookup(kind, cas, method)
        if value is not None:
            return value, title
    return None, None


@lru_cache(maxsize=16384)
def _lookup(kind: str, cas: str, method: str) -> float | None:
    look: Callable[..., float | None] = getattr(_library(), kind)
    value = look(cas, method=method)
    return None if value is None or not np.isfinite(value) else float(value)


def _library() -> ModuleType:
    """The `chemicals` package, imported on first use because it pulls pandas in."""
    import chemicals

    return chemicals
