"""Which vapour pressure a molecule gets: the caller's own, a published one, or an estimate."""

from dataclasses import replace

from groups.errors import NoVapourPressureError
from groups.pure.constants import PureConstants, constants
from groups.pure.estimate import estimated_vapour_pressure
from groups.pure.published import published_vapour_pressure
from groups.pure.registry import registry_number
from groups.pure.saturation import VapourPressure
from groups.pure.user import UserVapourPressure, user_vapour_pressure
from groups.structure.molecule import Molecule


def vapour_pressure(
    molecule: Molecule,
    user: UserVapourPressure | None = None,
    temperature_K: tuple[float, float] | None = None,
) -> VapourPressure:
    """The best vapour-pressure curve there is for a molecule.

    In this order: the caller's own; published coefficients; a published boiling point with a
    corresponding-states equation; an estimate from structure alone.

    Parameters
    ----------
    molecule : Molecule
    user : AntoineInput, Dippr101Input or PointsInput, optional
        The caller's own, which is always taken.
    temperature_K : tuple of float, optional
        Lowest and highest temperature needed, K; 250 to 450 K where not given. Among published
        collections it decides which one spans the need.

    Returns
    -------
    VapourPressure

    Raises
    ------
    InvalidInputError
        The caller's own data are not those of a liquid.
    NoVapourPressureError
        No source describes the molecule.

    Source
    ------
    Named in the `citation` of what is returned.
    """
    if user is not None:
        return _with_critical_point(user_vapour_pressure(user), constants(molecule))
    cas = registry_number(molecule)
    published = None if cas is None else published_vapour_pressure(cas, temperature_K)
    if published is not None:
        if published.critical_temperature_K is not None:
            return published
        return _with_critical_point(published, constants(molecule))
    estimated = estimated_vapour_pressure(molecule.mol, constants(molecule))
    if estimated is not None:
        return estimated
    raise NoVapourPressureError(
        f"No published vapour pressure or boiling point of {molecule.canonical_smiles} is known "
        "here, and the group-contribution methods do not cover it.",
        smiles=molecule.canonical_smiles,
    )


def _with_critical_point(curve: VapourPressure, known: PureConstants) -> VapourPressure:
    """Fill in the critical point, which tells near-critical and supercritical temperatures."""
    Tc, Pc = known.critical_temperature_K, known.critical_pressure_kPa
    return replace(
        curve,
        critical_temperature_K=None if Tc is None else Tc.value,
        critical_pressure_kPa=None if Pc is None else Pc.value,
    )
