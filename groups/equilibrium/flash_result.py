"""What a flash answers: verified phases with their amounts, compositions and activities."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_search import MOST_LIQUIDS
from groups.equilibrium.states import RESIDUAL_TOLERANCE, safe_log

Phase = Literal["liquid", "vapour", "two-phase", "two liquids", "three-phase", "unknown"]
#: Phase amounts must add up to the feed this closely: a few roundings.
BALANCE = 1e-10
#: Amounts below this are too small to take part in the test of equal fugacities.
NOTHING = 1e-250


@dataclass(frozen=True, slots=True)
class Flash:
    """Phases of n mixtures at equilibrium.

    Attributes
    ----------
    temperature_K, pressure_kPa : array of shape (n,)
    vapour_fraction : array of shape (n,)
        Moles of vapour in a mole of mixture.
    liquid, vapour : array of shape (n, n_components)
        Mole fractions, of all liquids together; NaN where the phase is absent. At a bubble or dew
        point the phase that is about to form is given, with fraction zero.
    gamma : array of shape (n, n_components)
        In the liquid; activity over mole fraction of all liquids together where there are several.
    liquids : array of shape (n, 3, n_components)
        Mole fractions of each liquid, the poorest in the first component first; NaN where absent.
    liquid_fractions : array of shape (n, 3)
        Moles of each liquid in a mole of mixture; zero where absent.
    phase : tuple of n texts
        "liquid", "vapour", "two-phase" (a liquid and a vapour), "two liquids" (or more),
        "three-phase" (two or more liquids and a vapour), or "unknown" where the flash failed.
    liquid_stable : bool array of shape (n,)
        False where the liquid has split, and `liquid` is no single phase.
    converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity between two phases; zero for one phase.
    failure : tuple of n texts, None where converged
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    vapour_fraction: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    gamma: FloatArray
    liquids: FloatArray
    liquid_fractions: FloatArray
    phase: tuple[Phase, ...]
    liquid_stable: BoolArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


@dataclass(slots=True)
class Phases:
    """Phases found by a solver, not yet verified.

    `liquids` (m, 3, n_components) and `vapour` (m, n_components) are mole fractions, NaN where
    absent; `liquid_fractions` (m, 3) and `vapour_fraction` (m,) their amounts.
    """

    liquids: FloatArray
    liquid_fractions: FloatArray
    vapour: FloatArray
    vapour_fraction: FloatArray

    @classmethod
    def of_amounts(cls, amounts: FloatArray, liquids: IntArray, vapour: BoolArray) -> "Phases":
        """From amounts (m, MOST_LIQUIDS + 1, n_components), liquids first, then a vapour."""
        m = len(amounts)
        totals = amounts.sum(axis=2)
        x = amounts / np.where(totals > 0.0, totals, np.nan)[:, :, None]
        rows = np.arange(m)
        place = np.minimum(liquids, MOST_LIQUIDS)
        y = np.where(vapour[:, None], x[rows, place], np.nan)
        fraction = np.where(vapour, totals[rows, place], 0.0)
        is_liquid = np.arange(MOST_LIQUIDS) < liquids[:, None]
        x = np.where(is_liquid[:, :, None], x[:, :MOST_LIQUIDS], np.nan)
        shares = np.where(is_liquid, totals[:, :MOST_LIQUIDS], 0.0)
        order = np.argsort(np.where(is_liquid, x[:, :, 0], np.inf), axis=1, kind="stable")
        x = np.take_along_axis(x, order[:, :, None], axis=1)
        return cls(x, np.take_along_axis(shares, order, axis=1), y, fraction)


def flash_result(problem: PhaseProblem, phases: Phases, failure: Sequence[str | None]) -> Flash:
    """Verify phases against equal fugacities and the balance; blank what does not pass."""
    z = problem.feed
    is_liquid = np.isfinite(phases.liquids).all(axis=2)
    has_vapour = np.isfinite(phases.vapour).all(axis=1)
    ln_f = np.full((len(z), MOST_LIQUIDS + 1, z.shape[1]), np.nan)
    ln_gamma = np.full_like(phases.liquids, np.nan)
    rows, places = np.nonzero(is_liquid)
    x = phases.liquids[rows, places]
    ln_gamma[rows, places] = problem.activity.ln_gamma(problem.temperature_K[rows], x)
    ln_f[rows, places] = safe_log(x) + ln_gamma[rows, places] + problem.standard[rows]
    wet = np.flatnonzero(has_vapour)
    y = phases.vapour[wet]
    ln_f[wet, MOST_LIQUIDS] = safe_log(y) + problem.rows(wet).vapour_coefficients(y)
    residual = _mismatch(ln_f, phases)
    missing = _imbalance(z, phases)
    texts = list(failure)
    for k in range(len(z)):
        if texts[k] is None and not residual[k] <= RESIDUAL_TOLERANCE:
            texts[k] = f"the iteration left a residual of {residual[k]:.1e} in ln fugacity"
        if texts[k] is None and not missing[k] <= BALANCE:
            texts[k] = f"the phases miss the feed by {missing[k]:.1e}"
    return _assembled(problem, phases, ln_gamma, np.array(residual), texts)


