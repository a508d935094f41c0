"""Liquid splits of mixtures of any number of components at one temperature."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.confidence import Reason, graded
from groups.equilibrium import binary_split, liquid_flash
from groups.errors import ShapeError
from groups.prediction.answers import LiquidSplitAnswer
from groups.prediction.bands import drawn_around
from groups.prediction.chances import SplitChance, split_chance
from groups.prediction.checks import check_components, check_fractions, check_temperatures
from groups.prediction.component import Component
from groups.prediction.split_method import split_reasons, splitting_liquid
from groups.structure.molecule import Molecule


def liquid_splits(
    components: Sequence[Component],
    *,
    temperature_K: float,
    mole_fractions: ArrayLike | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> LiquidSplitAnswer:
    """Whether a liquid splits, and into which liquids, in which amounts.

    Parameters
    ----------
    components : sequence of Component
        Two; or more, with `mole_fractions`.
    temperature_K : float
    mole_fractions : array_like of shape (n_components,), optional
        The liquid to split. A binary may leave it out: then its gap is sought over all
        compositions. A component with zero is a solute at infinite dilution.
    method : str
        An identifier of `ALL_METHODS`; "auto" takes the table fitted to splits where it holds.
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
    Tangent plane and phase split: Michelsen, Fluid Phase Equilib. 9 (1982) 1 and 21.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules, least=2)
    temperature = check_temperatures(temperature_K)[:1]
    n, T = len(molecules), float(temperature[0])
    if mole_fractions is None and n > 2:
        raise ShapeError(
            f"A liquid split of {n} components needs 'mole_fractions', the liquid to test.",
            cure="Give one mole fraction a component; only a binary may leave them out.",
            field="mole_fractions",
        )
    fractions = None if mole_fractions is None else check_fractions(mole_fractions, n)[:1]
    mixture, chosen = splitting_liquid(molecules, method, on_missing, T, T)
    failure: str | None = None
    shares: tuple[float, ...] | None = None
    if fractions is None:
        phases = binary_split(mixture.model, T) or ()
    else:
        found = liquid_flash(mixture.model, temperature, fractions)
        failure = found.failure[0]
        there = np.isfinite(found.liquids[0]).all(axis=1)
        phases = tuple(found.liquids[0][there])
        shares = tuple(found.liquid_fractions[0][there].tolist())
        phases, shares = (phases, shares) if len(phases) > 1 else ((), None)
    probed = np.array(phases) if phases else fractions
    probed = np.full((1, n), 1.0 / n) if probed is None else probed
    reasons = [*chosen, *mixture.reasons(np.repeat(temperature, len(probed)), probed)]
    ln_gamma = tuple(mixture.model.ln_gamma(T, phase) for phase in phases)
    reasons += _failed(failure) + split_reasons(mixture.method, bool(phases))
    return LiquidSplitAnswer(
        tuple(molecules),
        mixture.method,
        mixture.methods_used,
        T,
        bool(phases),
        phases,
        ln_gamma,
        shares,
        tuple(np.exp(ln_gamma[0] - one) for one in ln_gamma),
        _split_chance(molecules, on_missing, T) if mixture.compared else None,
        failure,
        graded(reasons, mixture.evidence),
    )


def _failed(failure: str | None) -> list[Reason]:
    if failure is None:
        return []
    return [Reason("not_converged", f"No state was found: {failure}.", "liquid", "none")]


def _split_chance(
    molecules: Sequence[Molecule], on_missing: OnMissing, temperature_K: float
) -> SplitChance | None:
    """The chance that a binary splits; None for more components."""
    if len(molecules) != 2:
        return None
    drawn = drawn_around(molecules, on_missing, temperature_K)
    return None if drawn is None else split_chance(drawn, temperature_K)
