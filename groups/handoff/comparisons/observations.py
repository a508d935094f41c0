"""Measurements as residuals of a liquid model, and the residuals' derivatives.

Every residual is explicit in ln gamma at a measured state, so no boiling point is solved for:

    boiling pressure   [ln P(T, x) - ln P measured] / sigma, P = sum_i x_i gamma_i Psat_i
    vapour             [y1(T, x) - y1 measured] / sigma
    activity           [ln gamma - ln gamma measured] / sigma
    two liquids        [ln(x_i gamma_i) poor - rich] / sigma, i = 1, 2
    excess enthalpy    [hE(T, x) - hE measured] / sigma

sigma joins the uncertainties of what was measured there, those of T and x through the slopes of
ln P and y (the effective variance of Deming). A real vapour's correction ln(phi_i / phi_i,sat
Poynting_i) is taken at the measured state.

Source: Barker, Aust. J. Chem. 6 (1953) 207, for the pressure; Van Ness, Byer & Gibbs, AIChE J. 19
(1973) 238, for what to fit.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from groups.activity.excess import GAS_CONSTANT_J_MOL_K
from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium import IdealVapour, LiquidModel, System, VapourModel
from groups.equilibrium.system import SaturationLine
from groups.handoff.comparisons.measurements import Measurements

Quantity = str
QUANTITIES = ("pressure", "vapour", "ln_gamma", "two_liquids", "excess_enthalpy")
"""What a residual is of; its index is `Observations.quantity`."""

LnGamma = Callable[[FloatArray, FloatArray], FloatArray]
"""From T (n,) and x (n, 2) to ln gamma (n, 2)."""
#: Least mole fraction in a logarithm.
_TINY = 1e-12


@dataclass(frozen=True, slots=True)
class Observations:
    """Flat arrays of everything that a residual needs.

    Attributes
    ----------
    temperature_K, fractions : FloatArray of shape (n,) and (n, 2)
        States at which ln gamma is needed: boiling points, activities, poor and rich liquids.
    number, quantity, x1 : arrays of shape (N,)
        Of each residual: the user's point, an index of `QUANTITIES`, and the mole fraction by
        which it belongs to a region.
    """

    temperature_K: FloatArray
    fractions: FloatArray
    number: IntArray
    quantity: IntArray
    x1: FloatArray
    boiling: int
    with_vapour: IntArray
    ln_saturation: FloatArray
    ln_pressure: FloatArray
    sigma_ln_pressure: FloatArray
    y1: FloatArray
    sigma_y1: FloatArray
    activities: int
    solute: IntArray
    ln_gamma_measured: FloatArray
    sigma_ln_gamma: FloatArray
    liquids: int
    sigma_ln_activity: FloatArray
    enthalpy_temperature_K: FloatArray
    enthalpy_fractions: FloatArray
    enthalpy_J_mol: FloatArray
    sigma_enthalpy: FloatArray

    @property
    def n_residuals(self) -> int:
        """Number of residuals."""
        return len(self.number)

    def rows(self, kept: BoolArray) -> IntArray:
        """Residuals that belong to the points kept; `kept` is indexed by the user's number."""
        return np.flatnonzero(kept[self.number]).astype(np.int64)

    def residuals(self, ln_gamma: FloatArray, enthalpy: FloatArray) -> FloatArray:
        """Weighted residuals (N,) from ln gamma (n, 2) at the states and hE (h,) in J/mol."""
        b, d = self.boiling, self.boiling + self.activities
        ln_P, y1 = self.boil(ln_gamma[:b])
        some = self.with_vapour
        at_ends = ln_gamma[b:d][np.arange(self.activities), self.solute]
        ln_a = ln_gamma[d:] + np.log(np.maximum(self.fractions[d:], _TINY))
        poor, rich = ln_a[: self.liquids], ln_a[self.liquids :]
        return np.concatenate(
            [
                (ln_P - self.ln_pressure) / self.sigma_ln_pressure,
                (y1[some] - self.y1[some]) / self.sigma_y1[some],
                (at_ends - self.ln_gamma_measured) / self.sigma_ln_gamma,
                ((poor - rich) / self.sigma_ln_activity).reshape(-1),
                (enthalpy - self.enthalpy_J_mol) / self.sigma_enthalpy,
            ]
        )

    def derivatives(
        self, ln_gamma: FloatArray, slopes: FloatArray, enthalpy_slopes: FloatArray
    ) -> FloatArray:
        """d residuals / dp (N, P) from d ln gamma / dp (n, 2, P) and d hE / dp (h, P)."""
        b, d = self.boiling, self.boiling + self.activities
        _, y1 = self.boil(ln_gamma[:b])
        y = np.stack([y1, 1.0 - y1], axis=-1)
        some = self.with_vapour
        pressure = (y[:, :, None] * slopes[:b]).sum(axis=1) / self.sigma_ln_pressure[:, None]
        twisted = (slopes[:b, 0] - slopes[:b, 1]) * (y[:, 0] * y[:, 1])[:, None]
        at_ends = slopes[b:d][np.arange(self.activities), self.solute]
        poor, rich = slopes[d : d + self.liquids], slopes[d + self.liquids :]
        between = (poor - rich) / self.sigma_ln_activity[:, :, None]
        return np.concatenate(
            [
                pressure,
                twisted[some] / self.sigma_y1[some, None],
                at_ends / self.sigma_ln_gamma[:, None],
                between.reshape(-1, slopes.shape[-1]),
                enthalpy_slopes / self.sigma_enthalpy[:, None],
            ]
        )

    def boil(self, ln_gamma: FloatArray) -> tuple[FloatArray, FloatArray]:
        """ln P in kPa and y1 of the boiling states at their measured temperature."""
        x = self.fractions[: self.boiling]
        terms = ln_gamma + self.ln_saturation + np.log(np.maximum(x, 1e-300))
        ln_P = np.logaddexp(terms[:, 0], terms[:, 1])
        return ln_P, np.exp(terms[:, 0] - ln_P)

    def of_model(self, model: LiquidModel) -> FloatArray:
        """Weighted residuals (N,) of any liquid model."""
        ln_gamma = model.ln_gamma(self.temperature_K, self.fractions)
        T, x = self.enthalpy_temperature_K, self.enthalpy_fractions
        slope = (x * model.ln_gamma_slope(T, x)).sum(axis=1)
        return self.residuals(ln_gamma, -GAS_CONSTANT_J_MOL_K * T**2 * slope)


