"""Build the equation of state of a mixture from its molecules."""

from collections.abc import Sequence

import numpy as np

from groups.activity import activity_model
from groups.errors import IncompleteAssignmentError, NoVapourPressureError
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule
from groups.vapour.gas_constants import GasConstants, gas_constants
from groups.vapour.label import label
from groups.vapour.note import VapourNote
from groups.vapour.psrk.alpha import Attraction, attraction
from groups.vapour.psrk.model import PsrkModel

METHOD = "psrk"


def psrk_model(molecules: Sequence[Molecule]) -> tuple[PsrkModel, tuple[VapourNote, ...]]:
    """The predictive Soave-Redlich-Kwong equation for a mixture of molecules, gases included.

    Parameters
    ----------
    molecules : sequence of Molecule

    Returns
    -------
    model : PsrkModel
    notes : tuple of VapourNote
        Estimated constants, attractions that rest on no vapour pressure, quantum gases.

    Raises
    ------
    IncompleteAssignmentError
        Where the groups of the table do not cover a molecule.
    MissingParameterError
        Where two main groups have no published parameter.
    NoVapourPressureError
        Where no critical point of a molecule is known or can be estimated.

    Source
    ------
    `groups.vapour.psrk.model` and `groups.vapour.psrk.alpha`.
    """
    counts, gases, attractions = [], [], []
    notes: list[VapourNote] = []
    for molecule in molecules:
        found = assign(molecule, METHOD)
        if not found.complete:
            raise IncompleteAssignmentError(
                f"The groups of '{METHOD}' do not cover {molecule.canonical_smiles}: "
                f"{found.explanation}",
                smiles=molecule.canonical_smiles,
                method=METHOD,
                atoms=found.unassigned_atoms,
            )
        gas = _constants(molecule)
        curve = _attraction(molecule, gas)
        counts.append(found.counts)
        gases.append(gas)
        attractions.append(curve)
        notes += _notes(label(molecule), gas, curve)
    model = PsrkModel(
        activity_model(counts, METHOD),
        np.array([curve.critical_temperature_K for curve in attractions]),
        np.array([curve.critical_pressure_kPa for curve in attractions]),
        np.array([gas.acentric_factor for gas in gases]),
        tuple(attractions),
    )
    return model, tuple(notes)


def _constants(molecule: Molecule) -> GasConstants:
    gas = gas_constants(molecule)
    if gas is None:
        raise NoVapourPressureError(
            f"No critical point of {molecule.canonical_smiles} is known here or can be estimated, "
            "and the equation of state needs one.",
            smiles=molecule.canonical_smiles,
        )
    return gas


def _attraction(molecule: Molecule, gas: GasConstants) -> Attraction:
    Tc = gas.critical_temperature_K
    try:
        line = vapour_pressure(molecule, temperature_K=(0.5 * Tc, 0.98 * Tc))
    except NoVapourPressureError:
        line = None
    return attraction(Tc, gas.critical_pressure_kPa, gas.acentric_factor, line)


def _notes(name: str, gas: GasConstants, curve: Attraction) -> list[VapourNote]:
    notes = [
        VapourNote("attraction_source", f"Attraction of {name}: {curve.source}.", name),
    ]
    estimated = [what for what in gas.estimated if what != "critical volume"]
    if estimated:
        text = f"Estimated for the equation of state of {name}: {', '.join(estimated)}."
        notes.append(VapourNote("vapour_constants_estimated", text, name, "moderate"))
    if curve.range_K is None:
        text = f"The attraction of {name} is generalised; no vapour pressure was at hand."
        notes.append(VapourNote("attraction_generalised", text, name, "moderate"))
    if gas.acentric_factor < -0.1:
        text = f"{name} is a quantum gas; cubic equations describe it only roughly."
        notes.append(VapourNote("quantum_gas", text, name, "moderate"))
    return notes
