"""The predictive Soave-Redlich-Kwong equation: fugacity coefficients and their derivatives.

    q = a/(b R T) = sum x_i q_i + (1/A1) (gE/RT + sum x_i ln(b/b_i))
    b = sum x_i b_i,   A1 = -0.64663
    q_i = a_i alpha_i / (b_i R T),   a_i = 0.42748 R^2 Tc^2 / Pc,   b_i = 0.08664 R Tc / Pc
    qbar_i = d(n q)/dn_i = q_i + (1/A1) (ln gamma_i + ln(b/b_i) + b_i/b - 1)
    ln phi_i = (b_i/b) (Z - 1) - ln(Z - B) - qbar_i ln(1 + B/Z)

gE and ln gamma are those of the UNIFAC table published with the method.

Source: T. Holderbaum, J. Gmehling, Fluid Phase Equilib. 70 (1991) 251-265, eqs. 9 to 13; S.
Horstmann et al., Fluid Phase Equilib. 227 (2005) 157 (table). Equation numbers from memory.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.activity.model import ActivityModel
from groups.arrays import BoolArray, FloatArray
from groups.vapour.psrk.alpha import Attraction, root_alpha
from groups.vapour.psrk.cubic import (
    CRITICAL_B,
    CRITICAL_Q,
    CRITICAL_VOLUME,
    compressibility_roots,
    pure_ln_phi,
)
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3

#: Holderbaum & Gmehling (1991): the liquid at atmospheric pressure has u = 1.1.
A1 = -0.64663

Root = Literal["liquid", "vapour", "stable"]


@dataclass(frozen=True, slots=True)
class PsrkModel:
    """A mixture described by the predictive Soave-Redlich-Kwong equation.

    Parameters
    ----------
    activity : ActivityModel
        UNIFAC with the table "psrk".
    critical_temperature_K, critical_pressure_kPa, acentric_factor : array of shape (n_components,)
    attractions : tuple of Attraction
        One for each component.
    """

    activity: ActivityModel
    critical_temperature_K: FloatArray
    critical_pressure_kPa: FloatArray
    acentric_factor: FloatArray
    attractions: tuple[Attraction, ...]

    @property
    def n_components(self) -> int:
        """Number of components."""
        return len(self.attractions)

    @property
    def covolume_cm3_mol(self) -> FloatArray:
        """b of the components, of shape (n_components,)."""
        scale = CRITICAL_B * GAS_CONSTANT_KPA_CM3
        return np.asarray(scale * self.critical_temperature_K / self.critical_pressure_kPa)

    def pure_attraction(self, temperature_K: FloatArray) -> tuple[FloatArray, FloatArray]:
        """q_i = a_i/(b_i R T) and d q_i / dT in 1/K, each of shape (n, n_components)."""
        root, slope = root_alpha(self.attractions, temperature_K)
        scale = CRITICAL_Q * self.critical_temperature_K / temperature_K[:, None]
        q = scale * root**2
        return q, scale * 2.0 * root * slope - q / temperature_K[:, None]


@dataclass(frozen=True, slots=True)
class Phase:
    """One phase of n points, and what its derivatives need.

    Parameters
    ----------
    temperature_K, pressure_kPa, compressibility : array of shape (n,)
    fractions, ln_phi : array of shape (n, n_components)
    q, B : array of shape (n,)
    q_partial, b_ratio : array of shape (n, n_components)
        qbar_i and b_i / b.
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    fractions: FloatArray
    compressibility: FloatArray
    ln_phi: FloatArray
    q: FloatArray
    B: FloatArray
    q_partial: FloatArray
    b_ratio: FloatArray

    @property
    def volume_ratio(self) -> FloatArray:
        """v / b, of shape (n,): near 1 in a cold liquid, 3.85 at the critical point."""
        return np.asarray(self.compressibility / self.B)

    @property
    def liquid_like(self) -> BoolArray:
        """True where denser than a critical fluid of this equation (common practice)."""
        return np.asarray(self.volume_ratio < CRITICAL_VOLUME)


