"""Where an ordered pair of molecules stands among others: what "alike" means for the correction.

Nothing here depends on temperature or composition, so neither does the correction made from it.
"""

import numpy as np

from groups.arrays import FloatArray
from groups.confidence.calibration.dilute import TABLES, DiluteTables
from groups.confidence.calibration.features import TABLE_FEATURES

_FROM_FEATURES: tuple[str, ...] = (
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
    "ln_heavy_atoms_solute",
    "ln_heavy_atoms_solvent",
)
_COMPARED = 6  # psrk repeats unifac at these temperatures
FARTHEST = 2.0
LOWEST, HIGHEST = -4.0, 16.0
DESCRIPTORS: tuple[str, ...] = (
    *_FROM_FEATURES,
    *(f"forward {name}" for name in TABLES[:_COMPARED]),
    "forward weighted",
    *(f"backward {name}" for name in TABLES[:_COMPARED]),
    "backward weighted",
)


def descriptor_matrix(
    tables: DiluteTables, weights: FloatArray, features: FloatArray
) -> FloatArray:
    """Structure, flags, and what the tables say at 298.15 K in both directions.

    Parameters
    ----------
    tables : DiluteTables
    weights : FloatArray of shape (n_pairs, n_tables)
    features : FloatArray of shape (n_pairs, n_features)
        From `feature_matrix`.

    Returns
    -------
    FloatArray of shape (n_pairs, n_descriptors)
        In the order of `DESCRIPTORS`; finite, not yet brought to a common scale.
    """
    columns = [features[:, [TABLE_FEATURES.index(name) for name in _FROM_FEATURES]]]
    for values in (tables.forward, tables.backward):
        centre = np.sum(weights * np.where(weights > 0.0, np.nan_to_num(values), 0.0), axis=1)
        apart = np.clip(values[:, :_COMPARED] - centre[:, None], -FARTHEST, FARTHEST)
        columns += [np.nan_to_num(apart), np.clip(centre, LOWEST, HIGHEST)[:, None]]
    return np.concatenate(columns, axis=1)
