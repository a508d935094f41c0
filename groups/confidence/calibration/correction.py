"""The systematic error that alike systems share, learned from measurements and added to `auto`.

    c = sum_m b_m exp(-|z - z_m| / LENGTH)

z describes a pair (`descriptors`), z_m are some hundred pairs of the open set kept as prototypes,
|.| is the distance after each descriptor is divided by its spread. b solves a ridge problem whose
weights are renewed so that gross errors pull no harder than ordinary ones (Huber). Far from every
prototype the correction fades to zero.

Source
------
Kernel ridge with a subset of the data as centres: Williams & Seeger, Adv. Neural Inf. Process.
Syst. 13 (2001) 682. Huber's weights: Huber, Ann. Math. Stat. 35 (1964) 73.
"""

from dataclasses import dataclass

import numpy as np
from scipy.spatial.distance import cdist

from groups.arrays import FloatArray, IntArray

PROTOTYPES = 300
LENGTH = 12.0  # in spreads of the descriptors; of the 30 descriptors, typical pairs are 7 apart
RIDGE = 0.3
HUBER = 0.15  # ln units: about the median error
CLIPPED = 1.5  # larger errors are taken as this: wrong measurements or broken parameters
ROUNDS = 6
SEED = 20_240_229


@dataclass(frozen=True, slots=True)
class Correction:
    """Prototypes and their coefficients; `centre` and `spread` bring descriptors to scale."""

    centre: FloatArray  # (n_descriptors,)
    spread: FloatArray  # (n_descriptors,)
    prototypes: FloatArray  # (n_prototypes, n_descriptors), to scale
    coefficients: FloatArray  # (n_prototypes,)

    def at(self, descriptors: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The correction of each pair, and how far the nearest prototypes are.

        Parameters
        ----------
        descriptors : FloatArray of shape (n, n_descriptors)

        Returns
        -------
        tuple of FloatArray of shape (n,)
            Addition to ln gamma-infinity, 1; mean distance of the three nearest prototypes.
        """
        away = cdist((descriptors - self.centre) / self.spread, self.prototypes)
        nearest = np.partition(away, 2, axis=1)[:, :3].mean(axis=1)
        return np.exp(-away / LENGTH) @ self.coefficients, nearest


def fit_correction(
    descriptors: FloatArray, error: FloatArray, measurements: IntArray
) -> tuple[Correction, IntArray]:
    """Fit the correction to systems, each with the median error of its measurements.

    Parameters
    ----------
    descriptors : FloatArray of shape (n_systems, n_descriptors)
    error : FloatArray of shape (n_systems,)
        Measured minus predicted ln gamma, 1.
    measurements : IntArray of shape (n_systems,)
        How many stand behind each; a system weighs as their root.

    Returns
    -------
    tuple of Correction and IntArray
        The correction, and which systems became its prototypes.
    """
    centre, spread = descriptors.mean(axis=0), descriptors.std(axis=0)
    spread = np.where(spread > 0.0, spread, 1.0)
    scaled = (descriptors - centre) / spread
    number = min(PROTOTYPES, len(error))
    kept = np.sort(np.random.default_rng(SEED).choice(len(error), number, replace=False))
    kernel = np.exp(-cdist(scaled, scaled[kept]) / LENGTH)
    between = kernel[kept] + 1e-6 * np.eye(number)
    target = np.clip(error, -CLIPPED, CLIPPED)
    weight = np.sqrt(measurements.astype(np.float64))
    robust = np.ones(len(error))
    for _ in range(ROUNDS):
        pull = (weight * robust)[:, None] * kernel
        b = np.linalg.solve(pull.T @ kernel + RIDGE * between, pull.T @ target)
        robust = HUBER / np.maximum(np.abs(target - kernel @ b), HUBER)
    coefficients = np.asarray(b, dtype=np.float64)
    return Correction(centre, spread, scaled[kept], coefficients), kept.astype(np.int64)
