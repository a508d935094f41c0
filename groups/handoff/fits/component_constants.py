"""What UNIQUAC and Wilson need of each component: r and q, and liquid molar volumes."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.errors import FitRefusedError, IncompleteAssignmentError
from groups.parameters import table
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule
from groups.vapour.gas_constants import gas_constants
from groups.vapour.liquid_volume import liquid_volume

#: Tables whose R and Q are Bondi's van der Waals volumes and surfaces, in this order; the modified
#: tables have other, fitted ones that do not belong in UNIQUAC.
BONDI_TABLES = ("unifac", "unifac-2.0", "unifac-lle", "psrk", "unifac-lyngby")
VOLUME_TEMPERATURE_K = 298.15


@dataclass(frozen=True, slots=True)
class SizeParameters:
    """r and q of each component of shape (n_components,), and where they come from."""

    volumes: FloatArray
    surfaces: FloatArray
    source: str


@dataclass(frozen=True, slots=True)
class MolarVolumes:
    """Liquid molar volumes of shape (n_components,) at 298.15 K, and where they come from."""

    cm3_mol: FloatArray
    sources: tuple[str, ...]


def size_parameters(molecules: Sequence[Molecule]) -> SizeParameters:
    """r and q of UNIQUAC as sums over the groups of a UNIFAC table.

    Parameters
    ----------
    molecules : sequence of Molecule

    Returns
    -------
    SizeParameters
        r_i = sum over groups of count times R, q_i likewise with Q, dimensionless.

    Raises
    ------
    IncompleteAssignmentError
        If no table with Bondi's volumes and surfaces has groups for all atoms.

    Source
    ------
    Fredenslund, Jones & Prausnitz, AIChE J. 21 (1975) 1086, equations 8 and 9.
    """
    for method in BONDI_TABLES:
        found = [assign(molecule, method) for molecule in molecules]
        if all(one.complete for one in found):
            parameters = table(method)
            r, q = np.zeros(len(found)), np.zeros(len(found))
            for k, one in enumerate(found):
                for number, count in one.counts.items():
                    place = parameters.subgroup_index(number)
                    r[k] += count * parameters.R[place]
                    q[k] += count * parameters.Q[place]
            return SizeParameters(r, q, f"sums of the group volumes and surfaces of {method}")
    bad = next(one for one in found if not one.complete)
    which = found.index(bad)
    raise IncompleteAssignmentError(
        f"UNIQUAC needs r and q, and {molecules[which].canonical_smiles} cannot be split into "
        f"groups with published volumes and surfaces: {bad.explanation}",
        smiles=molecules[which].canonical_smiles,
        method=bad.method,
        atoms=bad.unassigned_atoms,
    )


def molar_volumes(molecules: Sequence[Molecule]) -> MolarVolumes:
    """Liquid molar volumes for Wilson's equation, at 298.15 K.

    Parameters
    ----------
    molecules : sequence of Molecule

    Returns
    -------
    MolarVolumes
        cm3/mol.

    Raises
    ------
    FitRefusedError
        If a molecule has no critical point, published or estimated.
    """
    values, sources = [], []
    for index, molecule in enumerate(molecules):
        gas = gas_constants(molecule)
        if gas is None:
            raise FitRefusedError(
                f"No liquid volume of {molecule.canonical_smiles} is known or can be estimated.",
                cure="Fit Wilson's equation without molar volumes.",
                field=f"components[{index}]",
            )
        volume = liquid_volume(molecule, gas)
        values.append(float(volume.cm3_mol(np.asarray(VOLUME_TEMPERATURE_K))))
        sources.append(volume.source)
    return MolarVolumes(np.array(values), tuple(sources))
