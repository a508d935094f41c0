"""Reasons that no fit of a group method can know: the components react, or one is a gas."""

from collections.abc import Sequence
from functools import lru_cache

from rdkit import Chem

from groups.confidence.confidence import Reason
from groups.confidence.labels import label
from groups.pure.constants import published_constant
from groups.structure.molecule import Molecule

# Sulfuric and sulfonic acids, nitric acid, and the hydrogen halides but the weak fluoride.
_STRONG_ACID = Chem.MolFromSmarts("[$([OX2H1]S(=O)=O),$([OX2H1][N+](=O)[O-]),ClH1,BrH1,IH1]")
_CARBOXYLIC_ACID = Chem.MolFromSmarts("[CX3](=[OX1])[OX2H1]")
_HYDROXYL = Chem.MolFromSmarts("[OX2;H1,H2;!$(O-[C,S,N]=[O,S])]")
# Ammonia, alkyl amines and pyridines; not amides, anilines, nitriles or pyrroles.
_BASE = Chem.MolFromSmarts("[$([NX3;H3]),$([NX3;!$(N~[!#6])]([#6])),$([nX2r6])]")
_WEAK_NITROGEN = Chem.MolFromSmarts("[NX3;$(N-[#6]=,:,#[*]),$(N-[#6](F)F)]")


def chemistry_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """Strong acids that ionise in another component, and acids beside bases.

    Parameters
    ----------
    molecules : sequence of Molecule

    Returns
    -------
    list of Reason

    Source
    ------
    None: textbook chemistry.
    """
    reasons = []
    for acid in molecules:
        strong = _has(acid, "strong acid")
        for other in molecules:
            if other is acid:
                continue
            if strong and _has(other, "hydroxyl") and not _has(other, "strong acid"):
                reasons.append(_ionises(acid, other))
            if (strong or _has(acid, "carboxylic acid")) and _has(other, "base"):
                reasons.append(_salt(acid, other))
    return reasons


def gas_reasons(solute: Molecule, temperature_K: float) -> list[Reason]:
    """A reason for a solute above its critical temperature, whose pure liquid does not exist.

    Parameters
    ----------
    solute : Molecule
    temperature_K : float
        In K.

    Returns
    -------
    list of Reason

    Source
    ------
    `groups.pure.constants.published_constant`.
    """
    critical = published_constant(solute.cas, "Tc") if solute.cas else None
    if critical is None or temperature_K < critical.value:
        return []
    name = label(solute)
    return [
        Reason(
            "supercritical_component",
            f"{name} is a gas above its critical temperature ({critical.value:.1f} K): its "
            "activity coefficient refers to a pure liquid that does not exist there. A Henry's "
            "constant says what dissolves.",
            name,
            "low",
        )
    ]


def _ionises(acid: Molecule, other: Molecule) -> Reason:
    return Reason(
        "ionises",
        f"{label(acid)} is a strong acid and gives its proton to {label(other)}; no table here "
        "holds ions, so its activity coefficient and its volatility there are no guide.",
        f"{label(acid)} / {label(other)}",
        "low",
    )


def _salt(acid: Molecule, base: Molecule) -> Reason:
    return Reason(
        "acid_with_base",
        f"{label(acid)} and {label(base)} form a salt or a strong complex, which no table here "
        "holds; the mixture deviates far more negatively and boils higher than predicted.",
        f"{label(acid)} / {label(base)}",
        "low",
    )


@lru_cache(maxsize=50_000)
def _roles(molecule: Molecule) -> frozenset[str]:
    mol = molecule.mol
    roles = {
        name
        for name, pattern in (
            ("strong acid", _STRONG_ACID),
            ("carboxylic acid", _CARBOXYLIC_ACID),
            ("hydroxyl", _HYDROXYL),
        )
        if mol.HasSubstructMatch(pattern)
    }
    weak = {match[0] for match in mol.GetSubstructMatches(_WEAK_NITROGEN)}
    if any(match[0] not in weak for match in mol.GetSubstructMatches(_BASE)):
        roles.add("base")
    return frozenset(roles)


def _has(molecule: Molecule, role: str) -> bool:
    return role in _roles(molecule)
