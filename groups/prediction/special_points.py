"""Azeotropes of mixtures."""

from collections.abc import Sequence
from itertools import combinations

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Reason, graded
from groups.equilibrium import azeotropes as solve_azeotropes
from groups.prediction.answers import AzeotropeAnswer
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.chances import (
    AzeotropeChance,
    azeotrope_chance,
)
from groups.prediction.checks import (
    check_components,
    check_one_of,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
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
