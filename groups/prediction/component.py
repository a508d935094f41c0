"""A component of a mixture as the doors take it."""

from dataclasses import dataclass

from groups.pure import UserVapourPressure
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class Component:
    """A molecule and, if the user has one, its vapour pressure."""

    molecule: Molecule
    vapour_pressure: UserVapourPressure | None = None
