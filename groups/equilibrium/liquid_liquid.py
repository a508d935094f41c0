"""Liquids alone: into which does a liquid split, and how do components distribute between them?"""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.equilibrium.conditions import checked_fractions, checked_temperature, paired
from groups.equilibrium.flash import flash_states
from groups.equilibrium.flash_result import Flash
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.system import LiquidModel


def liquid_flash(
    liquid: LiquidModel, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> Flash:
    """Stable liquids of mixtures at given temperatures, as if no vapour could form.

    Parameters
    ----------
    liquid : LiquidModel
        Of up to twenty components or so.
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        With pressure NaN and no vapour.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 1-19 and 21-40.
    """
    z = checked_fractions(mole_fractions, liquid.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    return flash_states(PhaseProblem.of_liquid(liquid, T, z))


@dataclass(frozen=True, slots=True)
class Distribution:
    """Distribution between two liquids of n mixtures.

    Attributes
    ----------
    liquids : Flash
    coefficient : array of shape (n, n_components)
        Mole fraction in the second liquid over that in the first (the liquid poorest in the first
        component), also of components that are absent, at infinite dilution; NaN where the mixture
        does not split in exactly two.
    """

    liquids: Flash
    coefficient: FloatArray


def distribution_coefficients(
    liquid: LiquidModel, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> Distribution:
    """Distribution coefficients of every component between the two liquids of a mixture.

    Parameters
    ----------
    liquid : LiquidModel
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. A component with zero is a solute at infinite
        dilution.

    Returns
    -------
    Distribution

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Equal activities: x''_i / x'_i = gamma'_i / gamma''_i (Prausnitz, Lichtenthaler & de Azevedo
    (1999), section 6.13).
    """
    z = checked_fractions(mole_fractions, liquid.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    found = liquid_flash(liquid, T, z)
    coefficient = np.full_like(z, np.nan)
    two = np.isfinite(found.liquids).all(axis=2).sum(axis=1) == 2
    rows = np.flatnonzero(two & found.converged)
    if len(rows):
        pair = found.liquids[rows, :2].reshape(-1, z.shape[1])
        ln_gamma = liquid.ln_gamma(np.repeat(T[rows], 2), pair).reshape(len(rows), 2, -1)
        coefficient[rows] = np.exp(ln_gamma[:, 0] - ln_gamma[:, 1])
    return Distribution(found, coefficient)
