"""Mixtures for the tests of real vapours."""

from groups.activity import activity_model
from groups.equilibrium import System
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles
from groups.vapour import VapourNote, VirialVapour, real_vapour


def virial(*smiles: str) -> tuple[VirialVapour, tuple[VapourNote, ...]]:
    molecules = [molecule_from_smiles(text) for text in smiles]
    return real_vapour(molecules, [vapour_pressure(molecule) for molecule in molecules])


def systems(*smiles: str, method: str = "unifac") -> tuple[System, System]:
    """The same liquid under an ideal and under a real vapour."""
    molecules = [molecule_from_smiles(text) for text in smiles]
    lines = tuple(vapour_pressure(molecule) for molecule in molecules)
    activity = activity_model([assign(m, method).counts for m in molecules], method)
    return System(activity, lines), System(activity, lines, real_vapour(molecules, lines)[0])
