"""Intervals of everything that follows from activity coefficients and vapour pressures.

Whole consistent liquids are drawn around `auto` (`groups.confidence.calibration.samples`), each
with vapour pressures shifted by their stated uncertainty, and carried through the equations. An
interval always holds the number that it stands beside: a single table may lie outside what all of
them and the measurements together say, and then the interval reaches out to it.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray, IntArray
from groups.confidence.calibration import SampledModels, sample_models
from groups.errors import PredictionError
from groups.prediction.liquid import liquid
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule

LEVEL = 0.90
N_SAMPLES = 400
SEED = 20_260_601  # fixed, so that the same question gets the same answer


@dataclass(frozen=True, slots=True)
class Band:
    """Lower and upper ends, in the shape and unit of the number they stand beside."""

    lower: FloatArray
    upper: FloatArray

    @property
    def half_width(self) -> FloatArray:
        """Half the distance between the ends."""
        width: FloatArray = (self.upper - self.lower) / 2.0
        return width

    def spread(self, places: IntArray, n_points: int) -> "Band":
        """The same among n points, NaN at the others.

        Parameters
        ----------
        places : array of shape (n,)
            Where each point belongs.
        n_points : int

        Returns
        -------
        Band
        """
        if len(places) == n_points:
            return self
        return Band(spread(self.lower, places, n_points), spread(self.upper, places, n_points))


def spread(values: FloatArray, places: IntArray, n_points: int) -> FloatArray:
    """Values at their places among n points, NaN at the others.

    Parameters
    ----------
    values : array of shape (n, ...)
    places : array of shape (n,)
    n_points : int

    Returns
    -------
    array of shape (n_points, ...)
    """
    wide = np.full((n_points, *values.shape[1:]), np.nan)
    wide[places] = values
    return wide


@dataclass(frozen=True, slots=True)
class Drawn:
    """Liquids and saturation shifts drawn around one mixture.

    `models` are `N_SAMPLES` activity models, `shift` is added to ln Psat, of shape
    (n_samples, n_components).
    """

    models: SampledModels
    shift: FloatArray


def drawn_around(
    molecules: Sequence[Molecule],
    on_missing: OnMissing,
    temperature_K: float,
    lines: Sequence[VapourPressure] = (),
) -> Drawn | None:
    """Draw liquids, and vapour pressures where lines are given, around a mixture.

    Parameters
    ----------
    molecules : sequence of Molecule
    on_missing : {"refuse", "estimate"}
    temperature_K : float
        Where the widths are taken.
    lines : sequence of VapourPressure
        One a component, or none.

    Returns
    -------
    Drawn or None
        None where no table at all describes the mixture.
    """
    try:
        centre = liquid(molecules, "auto", on_missing)
    except PredictionError:
        return None
    # Drawn in one order whatever the caller's, so that the order changes no interval.
    order = np.argsort([molecule.canonical_smiles for molecule in molecules])
    place = np.argsort(order)
    sigma = np.array([float(line.uncertainty(temperature_K)) for line in lines] or [0.0])
    deviates = np.random.default_rng(SEED + 1).standard_normal((N_SAMPLES, len(molecules)))
    shift = sigma * deviates[:, place]
    if len(molecules) == 1:
        return Drawn(SampledModels(centre.model, np.zeros((N_SAMPLES, 1, 1))), shift)
    errors = sample_models(
        centre.model,
        [molecules[k] for k in order],
        temperature_K,
        N_SAMPLES,
        SEED,
        on_missing=on_missing,
    ).dilute
    return Drawn(SampledModels(centre.model, errors[:, place][:, :, place]), shift)


def band(samples: FloatArray, own: FloatArray, level: float = LEVEL) -> Band:
    """The central interval of drawn values, stretched to hold the number itself.

    Parameters
    ----------
    samples : array of shape (n_samples, ...)
    own : array of shape (...)
        The number the interval stands beside.
    level : float
        Probability, 0.01 to 0.99.

    Returns
    -------
    Band
        NaN where `own` is NaN.
    """
    tail = (1.0 - level) / 2.0
    lower, upper = np.quantile(samples, [tail, 1.0 - tail], axis=0)
    return Band(np.minimum(lower, own), np.maximum(upper, own))
