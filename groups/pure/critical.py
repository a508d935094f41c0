"""Critical temperature and pressure from structure and a boiling point."""

import csv
from collections import Counter
from dataclasses import dataclass
from functools import lru_cache
from importlib.resources import files

import numpy as np
from rdkit import Chem

from groups.pure.constant import Constant
from groups.pure.group_tables import group_table

_TURNING_POINT = 0.965 / 2.0
"""Where Joback's parabola in the temperature sum turns; beyond it Tc/Tb would rise again."""

_JOBACK_SHARES = (0.014, 0.055)
_WILSON_JASPERSON_SHARES = (0.03, 0.13)
"""Mean relative errors of Tc and Pc with a known boiling point; the second where Joback fails.

`tests/bench/measure_vapour_pressure_estimate.py` prints them.
"""


@dataclass(frozen=True, slots=True)
class CriticalEstimate:
    """Critical temperature, K, and pressure, kPa."""

    temperature_K: Constant
    pressure_kPa: Constant


def joback_critical(mol: Chem.Mol, boiling_K: float) -> CriticalEstimate | None:
    """Critical point by Joback and Reid.

    Parameters
    ----------
    mol : Chem.Mol
    boiling_K : float
        Normal boiling point, K.

    Returns
    -------
    CriticalEstimate or None
        None where the groups do not cover the molecule or lack a published contribution. For a
        molecule so large that the sum passes the turning point of the published parabola, the
        parabola is held at that point and the source says so.

    Source
    ------
    Joback & Reid, Chem. Eng. Commun. 57 (1987) 233.
    """
    table = group_table("joback")
    counts = table.count(mol)
    if counts is None:
        return None
    for_T, for_P = table.total(counts, "Tc"), table.total(counts, "Pc")
    if for_T is None or for_P is None:
        return None
    source = "Joback & Reid, Chem. Eng. Commun. 57 (1987) 233"
    if for_T > _TURNING_POINT:
        for_T, source = _TURNING_POINT, source + ", held at its turning point (large molecule)"
    Tc = boiling_K / (0.584 + 0.965 * for_T - for_T**2)
    n_atoms = mol.GetNumAtoms() + sum(atom.GetTotalNumHs() for atom in mol.GetAtoms())
    Pc = 100.0 * (0.113 + 0.0032 * n_atoms - for_P) ** -2
    return _estimate(Tc, Pc, source, _JOBACK_SHARES)


def wilson_jasperson_critical(mol: Chem.Mol, boiling_K: float) -> CriticalEstimate | None:
    """Critical point by Wilson and Jasperson, first order: atoms and rings.

    Parameters
    ----------
    mol : Chem.Mol
    boiling_K : float
        Normal boiling point, K.

    Returns
    -------
    CriticalEstimate or None
        None where an element has no contribution here, or the molecule is outside what the
        equation can take.

    Source
    ------
    Wilson & Jasperson, AIChE Spring Meeting (1996); Poling, Prausnitz, O'Connell, The Properties
    of Gases and Liquids, 5th ed. (2001), eqs. 2-2.5 to 2-2.7.
    """
    table = _atom_contributions()
    atoms = Counter(atom.GetSymbol() for atom in mol.GetAtoms())
    atoms["H"] += sum(atom.GetTotalNumHs() for atom in mol.GetAtoms())
    if not atoms.keys() <= table.keys():
        return None
    rings = mol.GetRingInfo().NumRings()
    for_T, for_P = (sum(n * table[element][k] for element, n in atoms.items()) for k in (0, 1))
    base = 0.048271 - 0.019846 * rings + for_T
    spread = float(np.exp(-0.00922295 - 0.0290403 * rings + 0.041 * for_P)) - 0.96601
    if base <= 0.0 or spread <= 0.0:
        return None
    Tc = boiling_K / base**0.2
    Pc = 100.0 * 0.0186233 * Tc / spread
    source = "Wilson & Jasperson (1996), first order"
    return _estimate(Tc, Pc, source, _WILSON_JASPERSON_SHARES)


def estimated_critical(mol: Chem.Mol, boiling_K: float) -> CriticalEstimate | None:
    """Critical point by Joback and Reid, else by Wilson and Jasperson.

    Parameters
    ----------
    mol : Chem.Mol
    boiling_K : float
        Normal boiling point, K.

    Returns
    -------
    CriticalEstimate or None
        None where neither covers the molecule.

    Source
    ------
    See the two functions of this module; the first has the smaller measured error.
    """
    return joback_critical(mol, boiling_K) or wilson_jasperson_critical(mol, boiling_K)


def _estimate(Tc: float, Pc: float, source: str, shares: tuple[float, float]) -> CriticalEstimate:
    return CriticalEstimate(
        Constant(Tc, source, True, shares[0] * Tc), Constant(Pc, source, True, shares[1] * Pc)
    )


@lru_cache(maxsize=1)
def _atom_contributions() -> dict[str, tuple[float, float]]:
    path = files("groups.pure") / "tables" / "wilson_jasperson.atoms.csv"
    rows = csv.DictReader(path.read_text("utf-8").splitlines())
    return {row["element"]: (float(row["Tc"]), float(row["Pc"])) for row in rows}
