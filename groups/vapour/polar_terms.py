"""The polar terms a and b of Tsonopoulos' correlation, from the class of a molecule and its dipole.

With the reduced dipole moment mu_r = 1e5 mu^2 Pc / Tc^2 (debye, atmospheres, kelvin):

    ketones, aldehydes, nitriles, ethers, esters   a = -2.14e-4 mu_r - 4.308e-21 mu_r^8
    alkyl halides, thiols, sulfides                a = -2.188e-11 mu_r^4 - 7.831e-21 mu_r^8
    1-alkanols and other monohydric alcohols       a = 0.0878, b = 0.00908 + 0.0006957 mu_r
    methanol                                       a = 0.0878, b = 0.0525
    water                                          a = -0.0109

Source: C. Tsonopoulos, AIChE J. 20 (1974) 263 and 21 (1975) 827; AIChE Symp. Ser. 140 (1974) 27;
as collected in Poling, Prausnitz, O'Connell, The Properties of Gases and Liquids, 5th ed. (2001),
table 4-5. From memory. For other classes nothing is published there and both terms are zero.
"""

from dataclasses import dataclass

from rdkit import Chem

_ATMOSPHERE_KPA = 101.325
#: mu_r beyond which the eighth power leaves the molecules that the equations were fitted to;
#: acetonitrile (240) and nitromethane are the largest of them.
LARGEST_REDUCED_DIPOLE = 300.0

_CLASSES = {
    "water": ("[OX2H2]",),
    "methanol": ("[CH3][OX2H]",),
    "alcohol": ("[CX4][OX2H]",),
    "ketone or ether": (
        "[#6][CX3](=O)[#6]",
        "[CX3H1](=O)",
        "[CX2]#[NX1]",
        "[#6][OX2][#6]",
    ),
    "halide or sulfide": ("[CX4][F,Cl,Br,I]", "[#6][SX2H]", "[#6][SX2][#6]"),
}
_PATTERNS = {
    name: tuple(Chem.MolFromSmarts(text) for text in texts) for name, texts in _CLASSES.items()
}


@dataclass(frozen=True, slots=True)
class PolarTerms:
    """Dimensionless terms a and b, and what they rest on, in words."""

    a: float
    b: float
    basis: str


def polar_class(mol: Chem.Mol) -> str | None:
    """The class whose equation applies, or None where none is published.

    Parameters
    ----------
    mol : Chem.Mol

    Returns
    -------
    str or None
    """
    for name, patterns in _PATTERNS.items():
        if any(mol.HasSubstructMatch(pattern) for pattern in patterns):
            whole = mol.GetNumAtoms() <= 2 if name == "methanol" else True
            if whole:
                return name
    return None


def polar_terms(
    mol: Chem.Mol,
    dipole_debye: float | None,
    critical_temperature_K: float,
    critical_pressure_kPa: float,
) -> PolarTerms:
    """The polar terms of one molecule; zero where they are not published or the dipole is unknown.

    Parameters
    ----------
    mol : Chem.Mol
    dipole_debye : float or None
        Dipole moment in debye.
    critical_temperature_K, critical_pressure_kPa : float

    Returns
    -------
    PolarTerms

    Source
    ------
    See the head of this module.
    """
    name = polar_class(mol)
    if name is None:
        return PolarTerms(0.0, 0.0, "no polar term published for its class")
    if name == "water":
        return PolarTerms(-0.0109, 0.0, "Tsonopoulos, water")
    if name == "methanol":
        return PolarTerms(0.0878, 0.0525, "Tsonopoulos, methanol")
    if dipole_debye is None:
        return PolarTerms(0.0, 0.0, "its dipole moment is not known, so no polar term")
    reduced = 1e5 * dipole_debye**2 * critical_pressure_kPa / _ATMOSPHERE_KPA
    reduced = min(reduced / critical_temperature_K**2, LARGEST_REDUCED_DIPOLE)
    if name == "alcohol":
        return PolarTerms(0.0878, 0.00908 + 0.0006957 * reduced, "Tsonopoulos, alcohols")
    if name == "ketone or ether":
        a = -2.14e-4 * reduced - 4.308e-21 * reduced**8
        return PolarTerms(a, 0.0, "Tsonopoulos, ketones, aldehydes, nitriles, ethers and esters")
    a = -2.188e-11 * reduced**4 - 7.831e-21 * reduced**8
    return PolarTerms(a, 0.0, "Tsonopoulos, halides, thiols and sulfides")
