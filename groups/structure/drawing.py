"""One drawing for each molecule, whichever way its charges were drawn.

Nitro, azide, diazo, N-oxide and isocyanide groups are kept charge-separated (nitrogen with four
bonds and a plus); sulfoxides, sulfones and phosphine oxides are drawn with a double bond. RDKit's
sanitisation already turns five-bonded nitrogen into the first form; the rest is done here.

Source: common practice in chemical data bases; the two forms of each group are named by IUPAC,
Graphical representation standards, Pure Appl. Chem. 80 (2008) 277, GR-8 and GR-9 (section numbers
from memory).
"""

from rdkit import Chem

# Gases that one table publishes as groups of their own: radical or second drawings -> the one kept.
_GASES = {
    "[O][O]": "O=O",
    "[C]=O": "[C-]#[O+]",
    "[HH]": "[H][H]",
    "N#[N+][O-]": "[N-]=[N+]=O",
    "O=[N+][O-]": "[O]N=O",
}
_HYPERVALENT = frozenset({15, 16, 33, 34})  # P, S, As, Se: drawn with a double bond
_NITROGEN = 7


def in_one_drawing(mol: Chem.Mol) -> Chem.Mol:
    """The molecule in the one drawing kept here; atoms stay in their order.

    Parameters
    ----------
    mol
        A sanitised molecule. Only the gases of three atoms or fewer may lose the atom order.

    Returns
    -------
    rdkit.Chem.Mol
        Sanitised; the molecule itself where nothing had to be redrawn.

    Source
    ------
    See the head of the module.
    """
    if mol.GetNumAtoms() <= 3:
        gas = _GASES.get(Chem.MolToSmiles(mol))
        if gas is not None:
            return Chem.MolFromSmiles(gas)
    redrawn = Chem.RWMol(mol)
    changed = False
    for bond in redrawn.GetBonds():
        ends = bond.GetBeginAtom(), bond.GetEndAtom()
        for plus, minus in (ends, ends[::-1]):
            changed |= _joined_twice(bond, plus, minus) or _diazo(bond, plus, minus)
    for atom in redrawn.GetAtoms():
        changed |= _isocyanide(atom)
    if not changed:
        return mol
    if Chem.SanitizeMol(redrawn, catchErrors=True) != Chem.SanitizeFlags.SANITIZE_NONE:
        return mol  # the drawing given is then the only one that RDKit's valences allow
    Chem.AssignStereochemistry(redrawn, cleanIt=True, force=True)
    return redrawn.GetMol()


def without_annotations(mol: Chem.Mol) -> Chem.Mol:
    """The molecule without map numbers and with its hydrogen folded into the heavy atoms.

    Parameters
    ----------
    mol
        A sanitised molecule.

    Returns
    -------
    rdkit.Chem.Mol
        The heavy atoms in their order. Molecular hydrogen keeps its two atoms.

    Source
    ------
    None: a convention of this project.
    """
    for atom in mol.GetAtoms():
        atom.SetAtomMapNum(0)
    if mol.GetNumAtoms() == mol.GetNumHeavyAtoms() or mol.GetNumHeavyAtoms() == 0:
        return mol
    parameters = Chem.RemoveHsParameters()  # its stubs type the flags as the class itself
    # [H]/N=C/C: no group knows on which side that hydrogen stands.
    parameters.removeDefiningBondStereo = True  # type: ignore[assignment]
    parameters.removeMapped = True  # type: ignore[assignment]
    parameters.showWarnings = False  # type: ignore[assignment]
    return Chem.RemoveHs(mol, parameters)


def _joined_twice(bond: Chem.Bond, plus: Chem.Atom, minus: Chem.Atom) -> bool:
    """Redraw S+-O- (and P, As, Se; and O, N, S, C) as S=O."""
    fits = (
        plus.GetAtomicNum() in _HYPERVALENT
        and plus.GetFormalCharge() > 0
        and minus.GetFormalCharge() < 0
        and bond.GetBondType() == Chem.BondType.SINGLE
        and not plus.GetIsAromatic()
    )
    if fits:
        bond.SetBondType(Chem.BondType.DOUBLE)
        plus.SetFormalCharge(plus.GetFormalCharge() - 1)
        minus.SetFormalCharge(minus.GetFormalCharge() + 1)
    return fits


def _diazo(bond: Chem.Bond, plus: Chem.Atom, minus: Chem.Atom) -> bool:
    """Redraw A(-)-N(+)#N as A=N(+)=N(-)."""
    if not (
        plus.GetAtomicNum() == _NITROGEN
        and plus.GetFormalCharge() == 1
        and minus.GetFormalCharge() == -1
        and bond.GetBondType() == Chem.BondType.SINGLE
    ):
        return False
    for other in plus.GetBonds():
        end = other.GetOtherAtom(plus)
        if other.GetBondType() == Chem.BondType.TRIPLE and end.GetAtomicNum() == _NITROGEN:
            bond.SetBondType(Chem.BondType.DOUBLE)
            other.SetBondType(Chem.BondType.DOUBLE)
            minus.SetFormalCharge(0)
            end.SetFormalCharge(-1)
            return True
    return False


def _isocyanide(atom: Chem.Atom) -> bool:
    """Redraw the carbene form [C]=N-R as [C-]#[N+]-R."""
    if atom.GetAtomicNum() != 6 or atom.GetNumRadicalElectrons() != 2 or atom.GetDegree() != 1:
        return False
    bond = atom.GetBonds()[0]
    nitrogen = bond.GetOtherAtom(atom)
    if nitrogen.GetAtomicNum() != _NITROGEN or bond.GetBondType() != Chem.BondType.DOUBLE:
        return False
    bond.SetBondType(Chem.BondType.TRIPLE)
    atom.SetFormalCharge(-1)
    atom.SetNumRadicalElectrons(0)
    nitrogen.SetFormalCharge(1)
    return True
