"""Relative volatility of the components of boiling liquids."""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.states import States
from groups.equilibrium.system import System


def relative_volatility(system: System, states: States, reference: int = -1) -> FloatArray:
    """K_i over K of the reference component, K = y/x, exact also where a component is absent.

    Parameters
    ----------
    system : System
    states : States
        n vapour-liquid states, by `bubble_pressure`, `dew_temperature` and so on.
    reference : int
        Index of the component that is set to one; the last by default.

    Returns
    -------
    array of shape (n, n_components)
        NaN where a state did not converge.

    Raises
    ------
    IndexError
        If there is no such component.

    Source
    ------
    Smith, Van Ness & Abbott (2005), section 10.5, equation 10.8 and modified Raoult's law:
    K_i P = gamma_i Psat_i exp(-correction_i), which has a limit at x_i = 0.
    """
    good = states.converged
    alpha = np.full_like(states.liquid, np.nan)
    if good.any():
        T, P = states.temperature_K[good], states.pressure_kPa[good]
        correction = system.vapour.ln_correction(T, P, states.vapour[good])
        ln_k = system.ln_volatility(T, states.liquid[good]) - correction
        difference = np.clip(ln_k - ln_k[:, [reference]], -700.0, 700.0)
        alpha[good] = np.exp(difference)
    return alpha
