"""States of two phases by the equation of state, verified before anyone sees them."""

from collections.abc import Sequence
from dataclasses import dataclass, fields

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.states import safe_log
from groups.vapour.psrk.model import Phase, PsrkModel, phase
from groups.vapour.psrk.tangent_plane import tangent_plane

#: Largest difference of ln fugacity between the phases of a state that is returned.
RESIDUAL_TOLERANCE = 1e-8
#: Phases whose compositions and volumes differ by less are one and the same (trivial solution).
TRIVIAL = 1e-4
#: ln of volume ratio and of distribution coefficients below which a state is called near-critical;
#: common practice, no source.
NEAR_CRITICAL = 0.7
#: A residual above this is no attempt that nearly succeeded.
FAR = 1e-4
TRIVIAL_SOLUTION = "both phases became one: the point lies beyond the critical point, or close by"


@dataclass(frozen=True, slots=True)
class EosStates:
    """Bubble or dew points of n mixtures; what did not converge is NaN and says why.

    Attributes
    ----------
    temperature_K, pressure_kPa : array of shape (n,)
    liquid, vapour : array of shape (n, n_components), mole fractions
    ln_k : array of shape (n, n_components)
        ln(phi_liquid / phi_vapour), finite for absent components also.
    liquid_compressibility, vapour_compressibility : array of shape (n,)
    near_critical : bool array of shape (n,)
        True where the phases differ so little that the equation is doubtful.
    stable : bool array of shape (n,)
        False where a further phase would form: a liquid that splits.
    converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity between the phases.
    failure : tuple of n texts, None where converged
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    ln_k: FloatArray
    liquid_compressibility: FloatArray
    vapour_compressibility: FloatArray
    near_critical: BoolArray
    stable: BoolArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


ARRAYS = tuple(f.name for f in fields(EosStates) if f.name != "failure")


def fugacity_gap(one: Phase, other: Phase) -> FloatArray:
    """Largest difference of ln fugacity of the components present in both, of shape (n,)."""
    present = (one.fractions > 1e-280) & (other.fractions > 1e-280)
    gap = safe_log(one.fractions) + one.ln_phi
    gap = np.subtract(gap, safe_log(other.fractions) + other.ln_phi, where=present, out=None)
    return np.asarray(np.abs(np.where(present, gap, 0.0)).max(axis=1))


def is_trivial(liquid: Phase, vapour: Phase) -> BoolArray:
    """Where two phases are the same phase twice."""
    distance = np.abs(liquid.fractions - vapour.fractions).max(axis=1)
    spread = np.abs(np.log(liquid.volume_ratio / vapour.volume_ratio))
    return np.asarray((distance < TRIVIAL) & (spread < 30.0 * TRIVIAL))


def is_near_critical(liquid: Phase, vapour: Phase) -> BoolArray:
    """Where the phases differ little, in volume and in every distribution coefficient."""
    spread = np.log(vapour.volume_ratio / liquid.volume_ratio)
    return np.asarray(spread < NEAR_CRITICAL)


def verified_points(
    model: PsrkModel,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    liquid: FloatArray,
    vapour: FloatArray,
    failure: tuple[str | None, ...],
) -> EosStates:
    """The points that satisfy their equations and are not trivial; the others blanked.

    Parameters
    ----------
    model : PsrkModel
    temperature_K, pressure_kPa : array of shape (n,)
    liquid, vapour : array of shape (n, n_components)
    failure : tuple of n texts or None
        What the solver knows already.

    Returns
    -------
    EosStates
    """
    known = np.array([text is None for text in failure], dtype=bool)
    known &= np.isfinite(temperature_K) & np.isfinite(pressure_kPa)
    known &= np.isfinite(liquid).all(axis=1) & np.isfinite(vapour).all(axis=1)
    T, P = np.where(known, temperature_K, 300.0), np.where(known, pressure_kPa, 100.0)
    x, y = (np.where(known[:, None], part, 1.0 / part.shape[1]) for part in (liquid, vapour))
    dense, light = phase(model, T, P, x, "liquid"), phase(model, T, P, y, "vapour")
    sums = np.maximum(np.abs(x.sum(axis=1) - 1.0), np.abs(y.sum(axis=1) - 1.0))
    residual = np.where(known, np.maximum(fugacity_gap(dense, light), sums), np.inf)
    trivial = known & is_trivial(dense, light)
    good = known & (residual <= RESIDUAL_TOLERANCE) & ~trivial
    stable = np.zeros(len(T), dtype=bool)
    if good.any():
        stable[good] = tangent_plane(model, T[good], P[good], x[good]).stable
    texts = tuple(
        None if ok else text or (TRIVIAL_SOLUTION if same else _left(value))
        for ok, text, same, value in zip(
            good.tolist(), failure, trivial.tolist(), residual.tolist(), strict=True
        )
    )
    return EosStates(
        _shown(temperature_K, good),
        _shown(pressure_kPa, good),
        _shown(liquid, good),
        _shown(vapour, good),
        _shown(dense.ln_phi - light.ln_phi, good),
        _shown(dense.compressibility, good),
        _shown(light.compressibility, good),
        good & is_near_critical(dense, light),
        stable,
        good,
        residual,
        texts,
    )


def joined(parts: Sequence[EosStates]) -> EosStates:
    """The states of several batches, one after the other."""
    columns = {name: np.concatenate([getattr(p, name) for p in parts]) for name in ARRAYS}
    return EosStates(**columns, failure=tuple(text for part in parts for text in part.failure))


def with_rows(states: EosStates, rows: IntArray, better: EosStates, lost: str) -> EosStates:
    """The states with some rows replaced where the replacement converged; `lost` says why not.

    A point that both attempts left far from equilibrium was none: it gets the text `lost`.
    """
    kept = np.flatnonzero(better.converged)
    columns = {}
    for name in ARRAYS:
        values = np.array(getattr(states, name))
        values[rows[kept]] = getattr(better, name)[kept]
        columns[name] = values
    failure = list(states.failure)
    for k in kept.tolist():
        failure[int(rows[k])] = None
    for k in np.flatnonzero(~better.converged & ~(better.residual < FAR)).tolist():
        failure[int(rows[k])] = lost
    return EosStates(**columns, failure=tuple(failure))


def _left(residual: float) -> str:
    return f"the iteration left a residual of {residual:.1e} in ln fugacity"


def _shown(values: FloatArray, good: BoolArray) -> FloatArray:
    copy = np.array(values)
    copy[~good] = np.nan
    return copy
