"""Correlative equations fitted to a prediction: a pair, or all pairs of a mixture."""

from groups.handoff.fits.answers import (
    FitEffects,
    FitNote,
    FitResidual,
    FittedParameter,
    MixtureFit,
    PairFit,
    RefusedPair,
    SplitEffect,
    TripleCheck,
)
from groups.handoff.fits.effects import Boiling
from groups.handoff.fits.formulation import PairConstants
from groups.handoff.fits.mixture import fit_mixture
from groups.handoff.fits.pair import fit_pair
from groups.handoff.fits.target import PairTarget, fit_grid, pair_target

__all__ = [
    "Boiling",
    "FitEffects",
    "FitNote",
    "FitResidual",
    "FittedParameter",
    "MixtureFit",
    "PairConstants",
    "PairFit",
    "PairTarget",
    "RefusedPair",
    "SplitEffect",
    "TripleCheck",
    "fit_grid",
    "fit_mixture",
    "fit_pair",
    "pair_target",
]
