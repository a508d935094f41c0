"""What to tell beside points of the equation of state."""

import numpy as np

from groups.arrays import FloatArray
from groups.vapour.note import VapourNote
from groups.vapour.psrk.flash import EosFlash
from groups.vapour.psrk.henry import Solubility
from groups.vapour.psrk.model import PsrkModel
from groups.vapour.psrk.states import EosStates


def psrk_notes(
    model: PsrkModel,
    answer: EosStates | EosFlash | Solubility,
    temperature_K: FloatArray,
) -> tuple[VapourNote, ...]:
    """Warnings of the equation of state: near-critical points, splits, attractions stretched.

    Parameters
    ----------
    model : PsrkModel
    answer : EosStates, EosFlash or Solubility
    temperature_K : array of shape (n,)
        Of the points; NaN where there is none.

    Returns
    -------
    tuple of VapourNote
    """
    notes = []
    if answer.near_critical.any():
        text = (
            "Close to a critical point of the mixture, where vapour and liquid grow alike, the "
            "equation overstates the two-phase region; compositions there are doubtful."
        )
        notes.append(VapourNote("near_critical_locus", text, "mixture", "low"))
    if isinstance(answer, EosStates) and (answer.converged & ~answer.stable).any():
        text = "At some points a further phase would form; a second liquid is likely."
        notes.append(VapourNote("liquid_unstable", text, "mixture", "low"))
    return (*notes, *_stretched(model, temperature_K))


def _stretched(model: PsrkModel, temperature_K: FloatArray) -> list[VapourNote]:
    """A subcritical component below the vapour pressures that its attraction was fitted to."""
    T = temperature_K[np.isfinite(temperature_K)]
    lowest = float(T.min()) if len(T) else np.inf
    notes = []
    for i, curve in enumerate(model.attractions):
        if curve.range_K is not None and lowest < curve.range_K[0] - 20.0:
            text = (
                f"Component {i + 1}: its attraction was fitted down to {curve.range_K[0]:.0f} K "
                f"and is used at {lowest:.0f} K."
            )
            notes.append(VapourNote("attraction_extrapolated", text, str(i), "moderate"))
    return notes
