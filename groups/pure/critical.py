"""Critical temperature and pressure from structure and a boiling point."""

from dataclasses import dataclass

from rdkit import Chem

from groups.pure.constant import Constant
from groups.pure.group_tables import group_table

_TURNING_POINT = 0.965 / 2.0
"""Where Joback's parabola in the temperature sum turns; beyond it Tc/Tb would rise again."""

_TC_SHARE, _PC_SHARE = 0.013, 0.055
"""Measured mean relative errors with a known boiling point.

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
    return CriticalEstimate(
        Constant(Tc, source, True, _TC_SHARE * Tc), Constant(Pc, source, True, _PC_SHARE * Pc)
    )
