"""Dimers of carboxylic acids in the vapour: the chemical theory, solved exactly.

Molecules i and j that both carry one carboxyl group form dimers, p_ij = K_ij p_i p_j, where p_i is
the partial pressure of the monomer, K_ii = K_i and, for statistics, K_ij = 2 sqrt(K_i K_j). With
k_i = sqrt(K_i) and S = sum k_i p_i all dimers together press with S^2, so that

    P = sum p_i + S^2          y_i (P + S^2) = p_i (1 + 2 k_i S)

(apparent moles on the left). Both leave one equation for S between 0 and sqrt(P),

    S / (P + S^2) = sum y_i k_i / (1 + 2 k_i S)

whose left side rises and whose right side falls: one root, found by a safeguarded Newton search.
ln phi_i = ln(p_i / (y_i P)), since the fugacity of the component is that of its monomer.

Source: J. M. Prausnitz, R. N. Lichtenthaler, E. G. de Azevedo, Molecular Thermodynamics of
Fluid-Phase Equilibria, 3rd ed. (1999), section 5.8; K. Nothnagel, D. S. Abrams, J. M. Prausnitz,
Ind. Eng. Chem. Process Des. Dev. 12 (1973) 25 (cross constants). The closed form is ours.
"""

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from importlib.resources import files

import numpy as np
from rdkit import Chem

from groups.arrays import FloatArray

_ACID = Chem.MolFromSmarts("[CX3;!$([CX3]([OX2H])[OX2H])](=O)[OX2H]")
_LN_10 = float(np.log(10.0))
_MMHG_KPA = 0.133322387415
#: Above butanoic acid no constant is tabulated here; the dimer's two bonds hardly feel the chain.
_STAND_IN = "CCCC(=O)O"
MAX_ITERATIONS = 100


@dataclass(frozen=True, slots=True)
class Dimerisation:
    """log10 K = A + B/T with K in 1/mmHg, T in K.

    Parameters
    ----------
    A, B_K : float
    source : str
    estimated : bool
        True where the constants are those of another acid.
    """

    A: float
    B_K: float
    source: str
    estimated: bool

    def ln_constant(self, temperature_K: FloatArray) -> FloatArray:
        """ln K, K in 1/kPa, in the shape of the temperature in K."""
        return np.asarray(_LN_10 * (self.A + self.B_K / temperature_K) - np.log(_MMHG_KPA))


def dimerisation(mol: Chem.Mol, canonical_smiles: str) -> Dimerisation | None:
    """Dimerisation constant of a molecule with one carboxyl group.

    Parameters
    ----------
    mol : Chem.Mol
    canonical_smiles : str

    Returns
    -------
    Dimerisation or None
        None for molecules without, or with more than one, carboxyl group.

    Source
    ------
    groups/vapour/tables/dimerisation.csv.
    """
    if len(mol.GetSubstructMatches(_ACID)) != 1:
        return None
    table = _constants()
    if canonical_smiles in table:
        return table[canonical_smiles]
    known = table[_STAND_IN]
    return Dimerisation(known.A, known.B_K, f"{known.source}; taken from butanoic acid", True)


@lru_cache(maxsize=1)
def _constants() -> Mapping[str, Dimerisation]:
    text = (files("groups.vapour") / "tables" / "dimerisation.csv").read_text("utf-8")
    source = (
        "vapour densities, as collected by Prausnitz, Lichtenthaler, de Azevedo, Molecular "
        "Thermodynamics of Fluid-Phase Equilibria"
    )
    return {
        row["smiles"]: Dimerisation(float(row["A"]), float(row["B_K"]), source, False)
        for row in csv.DictReader(text.splitlines())
    }


@dataclass(frozen=True, slots=True)
class Dimers:
    """Monomers and dimers of n vapours.

    Parameters
    ----------
    ln_monomer : array of shape (n, n_components)
        ln(p_i / (y_i P)); zero for a component that does not associate in a vapour without dimers.
    true_moles : array of shape (n,)
        Moles of particles to a mole of molecules counted as monomers, 0.5 to 1.
    """

    ln_monomer: FloatArray
    true_moles: FloatArray


def dimer_equilibrium(ln_constant: FloatArray, pressure_kPa: FloatArray, y: FloatArray) -> Dimers:
    """Solve the balances of monomers and dimers.

    Parameters
    ----------
    ln_constant : array of shape (n, n_components)
        ln K_i in 1/kPa; minus infinity for a component that forms no dimers.
    pressure_kPa : array of shape (n,)
    y : array of shape (n, n_components)
        Apparent mole fractions.

    Returns
    -------
    Dimers

    Source
    ------
    See the head of this module.
    """
    # In units of the pressure: k' = k sqrt(P), S' = S / sqrt(P), between 0 and 1.
    k = np.exp(0.5 * ln_constant) * np.sqrt(pressure_kPa)[:, None]
    S = _association_sum(k, y)
    total = 1.0 + S**2
    ln_monomer = np.log(total)[:, None] - np.log1p(2.0 * k * S[:, None])
    return Dimers(ln_monomer, 1.0 / total)


def _association_sum(k: FloatArray, y: FloatArray) -> FloatArray:
    """The root of S - (1 + S^2) sum y k / (1 + 2 k S) between 0 and 1, of shape (n,)."""
    low, high = np.zeros(len(y)), np.ones(len(y))
    effective = (y * k).sum(axis=1)
    S: FloatArray = effective / (1.0 + effective)
    for _ in range(MAX_ITERATIONS):
        weight = 1.0 / (1.0 + 2.0 * k * S[:, None])
        first = (y * k * weight).sum(axis=1)
        second = (y * k**2 * weight**2).sum(axis=1)
        value = S - (1.0 + S**2) * first
        slope = 1.0 - 2.0 * S * first + 2.0 * (1.0 + S**2) * second
        low, high = np.where(value < 0.0, S, low), np.where(value < 0.0, high, S)
        newton = S - value / np.where(slope > 0.0, slope, 1.0)
        inside = (slope > 0.0) & (newton >= low) & (newton <= high)
        fresh = np.where(inside, newton, 0.5 * (low + high))
        small = np.abs(fresh - S) <= 4e-16
        S = fresh
        if np.all(small):
            break
    return S
