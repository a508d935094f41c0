"""What a fit does to splits, azeotropes and relative volatility, compared with its target."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium import (
    Azeotrope,
    LiquidModel,
    SaturationLine,
    System,
    binary_split,
)
from groups.equilibrium.binary_azeotropes import binary_azeotropes
from groups.equilibrium.binary_split import may_split
from groups.equilibrium.boiling_curve import Condition, boiling_curve
from groups.handoff.correlations import CorrelativeModel
from groups.handoff.fits.answers import FitEffects, FitNote, SplitEffect
from groups.handoff.fits.target import PairTarget

#: Changes worth a word: twice what two good handbooks differ by; common practice, no source.
AZEOTROPE_SHIFT = 0.02
SPLIT_SHIFT = 0.02
LN_ALPHA_CHANGE = 0.05
#: Points of the boiling curve that azeotropes are looked for along, besides those the search adds.
CURVE_X1 = np.linspace(0.0, 1.0, 21)


@dataclass(frozen=True, slots=True)
class Boiling:
    """Vapour pressures of both components and the pressure at which azeotropes are compared."""

    lines: tuple[SaturationLine, SaturationLine]
    pressure_kPa: float


def splits_of(liquid: LiquidModel, temperature_K: FloatArray) -> list[tuple[float, float] | None]:
    """x1 of both liquids at each temperature, or None."""
    if not may_split(liquid, temperature_K):
        return [None] * len(temperature_K)
    found = [binary_split(liquid, float(T)) for T in temperature_K]
    return [None if one is None else (float(one[0][0]), float(one[1][0])) for one in found]


def azeotropes_of(liquid: LiquidModel, boiling: Boiling | None) -> tuple[Azeotrope, ...] | None:
    """Azeotropes of a binary at the pressure, where vapour pressures are given."""
    if boiling is None:
        return None
    # The search of one pair alone: the index of a whole mixture, which costs as much, says no more.
    system, condition = System(liquid, boiling.lines), Condition(pressure_kPa=boiling.pressure_kPa)
    return binary_azeotropes(system, condition, boiling_curve(system, condition, CURVE_X1))


def effects(
    predicted: LiquidModel, fitted: CorrelativeModel, target: PairTarget, boiling: Boiling | None
) -> FitEffects:
    """Compare a fit with its target.

    Parameters
    ----------
    predicted : LiquidModel
        Of two components.
    fitted : CorrelativeModel
    target : PairTarget
        Its grid is where relative volatilities and splits are compared.
    boiling : Boiling or None
        None: azeotropes are not compared.

    Returns
    -------
    FitEffects
    """
    T = target.temperature_K
    some = T[np.unique([0, len(T) // 2, len(T) - 1])]  # a split has its consolute point on one side
    pairs = zip(some.tolist(), splits_of(predicted, some), splits_of(fitted, some), strict=True)
    change = fitted.ln_gamma(T[:, None], target.fractions) - target.ln_gamma
    ln_alpha = change[..., 0] - change[..., 1]
    row, column = np.unravel_index(int(np.argmax(np.abs(ln_alpha))), ln_alpha.shape)
    return FitEffects(
        tuple(SplitEffect(*one) for one in pairs),
        azeotropes_of(predicted, boiling),
        azeotropes_of(fitted, boiling),
        None if boiling is None else boiling.pressure_kPa,
        float(np.sqrt((ln_alpha**2).mean())),
        float(ln_alpha[row, column]),
        float(T[row]),
        float(target.x1[column]),
    )


def effect_notes(found: FitEffects) -> list[FitNote]:
    """What of the effects the user must know; inventing or losing something is grave."""
    notes = [*_split_notes(found.splits), *_azeotrope_notes(found)]
    worst = found.ln_relative_volatility_largest
    if abs(worst) > LN_ALPHA_CHANGE:
        notes.append(
            FitNote(
                "relative_volatility_changed",
                f"The fit changes the relative volatility by up to {100 * np.expm1(worst):+.1f} % "
                f"(at {found.temperature_K:.1f} K, x1 = {found.x1:.3f}).",
                False,
            )
        )
    return notes


def _split_notes(splits: tuple[SplitEffect, ...]) -> list[FitNote]:
    invented = [s.temperature_K for s in splits if s.fitted and not s.predicted]
    lost = [s.temperature_K for s in splits if s.predicted and not s.fitted]
    notes = []
    for code, at, words in (
        ("split_invented", invented, "splits the liquid in two where the prediction does not"),
        ("split_lost", lost, "loses the liquid split of the prediction"),
    ):
        if at:
            where = ", ".join(f"{T:.1f}" for T in at)
            notes.append(FitNote(code, f"The fit {words}, at {where} K.", True))
    shifts = [
        max(abs(a - b) for a, b in zip(s.predicted, s.fitted, strict=True))
        for s in splits
        if s.predicted and s.fitted
    ]
    if shifts and max(shifts) > SPLIT_SHIFT:
        notes.append(
            FitNote(
                "split_moved",
                f"The fit moves the edge of a split by {max(shifts):.3f} in x1.",
                False,
            )
        )
    return notes


def _azeotrope_notes(found: FitEffects) -> list[FitNote]:
    before, after = found.azeotropes_predicted, found.azeotropes_fitted
    if before is None or after is None:
        return []
    kinds = sorted((a.kind, a.heterogeneous) for a in before)
    if kinds != sorted((a.kind, a.heterogeneous) for a in after):
        code = "azeotrope_invented" if len(after) > len(before) else "azeotrope_lost"
        code = "azeotrope_changed" if len(after) == len(before) else code
        return [
            FitNote(
                code,
                f"At {found.pressure_kPa:.4g} kPa the prediction has {_described(before)}, the "
                f"fit {_described(after)}.",
                True,
            )
        ]
    pairs = zip(before, after, strict=True)
    shift = max(
        (abs(float(a.mole_fractions[0] - b.mole_fractions[0])) for a, b in pairs), default=0.0
    )
    if shift > AZEOTROPE_SHIFT:
        return [FitNote("azeotrope_moved", f"The azeotrope moves by {shift:.3f} in x1.", False)]
    return []


def _described(found: tuple[Azeotrope, ...]) -> str:
    if not found:
        return "no azeotrope"
    return " and ".join(
        f"a {'heterogeneous ' if a.heterogeneous else ''}{a.kind} azeotrope at "
        f"x1 = {float(a.mole_fractions[0]):.4f}"
        for a in found
    )