def _mismatch(ln_f: FloatArray, phases: Phases) -> FloatArray:
    """Largest difference of ln fugacity of a component between the phases it is in."""
    x = np.concatenate([phases.liquids, phases.vapour[:, None]], axis=1)
    shown = np.isfinite(x) & (np.where(np.isfinite(x), x, 0.0) > NOTHING)
    high = np.where(shown, ln_f, -np.inf).max(axis=1)
    low = np.where(shown, ln_f, np.inf).min(axis=1)
    gap = np.zeros_like(high)
    np.subtract(high, low, out=gap, where=high > low)
    return np.asarray(gap.max(axis=1, initial=0.0))


def _imbalance(z: FloatArray, phases: Phases) -> FloatArray:
    liquids = np.where(np.isfinite(phases.liquids), phases.liquids, 0.0)
    vapour = np.where(np.isfinite(phases.vapour), phases.vapour, 0.0)
    total = (liquids * phases.liquid_fractions[:, :, None]).sum(axis=1)
    total = total + vapour * phases.vapour_fraction[:, None]
    return np.asarray(np.abs(total - z).max(axis=1, initial=0.0))


def _assembled(
    problem: PhaseProblem,
    phases: Phases,
    ln_gamma: FloatArray,
    residual: FloatArray,
    failure: list[str | None],
) -> Flash:
    good = np.array([text is None for text in failure], dtype=bool)
    n_liquids = np.isfinite(phases.liquids[:, :, 0]).sum(axis=1)
    has_vapour = np.isfinite(phases.vapour[:, 0])
    liquid, gamma = _together(phases, ln_gamma)
    names = [
        _name(int(k), bool(v)) if ok else "unknown"
        for k, v, ok in zip(n_liquids, has_vapour, good, strict=True)
    ]
    T, P = problem.temperature_K, problem.pressure_kPa
    return Flash(
        np.where(good, T, np.nan),
        np.where(good, P, np.nan) if problem.vapour is not None else np.full_like(T, np.nan),
        np.where(good, phases.vapour_fraction, np.nan),
        np.where(good[:, None], liquid, np.nan),
        np.where(good[:, None], phases.vapour, np.nan),
        np.where(good[:, None], gamma, np.nan),
        np.where(good[:, None, None], phases.liquids, np.nan),
        np.where(good[:, None], phases.liquid_fractions, np.nan),
        tuple(names),
        n_liquids <= 1,
        good,
        residual,
        tuple(failure),
    )


def _together(phases: Phases, ln_gamma: FloatArray) -> tuple[FloatArray, FloatArray]:
    """All liquids as one: composition, and activity over mole fraction."""
    shares = phases.liquid_fractions
    is_liquid = np.isfinite(phases.liquids[:, :, 0])
    # A liquid about to form has no amount; it still has a composition.
    shares = np.where(is_liquid & (shares.sum(axis=1) <= 0.0)[:, None], 1.0, shares)
    total = np.where(is_liquid, shares, 0.0).sum(axis=1, keepdims=True)
    weights = np.where(is_liquid, shares, 0.0) / np.where(total > 0.0, total, np.nan)
    x = np.where(is_liquid[:, :, None], phases.liquids, 0.0)
    liquid = (x * weights[:, :, None]).sum(axis=1)
    gammas = np.exp(np.minimum(np.where(is_liquid[:, :, None], ln_gamma, 0.0), 700.0))
    activity = (x * gammas * weights[:, :, None]).sum(axis=1)
    one = is_liquid.sum(axis=1) == 1
    safe = np.where(liquid > 0.0, liquid, 1.0)
    gamma = np.where(one[:, None], gammas[:, 0], np.where(liquid > 0.0, activity / safe, np.nan))
    return liquid, np.where(np.isfinite(liquid), gamma, np.nan)


def _name(n_liquids: int, has_vapour: bool) -> Phase:
    if n_liquids > 1:
        return "three-phase" if has_vapour else "two liquids"
    if n_liquids:
        return "two-phase" if has_vapour else "liquid"
    return "vapour"