def observations(
    points: Measurements,
    lines: tuple[SaturationLine, SaturationLine] | None,
    reference: LiquidModel,
    vapour: VapourModel | None = None,
) -> Observations:
    """Lay measurements out as residuals.

    Parameters
    ----------
    points : Measurements
    lines : tuple of SaturationLine or None
        Vapour pressures of both components; None where no boiling point was measured.
    reference : LiquidModel
        A rough model of the liquid, for the slopes that carry the uncertainties of T and x over.
    vapour : VapourModel, optional
        Ideal where not given.

    Returns
    -------
    Observations
    """
    v, d, s, h = points.vapour_liquid, points.activities, points.solubilities, points.enthalpies
    both = np.flatnonzero(np.isfinite(s.x1_poor) & np.isfinite(s.x1_rich))
    poor = _pair(s.x1_poor[both])
    rich = _pair(s.x1_rich[both])
    some = np.flatnonzero(np.isfinite(v.y1)).astype(np.int64)
    middle = 0.5 * (s.x1_poor[both] + s.x1_rich[both])
    ln_sat, sigma_P, sigma_y = _boiling_weights(points, lines, reference, vapour or IdealVapour())
    counts = (len(v.number), len(some), len(d.number), 2 * len(both), len(h.number))
    return Observations(
        np.concatenate(
            [v.temperature_K, d.temperature_K, s.temperature_K[both], s.temperature_K[both]]
        ),
        np.concatenate([v.fractions, _pair(d.x1), poor, rich]),
        np.concatenate([v.number, v.number[some], d.number, s.number[both].repeat(2), h.number]),
        np.repeat(np.arange(len(QUANTITIES)), counts),
        np.concatenate([v.x1, v.x1[some], d.x1, middle.repeat(2), h.x1]),
        len(v.number),
        some,
        ln_sat,
        np.log(v.pressure_kPa),
        sigma_P,
        v.y1,
        sigma_y,
        len(d.number),
        d.solute,
        d.ln_gamma,
        d.u_ln_gamma,
        len(both),
        s.u_ln[both],  # component 1 through the poor liquid, 2 through the rich one
        h.temperature_K,
        _pair(h.x1),
        h.excess_enthalpy_J_mol,
        h.u_J_mol,
    )


def _pair(x1: FloatArray) -> FloatArray:
    return np.stack([x1, 1.0 - x1], axis=-1)


def _boiling_weights(
    points: Measurements,
    lines: tuple[SaturationLine, SaturationLine] | None,
    reference: LiquidModel,
    vapour: VapourModel,
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """ln(Psat) less the vapour's correction (n, 2), and standard deviations of ln P and y1."""
    v = points.vapour_liquid
    if not len(v.number) or lines is None:
        return np.empty((0, 2)), np.empty(0), np.empty(0)
    system = System(reference, lines)
    ln_sat = system.ln_saturation(v.temperature_K)
    y1 = _rough(system, v.temperature_K, v.fractions)[1]
    slope_T = (_pair(y1) * system.ln_saturation_slope(v.temperature_K)).sum(axis=1)
    step = 1e-4
    low, high = np.maximum(v.x1 - step, 0.0), np.minimum(v.x1 + step, 1.0)
    (ln_P_low, y_low), (ln_P_high, y_high) = (
        _rough(system, v.temperature_K, _pair(at)) for at in (low, high)
    )
    slope_x, slope_y = (ln_P_high - ln_P_low) / (high - low), (y_high - y_low) / (high - low)
    variance_P = (v.u_pressure_kPa / v.pressure_kPa) ** 2
    variance_P += (slope_T * v.u_temperature_K) ** 2 + (slope_x * v.u_x1) ** 2
    variance_y = v.u_y1**2 + (slope_y * v.u_x1) ** 2
    if not vapour.ideal:
        y = np.where(np.isfinite(v.y1), v.y1, y1)
        ln_sat = ln_sat - vapour.ln_correction(v.temperature_K, v.pressure_kPa, _pair(y))
    return ln_sat, np.sqrt(variance_P), np.sqrt(variance_y)


def _rough(system: System, T: FloatArray, x: FloatArray) -> tuple[FloatArray, FloatArray]:
    terms = system.ln_volatility(T, x) + np.log(np.maximum(x, 1e-300))
    ln_P = np.logaddexp(terms[:, 0], terms[:, 1])
    return ln_P, np.exp(terms[:, 0] - ln_P)
