"""The weights that `auto` gives the published tables: agreement, measured rank, and flags.

    w_k  ~  standing_k * doubt_k * vote_k / (WITHIN + d_k)^2

d_k is how far table k lies from the median of the leading tables, the mean of |difference| of
both infinite-dilution values at 298.15 K. So a table that stands alone loses its weight, and the
weighted sum follows the median of the tables without ever jumping from one to another.

vote_k concerns the completed tables. By dilute data they are as good as fitted ones, and yet they
lose azeotropes that fitted tables, made for vapour-liquid data, place well. So they have a vote
only as far as the fitted tables disagree among themselves: vote = D^2 / (DISPUTED^2 + D^2), D the
difference of the two leading fitted tables; SINGLE_VOTE where only one of them has all parameters
fitted, 1 where none has. That costs nothing in dilute error and keeps ethanol/water in place.

The weights depend neither on temperature nor on composition, and not on the order of the
components: the weighted sum of the excess Gibbs energies is one excess Gibbs energy.
"""

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.confidence.calibration.dilute import TABLES, DiluteTables

# Standing of each table: measured on the open data, where weights learned row by row did no
# better than these round numbers.
STANDING = {
    "unifac-dortmund": 1.0,
    "unifac-nist": 1.0,
    "unifac-dortmund-2.0": 1.0,
    "unifac-2.0": 0.5,
    "unifac-lyngby": 0.15,
    "unifac": 0.15,
    "psrk": 0.10,
}
LEADING = tuple(TABLES.index(name) for name in TABLES[:4])
# Repeated measurements of one value scatter by 0.06 to 0.10: closer than that all tables agree.
WITHIN = 0.10
SUSPECT_FACTOR = 0.5
COMPLETED_FACTOR = 0.5
DISPUTED = 0.20  # difference of the fitted tables at which completed ones get half a vote
SINGLE_VOTE = 0.5
_FITTED = tuple(TABLES.index(name) for name in ("unifac-dortmund", "unifac-nist"))
_VOTERS = np.isin(TABLES, ("unifac-dortmund-2.0", "unifac-2.0"))
# A table so far from the median, a factor 7 in gamma, is in error; it gets no weight at all.
OUTLIER = 2.0
# A table that would carry less is left out: it changes nothing that anybody could measure.
LEAST_WEIGHT = 0.01


def table_weights(tables: DiluteTables) -> FloatArray:
    """Weight of each table for each pair.

    Parameters
    ----------
    tables : DiluteTables

    Returns
    -------
    FloatArray of shape (n_pairs, n_tables)
        Not negative; each row sums to 1, or to 0 where no table gives a number.
    """
    return weights_from(
        distances(tables), dispute(tables), tables.available, tables.completed, tables.suspect
    )


def distances(tables: DiluteTables) -> FloatArray:
    """How far each table lies from the median of the leading ones, at 298.15 K.

    Parameters
    ----------
    tables : DiluteTables

    Returns
    -------
    FloatArray of shape (n_pairs, n_tables)
        Mean |difference in ln gamma-infinity| over both directions, 1; NaN where no number.
    """
    both = (tables.forward, tables.backward)
    parts = [np.abs(values - _centre(values)[:, None]) for values in both]
    total: FloatArray = (parts[0] + parts[1]) / 2.0
    return total


def dispute(tables: DiluteTables) -> FloatArray:
    """How far the two leading fitted tables lie apart, at 298.15 K.

    Parameters
    ----------
    tables : DiluteTables

    Returns
    -------
    FloatArray of shape (n_pairs,)
        Mean |difference in ln gamma-infinity| over both directions, 1; NaN where not both give
        a number.
    """
    first, second = _FITTED
    both = (tables.forward, tables.backward)
    parts = [np.abs(values[:, first] - values[:, second]) for values in both]
    total: FloatArray = (parts[0] + parts[1]) / 2.0
    return total


def weights_from(
    distance: FloatArray,
    disputed: FloatArray,
    available: BoolArray,
    completed: BoolArray,
    suspect: BoolArray,
) -> FloatArray:
    """The rule itself; arrays of shape (n, n_tables) unless said otherwise.

    Parameters
    ----------
    distance : FloatArray
        |difference in ln gamma| from the median, 1.
    disputed : FloatArray of shape (n,)
        |difference in ln gamma| of the fitted tables, 1; NaN where not both give a number.
    available, completed, suspect : BoolArray
        Which tables give a number, hold a completed parameter, a suspect one.

    Returns
    -------
    FloatArray
        Rows that sum to 1, or to 0 where nothing is available.
    """
    known = np.where(available, distance, np.inf)
    nearest = known.min(axis=1, keepdims=True)
    kept = available & ((known <= OUTLIER) | (known <= nearest))
    standing = np.array([STANDING[name] for name in TABLES])
    raw = standing / (WITHIN + np.where(kept, known, 0.0)) ** 2
    raw = raw * np.where(suspect, SUSPECT_FACTOR, 1.0) * np.where(completed, COMPLETED_FACTOR, 1.0)
    sound = (available & ~suspect)[:, _FITTED].sum(axis=1)
    raw = raw * np.where(_VOTERS, _vote(disputed, sound)[:, None], 1.0)
    weights = _normalised(np.where(kept, raw, 0.0))
    return _normalised(np.where(weights >= LEAST_WEIGHT, weights, 0.0))


def _vote(disputed: FloatArray, fitted: IntArray) -> FloatArray:
    """Share of its weight that a completed table keeps; `fitted` sound fitted tables beside it."""
    square = np.nan_to_num(disputed) ** 2
    among_two = square / (DISPUTED**2 + square)
    return np.select(
        [fitted >= 2, fitted == 1], [among_two, np.full_like(square, SINGLE_VOTE)], 1.0
    )


def weighted_ln_gamma(tables: DiluteTables, weights: FloatArray) -> FloatArray:
    """The weighted ln gamma-infinity of each pair.

    Parameters
    ----------
    tables : DiluteTables
    weights : FloatArray of shape (n_pairs, n_tables)

    Returns
    -------
    FloatArray of shape (n_pairs,)
        NaN where no table gives a number.
    """
    total = np.sum(weights * np.where(weights > 0.0, tables.ln_gamma, 0.0), axis=1)
    return np.where(weights.sum(axis=1) > 0.0, total, np.nan)


def _normalised(raw: FloatArray) -> FloatArray:
    """Rows that sum to 1; rows of zeros stay."""
    total = raw.sum(axis=1, keepdims=True)
    share: FloatArray = np.divide(raw, total, out=np.zeros_like(raw), where=total > 0.0)
    return share


def _centre(values: FloatArray) -> FloatArray:
    """Median of the leading tables, or of all where none of those gives a number."""
    leading = _median(values[:, LEADING])
    return np.where(np.isfinite(leading), leading, _median(values))


def _median(values: FloatArray) -> FloatArray:
    """Median of the finite entries of each row; NaN where there is none."""
    ordered = np.sort(values, axis=1)  # NaN last
    count = np.isfinite(ordered).sum(axis=1)
    rows = np.arange(len(ordered))
    low, high = np.maximum(count - 1, 0) // 2, count // 2
    high = np.minimum(high, ordered.shape[1] - 1)
    middle: FloatArray = (ordered[rows, low] + ordered[rows, high]) / 2.0
    return middle
