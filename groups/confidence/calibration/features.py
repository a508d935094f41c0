"""What the width of an interval depends on, as one row of numbers for each dilute pair.

Spread among the tables, what the tables lack, size and polarity of the molecules, distance from
room temperature, and how far the pair is from the systems that the correction was learned from.
"""

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.confidence.calibration.dilute import REFERENCE_TEMPERATURE_K, TABLES, DiluteTables
from groups.confidence.calibration.traits import Traits, traits
from groups.confidence.calibration.weights import LEADING, distances, weighted_ln_gamma

TABLE_FEATURES: tuple[str, ...] = (
    "constant",
    "ln_mean_difference",
    "ln_largest_difference",
    "ln_difference_fitted_completed",
    "ln_reference_difference",
    "no_fitted_table",
    "share_of_leading_tables",
    "weight_completed",
    "weight_suspect",
    "water_is_solvent",
    "water_is_solute",
    "polar_groups_solute",
    "polar_groups_solvent",
    "donors_solute",
    "donors_solvent",
    "neighbouring_polar_groups",
    "polyol",
    "size_ratio_squared",
    "size_of_ln_gamma",
    "away_from_298_K",
    "above_373_K",
    "ln_heavy_atoms_solute",
    "ln_heavy_atoms_solvent",
)
FEATURES: tuple[str, ...] = (*TABLE_FEATURES, "ln_distance_to_prototypes", "size_of_correction")
SMALLEST_DIFFERENCE = 0.05  # tables closer than this agree as well as repeated measurements do
LARGEST_DIFFERENCE = 3.0
HOT_K = 373.15
_FITTED = tuple(TABLES.index(name) for name in ("unifac-dortmund", "unifac-nist", "unifac-lyngby"))
_TWINS = tuple(TABLES.index(name) for name in ("unifac-dortmund", "unifac-dortmund-2.0"))
_COMPARED = tuple(range(6))  # psrk repeats unifac at these temperatures


def feature_matrix(tables: DiluteTables, weights: FloatArray) -> FloatArray:
    """The features of each pair.

    Parameters
    ----------
    tables : DiluteTables
    weights : FloatArray of shape (n_pairs, n_tables)
        From `table_weights`.

    Returns
    -------
    FloatArray of shape (n_pairs, n_features)
        In the order of `TABLE_FEATURES`; finite also where no table gives a number.
    """
    centre = weighted_ln_gamma(tables, weights)
    spread = _spread_features(tables, centre)
    flags = _flag_features(tables, weights)
    structure = _structure_features(tables)
    size = np.minimum(np.abs(np.nan_to_num(centre)), 6.0) / 3.0
    T = tables.temperature_K
    columns = {
        "constant": np.ones(len(T)),
        **spread,
        **flags,
        **structure,
        "size_of_ln_gamma": size,
        "away_from_298_K": np.abs(T - REFERENCE_TEMPERATURE_K) / 100.0,
        "above_373_K": np.maximum(T - HOT_K, 0.0) / 50.0,
    }
    return np.stack([columns[name] for name in TABLE_FEATURES], axis=1)


def with_correction(
    features: FloatArray, correction: FloatArray, nearest: FloatArray
) -> FloatArray:
    """The features with the two that the correction adds.

    Parameters
    ----------
    features : FloatArray of shape (n, n_table_features)
    correction, nearest : FloatArray of shape (n,)
        From `Correction.at`.

    Returns
    -------
    FloatArray of shape (n, n_features)
        In the order of `FEATURES`.
    """
    extra = np.stack([np.log(SMALLEST_DIFFERENCE + nearest), np.abs(correction)], axis=1)
    return np.concatenate([features, extra], axis=1)


def _spread_features(tables: DiluteTables, centre: FloatArray) -> dict[str, FloatArray]:
    """Differences among the tables, as logarithms; all from ln gamma."""
    known = tables.available
    away = np.minimum(np.abs(tables.ln_gamma - centre[:, None]), LARGEST_DIFFERENCE)
    apart = np.minimum(distances(tables), LARGEST_DIFFERENCE)
    first, second = _TWINS
    twins = np.where(
        known[:, first] & known[:, second],
        np.minimum(
            np.abs(tables.ln_gamma[:, first] - tables.ln_gamma[:, second]), LARGEST_DIFFERENCE
        ),
        0.0,
    )
    leading = known & np.isin(np.arange(known.shape[1]), LEADING)
    return {
        "ln_mean_difference": _ln(_mean(away[:, _COMPARED], known[:, _COMPARED])),
        "ln_largest_difference": _ln(np.where(leading, away, 0.0).max(axis=1)),
        "ln_difference_fitted_completed": _ln(twins),
        "ln_reference_difference": _ln(_mean(apart[:, _COMPARED], known[:, _COMPARED])),
    }


def _flag_features(tables: DiluteTables, weights: FloatArray) -> dict[str, FloatArray]:
    """What the tables lack."""
    known = tables.available
    return {
        "no_fitted_table": 1.0 - known[:, _FITTED].any(axis=1),
        "share_of_leading_tables": known[:, LEADING].mean(axis=1),
        "weight_completed": np.sum(weights * tables.completed, axis=1),
        "weight_suspect": np.sum(weights * tables.suspect, axis=1),
    }


def _structure_features(tables: DiluteTables) -> dict[str, FloatArray]:
    """Size and polarity of solute and solvent."""
    u = [traits(molecule) for molecule in tables.solutes]
    v = [traits(molecule) for molecule in tables.solvents]
    heavy_u, heavy_v = (np.array([float(one.heavy_atoms) for one in side]) for side in (u, v))
    return {
        "water_is_solvent": _column(v, "water", 1),
        "water_is_solute": _column(u, "water", 1),
        "polar_groups_solute": _column(u, "polar_groups", 3),
        "polar_groups_solvent": _column(v, "polar_groups", 4),
        "donors_solute": _column(u, "donors", 3),
        "donors_solvent": _column(v, "donors", 3),
        "neighbouring_polar_groups": np.maximum(_column(u, "crowded", 1), _column(v, "crowded", 1)),
        "polyol": np.maximum(_column(u, "polyol", 1), _column(v, "polyol", 1)),
        "size_ratio_squared": np.minimum(np.log(heavy_u / heavy_v) ** 2, 6.0),
        "ln_heavy_atoms_solute": np.log(heavy_u),
        "ln_heavy_atoms_solvent": np.log(heavy_v),
    }


def _column(side: list[Traits], name: str, most: int) -> FloatArray:
    """One trait of every molecule, capped: beyond a few, more of it tells nothing new."""
    return np.array([float(min(getattr(one, name), most)) for one in side])


def _mean(values: FloatArray, known: BoolArray) -> FloatArray:
    """Mean of the known entries of each row; 0 where there is none."""
    total = np.where(known, values, 0.0).sum(axis=1)
    mean: FloatArray = total / np.maximum(known.sum(axis=1), 1)
    return mean


def _ln(difference: FloatArray) -> FloatArray:
    return np.asarray(np.log(SMALLEST_DIFFERENCE + difference), dtype=np.float64)
