"""Azeotropes and liquid splits of mixtures."""

from collections.abc import Sequence
from itertools import combinations

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Reason, graded
from groups.equilibrium import azeotropes as solve_azeotropes
from groups.equilibrium import binary_split, stability
from groups.errors import ShapeError
from groups.prediction.answers import AzeotropeAnswer, LiquidSplitAnswer
from groups.prediction.bands import drawn_around
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.chances import (
    AzeotropeChance,
    SplitChance,
    azeotrope_chance,
    split_chance,
)
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_one_of,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid
from groups.prediction.vapours import VapourAsked

# Common practice, no source: pure boiling points closer than this make an azeotrope a close call.
CLOSE_BOILING_K = 3.0
MOST_AZEOTROPE_COMPONENTS = 6


def azeotropes(
    components: Sequence[Component],
    *,
    pressure_kPa: float | None = None,
    temperature_K: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
) -> AzeotropeAnswer:
    """Every azeotrope of a mixture at one pressure or one temperature.

    Parameters
    ----------
    components : sequence of Component, 2 to 6
    pressure_kPa, temperature_K : float
        Exactly one of them.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one.

    Returns
    -------
    AzeotropeAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    See `groups.equilibrium.azeotropes`.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules, least=2, most=MOST_AZEOTROPE_COMPONENTS)
    check_one_of(temperature_K, pressure_kPa)
    if temperature_K is not None:
        check_temperatures(temperature_K)
    if pressure_kPa is not None:
        check_pressures(pressure_kPa)
    mixture = boiling_mixture(
        components,
        method,
        on_missing,
        temperature_K=temperature_K,
        pressure_kPa=pressure_kPa,
        vapour=vapour,
    )
    found = solve_azeotropes(mixture.system, pressure_kPa=pressure_kPa, temperature_K=temperature_K)
    return AzeotropeAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        pressure_kPa,
        temperature_K,
        found,
        _chances(mixture, pressure_kPa, temperature_K),
        mixture.lines,
        mixture.vapour,
        graded(_azeotrope_reasons(mixture, pressure_kPa, temperature_K), mixture.liquid.evidence),
    )


def _chances(
    mixture: BoilingMixture, pressure_kPa: float | None, temperature_K: float | None
) -> tuple[AzeotropeChance, ...]:
    """The chance of an azeotrope of every two components."""
    boiling = [line.boiling_temperature(pressure_kPa or 101.325) for line in mixture.lines]
    drawn = mixture.drawn(temperature_K or float(np.mean(boiling)))
    if drawn is None:
        return ()
    return tuple(
        azeotrope_chance(
            drawn, mixture.system, pair, temperature_K=temperature_K, pressure_kPa=pressure_kPa
        )
        for pair in combinations(range(len(mixture.lines)), 2)
    )


def _azeotrope_reasons(
    mixture: BoilingMixture, pressure_kPa: float | None, temperature_K: float | None
) -> list[Reason]:
    """Reasons over the pure ends and the middle, and whether the boiling points lie close."""
    n = mixture.system.n_components
    points = np.vstack([np.eye(n), np.full((1, n), 1.0 / n)])
    if pressure_kPa is not None:
        pure = np.array([line.boiling_temperature(pressure_kPa) for line in mixture.lines])
        temperatures = np.append(pure, pure.mean())
        pressures = np.full(n + 1, pressure_kPa)
    else:
        temperatures = np.full(n + 1, temperature_K, dtype=float)
        pressures = np.append(np.exp(mixture.system.ln_saturation(temperatures[:1]))[0], np.nan)
        pressures[-1] = pressures[:-1].mean()
        pure = np.array([line.boiling_temperature(101.325) for line in mixture.lines])
    reasons = mixture.reasons(temperatures, pressures, points)
    return reasons + _close_boiling(pure)


def _close_boiling(boiling_K: FloatArray) -> list[Reason]:
    gaps = np.diff(np.sort(boiling_K))
    if gaps.size and gaps.min() < CLOSE_BOILING_K:
        return [
            Reason(
                "close_boiling",
                f"Two components boil within {gaps.min():.1f} K of each other: a small error "
                "in gamma or in a vapour pressure moves an azeotrope a long way, makes it or "
                "unmakes it.",
                "azeotropes",
                "moderate",
            )
        ]
    return []


def liquid_splits(
    components: Sequence[Component],
    *,
    temperature_K: float,
    mole_fractions: ArrayLike | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> LiquidSplitAnswer:
    """Whether a liquid splits in two, and the liquids of a binary.

    Parameters
    ----------
    components : sequence of Component
        Two; or more, with `mole_fractions`.
    temperature_K : float
    mole_fractions : array_like of shape (n_components,), optional
        The liquid to test. A binary may leave it out: then its gap is sought over all
        compositions. For more than two components it is needed, and the answer says whether
        this liquid is stable.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    LiquidSplitAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table gives the number.

    Source
    ------
    Tangent plane: Michelsen, Fluid Phase Equilib. 9 (1982) 1.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules, least=2)
    temperature = check_temperatures(temperature_K)[:1]
    n = len(molecules)
    if mole_fractions is None and n > 2:
        raise ShapeError(
            f"A liquid split of {n} components needs 'mole_fractions', the liquid to test.",
            cure="Give one mole fraction a component; only a binary may leave them out.",
            field="mole_fractions",
        )
    fractions = None if mole_fractions is None else check_fractions(mole_fractions, n)[:1]
    mixture = liquid(molecules, method, on_missing)
    phases: tuple[FloatArray, ...] = ()
    if n == 2:
        found = binary_split(mixture.model, float(temperature[0]))
        phases = () if found is None else found
    splits = bool(phases)
    if fractions is not None:
        splits = not bool(stability(mixture.model, temperature, fractions).stable[0])
        phases = phases if splits else ()
    probed = np.array(phases) if phases else (np.full((1, n), 1.0 / n))
    probed = fractions if fractions is not None and not phases else probed
    reasons = mixture.reasons(np.repeat(temperature, len(probed)), probed)
    ln_gamma = tuple(mixture.model.ln_gamma(temperature[0], phase) for phase in phases)
    return LiquidSplitAnswer(
        tuple(molecules),
        mixture.method,
        mixture.methods_used,
        float(temperature[0]),
        splits,
        phases,
        ln_gamma,
        _split_chance(mixture, on_missing, float(temperature[0])),
        graded([*reasons, *_split_reasons(mixture.method, splits)], mixture.evidence),
    )


def _split_chance(
    mixture: Liquid, on_missing: OnMissing, temperature_K: float
) -> SplitChance | None:
    """The chance that a binary splits; None for more components or an ideal solution."""
    if not mixture.compared or len(mixture.molecules) != 2:
        return None
    drawn = drawn_around(mixture.molecules, on_missing, temperature_K)
    return None if drawn is None else split_chance(drawn, temperature_K)


def _split_reasons(method: str, splits: bool) -> list[Reason]:
    if method == "unifac-lle" or not splits:
        return []
    return [
        Reason(
            "table_not_fitted_to_splits",
            f"{method} was fitted to vapour-liquid data first; mutual solubilities from it are "
            "right in order of magnitude, seldom better than a factor of two.",
            method,
            "low",
        )
    ]
