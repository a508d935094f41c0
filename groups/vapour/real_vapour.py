"""Build the real vapour of a mixture, and tell what it rests on."""

from collections.abc import Sequence

import numpy as np
from rdkit import Chem

from groups.arrays import FloatArray
from groups.equilibrium.system import SaturationLine
from groups.errors import ShapeError
from groups.structure.functional import associates_in_vapour
from groups.structure.molecule import Molecule
from groups.vapour.association import dimerisation
from groups.vapour.cross_coefficients import pair_constants
from groups.vapour.gas_constants import GasConstants, gas_constants
from groups.vapour.label import label
from groups.vapour.liquid_volume import liquid_volume
from groups.vapour.note import VapourNote
from groups.vapour.polar_terms import PolarTerms
from groups.vapour.virial_vapour import VirialVapour

#: Stands in where a component has no constants; its coefficients are then taken as zero.
_NOBODY = GasConstants(500.0, 4000.0, 0.3, 300.0, PolarTerms(0.0, 0.0, ""), (), ())


def real_vapour(
    molecules: Sequence[Molecule], vapour_pressures: Sequence[SaturationLine]
) -> tuple[VirialVapour, tuple[VapourNote, ...]]:
    """The virial equation, with dimers of carboxylic acids, for a mixture.

    Parameters
    ----------
    molecules : sequence of Molecule
        n_components.
    vapour_pressures : sequence of SaturationLine
        The lines that the system uses, in the same order.

    Returns
    -------
    model : VirialVapour
        For `System(activity, vapour_pressures, vapour=model)`.
    notes : tuple of VapourNote
        Sources, estimated constants, components without constants (treated as ideal).

    Raises
    ------
    ShapeError
        If there are not as many vapour pressures as molecules.

    Source
    ------
    `groups.vapour.virial_vapour`, `second_virial`, `association`, `liquid_volume`.
    """
    if len(molecules) != len(vapour_pressures):
        raise ShapeError(
            f"There are {len(molecules)} molecules for {len(vapour_pressures)} vapour pressures.",
            cure="Give one vapour pressure for each molecule.",
            field="vapour_pressures",
        )
    gases = [gas_constants(molecule) for molecule in molecules]
    known = np.array([gas is not None for gas in gases], dtype=bool)
    filled = [gas or _NOBODY for gas in gases]
    dimers = tuple(dimerisation(m.mol, m.canonical_smiles) for m in molecules)
    volumes = tuple(
        None if gas is None else liquid_volume(molecule, gas)
        for molecule, gas in zip(molecules, gases, strict=True)
    )
    model = VirialVapour(
        pairs=pair_constants(filled),
        dimerisations=dimers,
        known=known,
        critical_temperature_K=np.array([g.critical_temperature_K if g else np.nan for g in gases]),
        critical_pressure_kPa=np.array([g.critical_pressure_kPa if g else np.nan for g in gases]),
        saturation=tuple(vapour_pressures),
        liquid_volumes=volumes,
    )
    notes: list[VapourNote] = []
    for i, molecule in enumerate(molecules):
        notes += _notes(molecule, gases[i], model, i)
    return model, tuple(notes)


def _notes(
    molecule: Molecule, gas: GasConstants | None, model: VirialVapour, i: int
) -> list[VapourNote]:
    name = label(molecule)
    if gas is None:
        text = f"No critical constants of {name} are known here; its vapour is taken as ideal."
        return [VapourNote("vapour_constants_missing", text, name, "moderate")]
    found = [_virial_note(name, gas)]
    if gas.estimated:
        text = f"Estimated for the vapour of {name}: {', '.join(gas.estimated)}."
        found.append(VapourNote("vapour_constants_estimated", text, name, "moderate"))
    volume = model.liquid_volumes[i]
    if volume is not None and volume.estimated:
        text = f"The liquid volume of {name}, for the Poynting factor: {volume.source}."
        found.append(VapourNote("liquid_volume_estimated", text, name))
    return found + _dimer_notes(molecule.mol, name, model, i)


def _virial_note(name: str, gas: GasConstants) -> VapourNote:
    text = f"Second virial coefficient of {name}: Tsonopoulos (1974); {gas.polar.basis}."
    return VapourNote("second_virial_source", text, name)


def _dimer_notes(mol: Chem.Mol, name: str, model: VirialVapour, i: int) -> list[VapourNote]:
    constants = model.dimerisations[i]
    if constants is None:
        if not associates_in_vapour(mol):
            return []
        text = f"{name} associates in the vapour in a way that is not described here."
        return [VapourNote("vapour_association_missing", text, name, "low")]
    if not constants.estimated:
        text = f"{name} dimerises in the vapour; its constant: {constants.source}."
        return [VapourNote("vapour_dimers_included", text, name)]
    text = f"{name} dimerises in the vapour; its constant is taken from butanoic acid."
    return [VapourNote("vapour_dimers_estimated", text, name, "moderate")]


def range_notes(
    model: VirialVapour,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    vapour: FloatArray,
) -> tuple[VapourNote, ...]:
    """Say where the virial equation is used beyond its range.

    Parameters
    ----------
    model : VirialVapour
    temperature_K, pressure_kPa : array of shape (n,)
        K, kPa. Points with NaN are left out.
    vapour : array of shape (n, n_components)

    Returns
    -------
    tuple of VapourNote
        Empty within the range.

    Source
    ------
    Prausnitz, Lichtenthaler & de Azevedo (1999), section 5.3: P <= (T/2) sum y Pc / sum y Tc.
    """
    fit = np.isfinite(temperature_K) & np.isfinite(pressure_kPa) & np.isfinite(vapour).all(axis=1)
    if not fit.any():
        return ()
    T, P, y = temperature_K[fit], pressure_kPa[fit], vapour[fit]
    limit = model.highest_pressure(T, y)
    worst = int(np.argmax(P / limit))
    if P[worst] <= limit[worst]:
        return ()
    text = (
        f"At {T[worst]:.1f} K the virial equation holds up to about {limit[worst]:.0f} kPa, half "
        f"the critical density; it is used at {P[worst]:.0f} kPa. Use the equation of state (psrk)."
    )
    return (VapourNote("virial_beyond_range", text, "vapour", "low"),)