def phase(
    model: PsrkModel,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    fractions: FloatArray,
    root: Root,
) -> Phase:
    """Evaluate a phase at n points.

    Parameters
    ----------
    model : PsrkModel
    temperature_K, pressure_kPa : array of shape (n,)
        K, kPa.
    fractions : array of shape (n, n_components)
        Mole fractions; each row sums to 1.
    root : {"liquid", "vapour", "stable"}
        Densest root, least dense root, or the one of lower Gibbs energy.

    Returns
    -------
    Phase

    Source
    ------
    See the head of this module.
    """
    T, x = temperature_K, fractions
    b_i = model.covolume_cm3_mol
    b = x @ b_i
    ratio = b_i / b[:, None]
    partial = model.activity.ln_gamma(T, x) - np.log(ratio) + ratio - 1.0
    q_partial = model.pure_attraction(T)[0] + partial / A1
    q = (x * q_partial).sum(axis=1)
    B = b * pressure_kPa / (GAS_CONSTANT_KPA_CM3 * T)
    Z = _chosen(q, B, root)
    common = -np.log(Z - B)
    ln_phi = ratio * (Z - 1.0)[:, None] + common[:, None]
    ln_phi = ln_phi - q_partial * np.log1p(B / Z)[:, None]
    return Phase(T, pressure_kPa, x, Z, ln_phi, q, B, q_partial, ratio)


def _chosen(q: FloatArray, B: FloatArray, root: Root) -> FloatArray:
    smallest, largest = compressibility_roots(q, B)
    if root == "liquid":
        return smallest
    if root == "vapour":
        return largest
    dense = pure_ln_phi(q, B, smallest) < pure_ln_phi(q, B, largest)
    return np.where(dense, smallest, largest)


@dataclass(frozen=True, slots=True)
class Slopes:
    """Derivatives of ln phi of a phase.

    Parameters
    ----------
    moles : array of shape (n, n_components i, n_components j)
        n d ln phi_i / d n_j; symmetric.
    ln_pressure : array of shape (n, n_components)
        d ln phi_i / d ln P.
    """

    moles: FloatArray
    ln_pressure: FloatArray


def slopes(model: PsrkModel, at: Phase) -> Slopes:
    """Derivatives of ln phi to the amounts and to ln P.

    Parameters
    ----------
    model : PsrkModel
    at : Phase

    Returns
    -------
    Slopes

    Source
    ------
    Differentiation of the equations at the head of this module.
    """
    gamma_slope = model.activity.ln_gamma_mole_derivatives(at.temperature_K, at.fractions)
    excess = at.b_ratio - 1.0
    dq = at.q_partial - at.q[:, None]
    dB = at.B[:, None] * excess
    d_partial = (gamma_slope - excess[:, :, None] * excess[:, None, :]) / A1
    moles = _change(at, dq, dB, d_partial)
    moles -= at.b_ratio[:, :, None] * excess[:, None, :] * (at.compressibility - 1.0)[:, None, None]
    zero = np.zeros((len(dq), 1))
    no_partial = np.zeros((*at.q_partial.shape, 1))
    return Slopes(moles, _change(at, zero, at.B[:, None], no_partial)[:, :, 0])


def temperature_slope(model: PsrkModel, at: Phase) -> FloatArray:
    """d ln phi_i / dT at constant pressure and composition, in 1/K, (n, n_components).

    Parameters
    ----------
    model : PsrkModel
    at : Phase

    Returns
    -------
    array of shape (n, n_components)
    """
    T, x = at.temperature_K, at.fractions
    d_partial = model.pure_attraction(T)[1] + model.activity.ln_gamma_slope(T, x) / A1
    dq = (x * d_partial).sum(axis=1)
    dB = -at.B / T
    return _change(at, dq[:, None], dB[:, None], d_partial[:, :, None])[:, :, 0]


def _change(at: Phase, dq: FloatArray, dB: FloatArray, d_partial: FloatArray) -> FloatArray:
    """Change of ln phi at fixed b_i/b: (n, nc, m) for m changes dq, dB (n, m), dqbar (n, nc, m)."""
    Z, B, q = (values[:, None] for values in (at.compressibility, at.B, at.q))
    slope = (3.0 * Z - 2.0) * Z + (q - 1.0 - B) * B
    slope = np.where(np.abs(slope) < 1e-12, 1e-12, slope)
    dZ = -(B * (Z - B) * dq + ((q - 1.0 - 2.0 * B) * Z - 2.0 * q * B) * dB) / slope
    d_log = (Z * dB - B * dZ) / (Z * (Z + B))
    answer = at.b_ratio[:, :, None] * dZ[:, None, :]
    answer -= ((dZ - dB) / (Z - B))[:, None, :]
    answer -= np.log1p(B / Z)[:, :, None] * d_partial
    answer -= at.q_partial[:, :, None] * d_log[:, None, :]
    return np.asarray(answer)
