"""Solubility of a gas in a solvent by the equation of state."""

import re
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.confidence import Confidence, Reason, graded
from groups.confidence.calibration import TableWeight
from groups.confidence.confidence import Grade
from groups.errors import FractionSumError, MixwrightError, OutOfRangeError, ShapeError
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.prediction.state_equation import (
    EQUATION_OF_STATE,
    UNCALIBRATED,
    USED,
    ignored_vapour_pressures,
    state_equation,
)
from groups.prediction.vapours import noted
from groups.structure.molecule import Molecule
from groups.vapour.psrk import gas_solubility as solve_solubility
from groups.vapour.psrk import henry_constants, psrk_notes

MOST_TEMPERATURES = 200


@dataclass(frozen=True, slots=True)
class GasSolubilityAnswer:
    """Henry's constants and saturated solutions of one gas over temperature; NaN where none.

    `liquid` and `vapour` hold the gas first, then the solvents.
    """

    gas: Molecule
    solvents: tuple[Molecule, ...]
    solvent_mole_fractions: FloatArray  # (n_solvents,), free of gas
    method: str
    methods_used: tuple[TableWeight, ...]
    temperature_K: FloatArray  # (n,)
    pressure_kPa: float
    henry_kPa: FloatArray  # (n,)
    solvent_pressure_kPa: FloatArray  # (n,) bubble pressure of the solvent alone
    gas_mole_fraction: FloatArray  # (n,) in the liquid
    liquid: FloatArray  # (n, 1 + n_solvents)
    vapour: FloatArray  # (n, 1 + n_solvents)
    failure: tuple[str | None, ...]
    confidence: Confidence


def gas_solubility(
    gas: Component,
    solvents: Sequence[Component],
    *,
    temperature_K: ArrayLike,
    pressure_kPa: float = 101.325,
    solvent_mole_fractions: ArrayLike | None = None,
) -> GasSolubilityAnswer:
    """Henry's constant of a gas, and how much of it dissolves at a total pressure.

    Parameters
    ----------
    gas : Component
    solvents : sequence of Component
    temperature_K : float or array_like of shape (n,)
        At most 200, below the critical temperature of the solvent.
    pressure_kPa : float
        Total pressure, vapour of the solvent included.
    solvent_mole_fractions : array_like of shape (n_solvents,), optional
        Free of gas; a single solvent may leave them out.

    Returns
    -------
    GasSolubilityAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If the equation lacks a group, a parameter or a critical point.

    Source
    ------
    See `groups.vapour.psrk.henry`.
    """
    components = [gas, *solvents]
    molecules = [component.molecule for component in components]
    if not solvents:
        raise ShapeError(
            "There is no solvent.", cure="Give one or more 'solvents'.", field="solvents"
        )
    T, P = check_temperatures(temperature_K), float(check_pressures(pressure_kPa)[0])
    if T.ndim > 1 or len(T) > MOST_TEMPERATURES:
        raise ShapeError(
            f"There may be a list of 1 to {MOST_TEMPERATURES} temperatures. Got {T.size} instead.",
            cure="Ask for fewer temperatures at once.",
            field="temperature_K",
        )
    fractions = _solvent_fractions(solvent_mole_fractions, len(solvents))
    try:
        check_components(molecules, least=2)
        model, notes = state_equation(molecules)
    except MixwrightError as error:
        error.field = _by_role(error.field)
        raise
    base = np.concatenate([[0.0], fractions])
    law = henry_constants(model, T, base)
    found = solve_solubility(model, 0, T, P, base)
    reasons = [UNCALIBRATED, *noted([*notes, *psrk_notes(model, found, T)])]
    reasons += [*ignored_vapour_pressures(components), *_failures(found.failure)]
    return GasSolubilityAnswer(
        gas.molecule,
        tuple(molecules[1:]),
        fractions,
        EQUATION_OF_STATE,
        USED,
        T,
        P,
        law.henry_kPa[:, 0],
        law.solvent_pressure_kPa,
        found.gas_fraction,
        found.liquid,
        found.vapour,
        found.failure,
        graded(reasons, ()),
    )


def _solvent_fractions(given: ArrayLike | None, n: int) -> FloatArray:
    if given is None and n > 1:
        raise ShapeError(
            f"A solvent of {n} components needs 'solvent_mole_fractions'.",
            cure="Give one mole fraction for each solvent; only a single one may leave them out.",
            field="solvent_mole_fractions",
        )
    try:
        return np.asarray(check_fractions([1.0] if given is None else given, n)[0])
    except (ShapeError, FractionSumError, OutOfRangeError) as error:
        place = error.field or ""
        error.field = place.replace("mole_fractions", "solvent_mole_fractions")
        raise


def _by_role(field: str | None) -> str | None:
    """The first component is the gas, the others are the solvents."""
    found = re.fullmatch(r"components\[(\d+)\](.*)", field or "")
    if found is None:
        return "solvents" if field == "components" else field
    index = int(found[1])
    return f"gas{found[2]}" if index == 0 else f"solvents[{index - 1}]{found[2]}"


def _failures(failure: Sequence[str | None]) -> list[Reason]:
    known = [text for text in failure if text is not None]
    if not known:
        return []
    text = f"{len(known)} of {len(failure)} temperatures have no saturated solution: {known[0]}."
    cap: Grade = "none" if len(known) == len(failure) else "low"
    return [Reason("not_converged", text, "gas solubility", cap)]
