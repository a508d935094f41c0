"""Which vapour stands over a mixture: ideal, or real by the virial equation, and why.

The choice is made once for a mixture at its pressure or temperature, over dilute and even liquids
alike, so that neighbouring compositions and different questions get the same vapour.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal, get_args

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.confidence import Reason
from groups.equilibrium import System, bubble_pressure, bubble_temperature
from groups.errors import InvalidInputError
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule
from groups.vapour import VapourNote, VirialVapour, choose_vapour, real_vapour

VapourAsked = Literal["auto", "ideal", "virial"]
VapourKind = Literal["ideal", "virial", "psrk"]
#: Share of all other components together in the dilute liquids that are judged.
DILUTE = 0.1


@dataclass(frozen=True, slots=True)
class VapourUsed:
    """The vapour of an answer and why it was taken.

    Attributes
    ----------
    kind : {"ideal", "virial", "psrk"}
    reason : str
        In a chemist's words.
    judged : bool
        True where the cost of an ideal vapour was computed, and not assumed.
    """

    kind: VapourKind
    reason: str
    judged: bool = False


ASSUMED_IDEAL = VapourUsed("ideal", "asked for: an ideal vapour")
BY_EQUATION_OF_STATE = VapourUsed("psrk", "liquid and vapour by one equation of state", judged=True)
_ALONE = VapourUsed(
    "ideal", "a single component boils at its vapour pressure, whatever its vapour is like"
)


@dataclass(frozen=True, slots=True)
class ChosenVapour:
    """The system with its vapour, what was chosen, and what is to be told about it."""

    system: System
    used: VapourUsed
    notes: tuple[VapourNote, ...] = ()


def check_vapour(asked: str) -> None:
    """Refuse a vapour that does not exist."""
    if asked not in get_args(VapourAsked):
        raise InvalidInputError(
            f"There is no vapour '{asked}'. Allowed: {', '.join(get_args(VapourAsked))}.",
            cure="Leave it out: 'auto' takes the real vapour where it is needed.",
            field="vapour",
        )


def chosen_vapour(
    system: System,
    molecules: Sequence[Molecule],
    lines: Sequence[VapourPressure],
    asked: VapourAsked,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    present: Sequence[bool] | None = None,
) -> ChosenVapour:
    """The system under the vapour asked for, or under the one that the mixture needs.

    Parameters
    ----------
    system : System
        With an ideal vapour.
    molecules : sequence of Molecule
    lines : sequence of VapourPressure
    asked : {"auto", "ideal", "virial"}
    temperature_K, pressure_kPa : float or None
        What is fixed; the pressure counts where both are given.
    present : sequence of bool, optional
        Which components the mixture asked about holds at all; the others have no say.

    Returns
    -------
    ChosenVapour

    Raises
    ------
    InvalidInputError
        If there is no such vapour.
    """
    check_vapour(asked)
    if asked == "ideal":
        return ChosenVapour(system, ASSUMED_IDEAL)
    there = np.ones(len(molecules), bool) if present is None else np.array(present, dtype=bool)
    if there.sum() == 1:
        return ChosenVapour(system, _ALONE)
    model, notes = real_vapour(molecules, lines)
    real = System(system.activity, system.vapour_pressures, vapour=model)
    if asked == "virial":
        used = VapourUsed("virial", "asked for: the virial equation, with dimers of acids", True)
        return ChosenVapour(real, used, notes)
    states = _judged_states(system, there, temperature_K, pressure_kPa)
    if states is None:
        reason = "no boiling state was found at which a real vapour could be judged"
        return ChosenVapour(system, VapourUsed("ideal", reason))
    choice = choose_vapour(model, *states)
    if choice.kind == "ideal":
        return ChosenVapour(system, VapourUsed("ideal", choice.reason, True))
    # Beyond the range of the virial equation it still beats an ideal vapour; the answer says so.
    return ChosenVapour(real, VapourUsed("virial", choice.reason, True), notes)


def vapour_model(system: System) -> VirialVapour | None:
    """The virial equation of a system; None where its vapour is ideal."""
    return system.vapour if isinstance(system.vapour, VirialVapour) else None


def noted(notes: Sequence[VapourNote]) -> list[Reason]:
    """Remarks of the vapour as reasons of the confidence."""
    return [Reason(note.code, note.message, note.subject, note.cap) for note in notes]


def not_converged_under_real_vapour() -> VapourUsed:
    """What stands beside an ideal vapour that was taken because the real one gave no state."""
    return VapourUsed(
        "ideal",
        "A real vapour is called for, but with it no state was found here; an ideal one is used. "
        "The equation of state (method psrk) may reach this state.",
    )


def _judged_states(
    system: System,
    present: BoolArray,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> tuple[FloatArray, FloatArray, FloatArray] | None:
    """T, P and vapours over dilute and even liquids; None where none of them boils."""
    n = int(present.sum())
    others = (np.ones((n, n)) - np.eye(n)) / (n - 1)
    dilute = (1.0 - DILUTE) * np.eye(n) + DILUTE * others
    liquids = np.zeros((n + 1, system.n_components))
    liquids[:, present] = np.vstack([dilute, np.full((1, n), 1.0 / n)])
    if pressure_kPa is not None:
        states = bubble_temperature(system, pressure_kPa, liquids)
    else:
        states = bubble_pressure(system, np.array([temperature_K]), liquids)
    good = states.converged
    if not good.any():
        return None
    return states.temperature_K[good], states.pressure_kPa[good], states.vapour[good]
