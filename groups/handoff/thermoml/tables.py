"""Predicted data as tables that ThermoML can hold: properties, what is fixed, what varies."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.errors import ShapeError
from groups.handoff.thermoml.vocabulary import (
    ACTIVITY_COEFFICIENT,
    EXCESS_ENTHALPY,
    MOLE_FRACTION,
    PRESSURE,
    TEMPERATURE,
)


@dataclass(frozen=True, slots=True)
class Column:
    """One quantity over all points: what it is, of which component, in which phase."""

    quantity: str
    values: FloatArray
    component: int | None = None
    phase: str | None = None
    standard_uncertainty: FloatArray | None = None


@dataclass(frozen=True, slots=True)
class PredictedTable:
    """Points of one mixture.

    Attributes
    ----------
    properties, variables : tuple of Column
        What was predicted, and at which states; all of one length.
    fixed : tuple of Column
        Of one value each.
    phases : tuple of str
    method : str
        Published name of the method.
    description : str
    """

    properties: tuple[Column, ...]
    variables: tuple[Column, ...]
    fixed: tuple[Column, ...]
    phases: tuple[str, ...]
    method: str
    description: str

    def __post_init__(self) -> None:
        """Refuse columns of different lengths."""
        lengths = {len(column.values) for column in (*self.properties, *self.variables)}
        if len(lengths) != 1 or any(len(column.values) != 1 for column in self.fixed):
            raise ShapeError("The columns of a table must hold one number for each point.")


def boiling_table(
    temperature_K: npt.ArrayLike,
    pressure_kPa: npt.ArrayLike,
    liquid: npt.ArrayLike,
    vapour: npt.ArrayLike,
    method: str,
    *,
    description: str = "",
) -> PredictedTable:
    """Boiling states of a mixture; a temperature or pressure that is constant becomes a constraint.

    Parameters
    ----------
    temperature_K, pressure_kPa : array_like of shape (n,)
        K and kPa.
    liquid, vapour : array_like of shape (n, n_components)
        Mole fractions.
    method : str
        Published name of the method.
    description : str
        What else should be known of it.

    Returns
    -------
    PredictedTable
        Points that are not finite are left out.

    Raises
    ------
    ShapeError
        If the arrays do not fit one another.
    """
    T, P = (np.asarray(values, dtype=np.float64) for values in (temperature_K, pressure_kPa))
    x, y = (np.asarray(values, dtype=np.float64) for values in (liquid, vapour))
    known = np.isfinite(T) & np.isfinite(P) & np.isfinite(x).all(axis=1) & np.isfinite(y).all(1)
    T, P, x, y = T[known], P[known], x[known], y[known]
    isothermal = len(T) > 0 and bool(np.ptp(T) == 0.0)
    composition = tuple(Column(MOLE_FRACTION, x[:, k], k, "Liquid") for k in range(x.shape[1] - 1))
    gas = tuple(Column(MOLE_FRACTION, y[:, k], k, "Gas") for k in range(y.shape[1] - 1))
    if isothermal:
        main, held = Column(PRESSURE, P, None, "Liquid"), Column("Temperature, K", T[:1])
    else:
        main, held = Column(TEMPERATURE, T, None, "Liquid"), Column("Pressure, kPa", P)
    constant = len(P) > 0 and bool(np.ptp(P) == 0.0)
    fixed: tuple[Column, ...] = (held,) if isothermal else ()
    variables = composition
    if not isothermal:
        fixed = (Column("Pressure, kPa", P[:1]),) if constant else ()
        variables = composition if constant else (*composition, held)
    return PredictedTable((main, *gas), variables, fixed, ("Liquid", "Gas"), method, description)


def activity_table(
    temperature_K: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
    gamma: npt.ArrayLike,
    method: str,
    *,
    u_ln_gamma: npt.ArrayLike | None = None,
    description: str = "",
) -> PredictedTable:
    """Activity coefficients, symmetric convention (pure liquid as standard state).

    Parameters
    ----------
    temperature_K : array_like of shape (n,)
    mole_fractions, gamma : array_like of shape (n, n_components)
    method : str
    u_ln_gamma : array_like that broadcasts to (n, n_components), optional
        Standard uncertainty of ln gamma.
    description : str

    Returns
    -------
    PredictedTable

    Raises
    ------
    ShapeError
        If the arrays do not fit one another.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    x, values = (np.asarray(a, dtype=np.float64) for a in (mole_fractions, gamma))
    u = None if u_ln_gamma is None else values * np.broadcast_to(u_ln_gamma, values.shape)
    properties = tuple(
        Column(ACTIVITY_COEFFICIENT, values[:, k], k, "Liquid", None if u is None else u[:, k])
        for k in range(values.shape[1])
    )
    return PredictedTable(properties, _states(T, x), (), ("Liquid",), method, description)


def enthalpy_table(
    temperature_K: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
    excess_enthalpy_J_mol: npt.ArrayLike,
    method: str,
    *,
    description: str = "",
) -> PredictedTable:
    """Excess molar enthalpies.

    Parameters
    ----------
    temperature_K : array_like of shape (n,)
    mole_fractions : array_like of shape (n, n_components)
    excess_enthalpy_J_mol : array_like of shape (n,)
    method, description : str

    Returns
    -------
    PredictedTable

    Raises
    ------
    ShapeError
        If the arrays do not fit one another.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    x = np.asarray(mole_fractions, dtype=np.float64)
    h = np.asarray(excess_enthalpy_J_mol, dtype=np.float64) / 1000.0
    properties = (Column(EXCESS_ENTHALPY, h, None, "Liquid"),)
    return PredictedTable(properties, _states(T, x), (), ("Liquid",), method, description)


def _states(T: FloatArray, x: FloatArray) -> tuple[Column, ...]:
    fractions: Sequence[Column] = [
        Column(MOLE_FRACTION, x[:, k], k, "Liquid") for k in range(x.shape[1] - 1)
    ]
    return (Column("Temperature, K", T), *fractions)
