"""The standard deviation of a predicted ln gamma, for the weights of a fit.

It is that of the liquids drawn around the prediction (`groups.prediction.bands`), which carry the
calibrated intervals, joined with the scatter of good measurements: without it the values beside a
pure component, where every error vanishes, would outweigh all others.
"""

from collections.abc import Sequence

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.handoff.fits.mixture import PairSigma
from groups.prediction.bands import drawn_around
from groups.structure.molecule import Molecule

#: Repeated measurements of one ln gamma at infinite dilution scatter by 0.06 to 0.10; the lower
#: end, measured on the project's open data.
SCATTER = 0.06


def calibrated_sigma(
    molecules: Sequence[Molecule], on_missing: OnMissing, temperature_K: float
) -> PairSigma | None:
    """Standard deviations of ln gamma as the method `auto` predicts it.

    Parameters
    ----------
    molecules : sequence of Molecule
        Two or more.
    on_missing : {"refuse", "estimate"}
    temperature_K : float
        Where the widths are taken, K.

    Returns
    -------
    callable or None
        From a pair (i, j), temperatures (t,) and x1 (m,) to an array of shape (1, m, 2); None
        where no table describes the mixture.
    """
    drawn = drawn_around(molecules, on_missing, temperature_K)
    if drawn is None:
        return None
    models, n = drawn.models, len(molecules)

    def sigma(pair: tuple[int, int], _temperatures: FloatArray, x1: FloatArray) -> FloatArray:
        x = np.zeros((len(x1), n))
        x[:, pair[0]], x[:, pair[1]] = x1, 1.0 - x1
        errors = models.errors(x)[..., list(pair)]
        joined: FloatArray = np.hypot(errors.std(axis=0), SCATTER)[None]
        return joined

    return sigma
