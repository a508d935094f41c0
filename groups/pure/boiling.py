"""Normal boiling point from structure: the median of three published group-contribution methods."""

from dataclasses import dataclass

import numpy as np
from rdkit import Chem

from groups.pure.group_tables import TableName, group_table

_FLOOR_K = 6.0
_SHARE_OF_SPREAD = 0.57
_STEIN_BROWN_ALONE_K = 24.0
"""Measured: the 68 % quantile of the error, without and with the spread of the three methods.

`tests/bench/measure_vapour_pressure_estimate.py` prints it.
"""


@dataclass(frozen=True, slots=True)
class BoilingEstimate:
    """An estimated normal boiling point.

    Parameters
    ----------
    value_K, uncertainty_K : float
        K; the uncertainty is about one standard deviation.
    by_method : tuple of (str, float)
        What each method that covers the molecule gives, K.
    """

    value_K: float
    uncertainty_K: float
    by_method: tuple[tuple[str, float], ...]


def stein_brown_boiling_K(mol: Chem.Mol) -> float | None:
    """Normal boiling point by Stein and Brown.

    Parameters
    ----------
    mol : Chem.Mol

    Returns
    -------
    float or None
        K; None where the groups do not cover the molecule.

    Source
    ------
    Stein & Brown, J. Chem. Inf. Comput. Sci. 34 (1994) 581.
    """
    total = _total("stein_brown", "Tb_K", mol)
    if total is None:
        return None
    T = 198.2 + total
    if T <= 700.0:
        return T - 94.84 + 0.5577 * T - 0.0007705 * T**2
    return T + 282.7 - 0.5209 * T


def constantinou_gani_boiling_K(mol: Chem.Mol) -> float | None:
    """Normal boiling point by Constantinou and Gani, first-order groups.

    Parameters
    ----------
    mol : Chem.Mol

    Returns
    -------
    float or None
        K; None where the groups do not cover the molecule.

    Source
    ------
    Constantinou & Gani, AIChE J. 40 (1994) 1697.
    """
    total = _total("constantinou_gani", "Tb", mol)
    return None if total is None or total <= 0.0 else 204.359 * float(np.log(total))


def joback_boiling_K(mol: Chem.Mol) -> float | None:
    """Normal boiling point by Joback and Reid.

    Parameters
    ----------
    mol : Chem.Mol

    Returns
    -------
    float or None
        K; None where the groups do not cover the molecule.

    Source
    ------
    Joback & Reid, Chem. Eng. Commun. 57 (1987) 233.
    """
    total = _total("joback", "Tb_K", mol)
    return None if total is None else 198.0 + total


METHODS = {
    "Stein-Brown": stein_brown_boiling_K,
    "Constantinou-Gani": constantinou_gani_boiling_K,
    "Joback-Reid": joback_boiling_K,
}


def estimated_boiling(mol: Chem.Mol) -> BoilingEstimate | None:
    """Normal boiling point: the median where three methods cover the molecule, else Stein-Brown.

    Parameters
    ----------
    mol : Chem.Mol

    Returns
    -------
    BoilingEstimate or None
        None where Stein and Brown's groups do not cover the molecule.

    Source
    ------
    The three methods are those of this module; taking their median is this project's choice, by
    measurement (`tests/bench/measure_vapour_pressure_estimate.py`).
    """
    answers = {name: method(mol) for name, method in METHODS.items()}
    found = {name: T for name, T in answers.items() if T is not None}
    first = found.get("Stein-Brown")
    if first is None:
        return None
    if len(found) < len(METHODS):
        return BoilingEstimate(first, _STEIN_BROWN_ALONE_K, tuple(found.items()))
    values = np.array(list(found.values()))
    sigma = _FLOOR_K + _SHARE_OF_SPREAD * float(values.std())
    return BoilingEstimate(float(np.median(values)), sigma, tuple(found.items()))


def _total(table: TableName, column: str, mol: Chem.Mol) -> float | None:
    groups = group_table(table)
    counts = groups.count(mol)
    return None if counts is None else groups.total(counts, column)
