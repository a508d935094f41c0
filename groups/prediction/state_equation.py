"""Bubble points, dew points and flashes by the equation of state, gases included."""

from collections.abc import Callable, Sequence
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.confidence import Reason, graded
from groups.confidence.calibration import TableWeight
from groups.errors import MixwrightError
from groups.prediction.answers import PhasePointAnswer
from groups.prediction.component import Component
from groups.prediction.phases import PhaseAnswer
from groups.prediction.vapours import BY_EQUATION_OF_STATE, noted
from groups.structure.molecule import Molecule
from groups.vapour import VapourNote
from groups.vapour.psrk import (
    EosFlash,
    EosStates,
    PsrkModel,
    psrk_bubble_pressure,
    psrk_bubble_temperature,
    psrk_dew_pressure,
    psrk_dew_temperature,
    psrk_flash,
    psrk_model,
    psrk_notes,
)

EQUATION_OF_STATE = "psrk"
USED = (TableWeight(EQUATION_OF_STATE, 1.0, "the predictive equation of state, for both phases"),)
_Solver = Callable[[PsrkModel, ArrayLike, ArrayLike], EosStates]
_SOLVERS: dict[str, tuple[_Solver, _Solver]] = {
    "bubble": (psrk_bubble_pressure, psrk_bubble_temperature),
    "dew": (psrk_dew_pressure, psrk_dew_temperature),
}
UNCALIBRATED = Reason(
    "equation_of_state_without_interval",
    "No interval is calibrated for the equation of state; its bubble pressures are commonly within "
    "some per cent for the pairs its table was fitted to, and far off for others.",
    EQUATION_OF_STATE,
    "moderate",
)


def state_equation(molecules: Sequence[Molecule]) -> tuple[PsrkModel, tuple[VapourNote, ...]]:
    """The equation of state of a mixture; what it lacks is laid to the components.

    Parameters
    ----------
    molecules : sequence of Molecule

    Returns
    -------
    tuple of PsrkModel and the notes of its constants

    Raises
    ------
    PredictionError
        If a molecule has no groups, no parameter or no critical point.
    """
    try:
        return psrk_model(molecules)
    except MixwrightError as error:
        smiles = getattr(error, "smiles", None)
        for index, molecule in enumerate(molecules):
            if molecule.canonical_smiles == smiles:
                error.field = f"components[{index}]"
        raise


def saturation_by_state_equation(
    kind: Literal["bubble", "dew"],
    components: Sequence[Component],
    fractions: FloatArray,
    *,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> PhasePointAnswer:
    """A bubble or dew point by the equation of state.

    Parameters
    ----------
    kind : {"bubble", "dew"}
    components : sequence of Component
    fractions : array of shape (1, n_components)
    temperature_K, pressure_kPa : float or None
        Exactly one of them.

    Returns
    -------
    PhasePointAnswer

    Raises
    ------
    PredictionError
        If the equation lacks a group, a parameter or a critical point.
    """
    molecules = tuple(component.molecule for component in components)
    model, notes = state_equation(molecules)
    by_temperature, by_pressure = _SOLVERS[kind]
    if temperature_K is not None:
        found = by_temperature(model, temperature_K, fractions)
    else:
        found = by_pressure(model, pressure_kPa or np.nan, fractions)
    good = bool(found.converged[0])
    fraction = 0.0 if kind == "bubble" else 1.0
    phases = (
        PhaseAnswer("liquid", 1.0 - fraction, found.liquid[0]),
        PhaseAnswer("vapour", fraction, found.vapour[0]),
    )
    notes = (*notes, *psrk_notes(model, found, found.temperature_K))
    return _answer(
        components,
        found,
        fraction,
        np.exp(found.ln_k[0] - found.ln_k[0, -1]),
        bool(found.stable[0]) if good else None,
        phases if good else (),
        notes,
    )


def flash_by_state_equation(
    components: Sequence[Component],
    fractions: FloatArray,
    temperature_K: float,
    pressure_kPa: float,
) -> PhasePointAnswer:
    """A flash at temperature and pressure by the equation of state.

    Parameters
    ----------
    components : sequence of Component
    fractions : array of shape (1, n_components)
        Of the feed.
    temperature_K, pressure_kPa : float

    Returns
    -------
    PhasePointAnswer

    Raises
    ------
    PredictionError
        If the equation lacks a group, a parameter or a critical point.
    """
    molecules = tuple(component.molecule for component in components)
    model, notes = state_equation(molecules)
    found = psrk_flash(model, temperature_K, pressure_kPa, fractions)
    notes = (*notes, *psrk_notes(model, found, found.temperature_K))
    liquids = found.phase[0] == "two liquids"
    x, y, share = found.liquid[0], found.vapour[0], float(found.vapour_fraction[0])
    phases = []
    if np.isfinite(x).all():
        phases.append(PhaseAnswer("liquid", 1.0 - share, x))
    if np.isfinite(y).all():
        phases.append(PhaseAnswer("liquid" if liquids else "vapour", share, y))
    ratio = np.full_like(x, np.nan)
    if len(phases) == 2 and not liquids:
        K = np.divide(y, x, out=np.full_like(x, np.nan), where=x > 0.0)
        ratio = K / K[-1]
    return _answer(
        components,
        found,
        0.0 if liquids else share,
        ratio,
        None if found.phase[0] in ("vapour", "unknown") else not liquids,
        tuple(phases),
        notes,
    )


def _answer(
    components: Sequence[Component],
    found: EosStates | EosFlash,
    vapour_fraction: float,
    ratio: FloatArray,
    stable: bool | None,
    phases: tuple[PhaseAnswer, ...],
    notes: Sequence[VapourNote],
) -> PhasePointAnswer:
    liquids = [phase for phase in phases if phase.kind == "liquid"]
    vapours = [phase for phase in phases if phase.kind == "vapour"]
    nothing = np.full(len(components), np.nan)
    reasons = [UNCALIBRATED, *noted(notes), *ignored_vapour_pressures(components)]
    if found.failure[0] is not None:
        text = f"No state was found: {found.failure[0]}."
        reasons.append(Reason("not_converged", text, "state", "none"))
    return PhasePointAnswer(
        tuple(component.molecule for component in components),
        EQUATION_OF_STATE,
        USED,
        float(found.temperature_K[0]),
        float(found.pressure_kPa[0]),
        vapour_fraction,
        _together(liquids) if liquids else nothing,
        vapours[0].mole_fractions if vapours else nothing,
        nothing,
        nothing,
        ratio,
        stable,
        found.failure[0],
        (),
        None,
        phases,
        BY_EQUATION_OF_STATE,
        graded(reasons, ()),
    )


def _together(liquids: Sequence[PhaseAnswer]) -> FloatArray:
    """All liquids as one composition; equal shares where none has an amount."""
    shares = np.array([liquid.fraction for liquid in liquids])
    shares = shares if shares.sum() > 0.0 else np.ones(len(liquids))
    every = np.array([liquid.mole_fractions for liquid in liquids])
    mixed: FloatArray = shares @ every / shares.sum()
    return mixed


def ignored_vapour_pressures(components: Sequence[Component]) -> list[Reason]:
    """A reason a vapour pressure of the caller's own, which the equation does not use.

    Parameters
    ----------
    components : sequence of Component

    Returns
    -------
    list of Reason
    """
    return [
        Reason(
            "own_vapour_pressure_not_used",
            "The equation of state has vapour pressures of its own; the one given is not used.",
            component.molecule.name or component.molecule.canonical_smiles,
            "moderate",
        )
        for component in components
        if component.vapour_pressure is not None
    ]
