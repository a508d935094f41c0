"""Which vapour pressure a molecule gets: published coefficients, then an estimate."""

from typing import TYPE_CHECKING

from groups.errors import NoVapourPressureError
from groups.pure.published import published_vapour_pressure
from groups.pure.saturation import VapourPressure

if TYPE_CHECKING:
    from groups.structure.molecule import Molecule


def registry_number(molecule: "Molecule") -> str | None:
    """The CAS number of a molecule, looked up by its structure where it does not carry one."""
    if molecule.cas is not None:
        return molecule.cas
    from groups.structure.identify import name_and_cas

    return name_and_cas(molecule.canonical_smiles)[1]


def vapour_pressure(
    molecule: "Molecule", *, temperature_K: tuple[float, float] | None = None
) -> VapourPressure:
    """The best vapour-pressure curve there is for a molecule."""
    cas = registry_number(molecule)
    published = None if cas is None else published_vapour_pressure(cas, temperature_K)
    if published is not None:
        return published
    raise NoVapourPressureError(
        f"No source gives a vapour pressure for {molecule.canonical_smiles}.",
        smiles=molecule.canonical_smiles,
    )
