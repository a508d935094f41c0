"""Weighted ln gamma at infinite dilution with its interval, many pairs at once."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence.calibration.descriptors import descriptor_matrix
from groups.confidence.calibration.dilute import DilutePair, DiluteTables, dilute_tables
from groups.confidence.calibration.features import feature_matrix, with_correction
from groups.confidence.calibration.model import Calibration, calibration
from groups.confidence.calibration.scale import half_width
from groups.confidence.calibration.weights import table_weights, weighted_ln_gamma


@dataclass(frozen=True, slots=True)
class DiluteAnswers:
    """What `auto` says of many dilute pairs; arrays of shape (n_pairs,) unless said otherwise.

    NaN where no table gives a number. `ln_gamma` is the weighted sum of the tables plus
    `correction`; `scale` is the half-width that intervals are multiples of.
    """

    tables: DiluteTables
    weights: FloatArray  # (n_pairs, n_tables), columns as TABLES
    ln_gamma: FloatArray
    correction: FloatArray
    scale: FloatArray

    def interval(self, level: float = 0.90) -> tuple[FloatArray, FloatArray]:
        """Lower and upper end of ln gamma-infinity.

        Parameters
        ----------
        level : float
            Probability that the interval holds the true value, 0.01 to 0.99.

        Returns
        -------
        tuple of FloatArray
            Lower and upper ends, 1; NaN where there is no number.

        Raises
        ------
        OutOfRangeError
            For a level outside that range.
        """
        low, high = calibration().bounds(level)
        return self.ln_gamma + low * self.scale, self.ln_gamma + high * self.scale


def dilute_answers(
    pairs: Sequence[DilutePair], on_missing: OnMissing = "estimate"
) -> DiluteAnswers:
    """Weighted ln gamma-infinity and the scale of its error for many pairs.

    Parameters
    ----------
    pairs : sequence of (Molecule, Molecule, float)
        Solute, solvent, temperature in K.
    on_missing : {"refuse", "estimate"}
        With "refuse", tables with completed parameters take no part.

    Returns
    -------
    DiluteAnswers

    Source
    ------
    Weights: `groups.confidence.calibration.weights`. Widths: `scale.csv`, told in `scale.toml`.
    """
    return answers_from(dilute_tables(pairs, on_missing), calibration())


def answers_from(tables: DiluteTables, calibrated: Calibration) -> DiluteAnswers:
    """The same from tables already asked.

    Parameters
    ----------
    tables : DiluteTables
    calibrated : Calibration

    Returns
    -------
    DiluteAnswers
    """
    weights = table_weights(tables)
    centre = weighted_ln_gamma(tables, weights)
    features = feature_matrix(tables, weights)
    added, nearest = calibrated.correction.at(descriptor_matrix(tables, weights, features))
    scale = half_width(with_correction(features, added, nearest), calibrated.coefficients)
    nothing = np.where(np.isfinite(centre), 0.0, np.nan)
    return DiluteAnswers(tables, weights, centre + added, added + nothing, scale + nothing)


def ln_gamma_interval(
    pairs: Sequence[DilutePair], level: float = 0.90, on_missing: OnMissing = "estimate"
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Weighted ln gamma at infinite dilution with the ends of its interval.

    Parameters
    ----------
    pairs : sequence of (Molecule, Molecule, float)
        Solute, solvent, temperature in K.
    level : float
        Probability that the interval holds the true value, 0.01 to 0.99.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    tuple of FloatArray of shape (n_pairs,)
        ln gamma-infinity, lower end, upper end, 1; NaN where no table gives a number.

    Raises
    ------
    OutOfRangeError
        For a level outside its range.

    Source
    ------
    As `dilute_answers`.
    """
    answers = dilute_answers(pairs, on_missing)
    lower, upper = answers.interval(level)
    return answers.ln_gamma, lower, upper
