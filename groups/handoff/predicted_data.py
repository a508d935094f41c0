"""The data that a fit stands on, as a ThermoML document marked as predicted."""

from collections.abc import Sequence

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium import LiquidModel, System
from groups.equilibrium import diagram as solve_diagram
from groups.handoff.fit_door import FitAnswer
from groups.handoff.thermoml import PredictedTable, activity_table, boiling_table, write_thermoml
from groups.structure.molecule import Molecule

BOILING_POINTS = 41


def predicted_thermoml(answer: FitAnswer) -> str:
    """Activity coefficients over the grid of a fit, and a pair's boiling states at its pressure.

    Parameters
    ----------
    answer : FitAnswer

    Returns
    -------
    str
        ThermoML.
    """
    tables = [_activities(answer)]
    if answer.pressure_kPa is not None and answer.vapour_pressures and len(answer.components) == 2:
        tables.append(_boiling(answer, answer.pressure_kPa))
    title = f"Predicted properties of {_named(answer.components)} by {answer.method}"
    return write_thermoml(answer.components, tables, title)


def _activities(answer: FitAnswer) -> PredictedTable:
    """Every pair's grid, as liquids of the whole mixture."""
    n, x1 = len(answer.components), answer.compositions
    pairs = [(i, j) for i in range(n) for j in range(i + 1, n)]
    x = np.zeros((len(pairs), len(x1), n))
    for k, (i, j) in enumerate(pairs):
        x[k, :, i], x[k, :, j] = x1, 1.0 - x1
    rows: FloatArray = np.unique(x.reshape(-1, n), axis=0)
    T = np.repeat(answer.temperatures_K, len(rows))
    states = np.tile(rows, (len(answer.temperatures_K), 1))
    gamma = np.exp(answer.prediction.ln_gamma(T, states))
    return activity_table(T, states, gamma, answer.method, description=answer.weighting)


def _boiling(answer: FitAnswer, pressure_kPa: float) -> PredictedTable:
    liquid: LiquidModel = answer.prediction
    lines = answer.vapour_pressures
    assert lines is not None
    found = solve_diagram(
        System(liquid, lines), "Txy", pressure_kPa=pressure_kPa, points=BOILING_POINTS
    )
    kept = found.stable
    liquids = np.column_stack([found.x1, 1.0 - found.x1])[kept]
    vapours = np.column_stack([found.y1, 1.0 - found.y1])[kept]
    return boiling_table(
        found.temperature_K[kept],
        found.pressure_kPa[kept],
        liquids,
        vapours,
        answer.method,
        description="ideal vapour",
    )


def _named(molecules: Sequence[Molecule]) -> str:
    return " / ".join(one.name or one.canonical_smiles for one in molecules)
