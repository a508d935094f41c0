"""The phases of one state, as they come out of a flash."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium import Flash
from groups.prediction.bands import Band
from groups.prediction.boiling_bands import BoilingBands

PhaseKind = Literal["liquid", "vapour"]


@dataclass(frozen=True, slots=True)
class PhaseAnswer:
    """One phase: its moles in a mole of mixture and its composition.

    A phase about to form, the vapour of a bubble point or the liquid of a dew point, has fraction
    zero.
    """

    kind: PhaseKind
    fraction: float
    mole_fractions: FloatArray


def phases_of(found: Flash) -> tuple[PhaseAnswer, ...]:
    """Liquids first, then the vapour, of the first state of a flash; empty where it failed.

    Parameters
    ----------
    found : Flash

    Returns
    -------
    tuple of PhaseAnswer
    """
    phases = [
        PhaseAnswer("liquid", float(share), x)
        for share, x in zip(found.liquid_fractions[0], found.liquids[0], strict=True)
        if np.isfinite(x).all()
    ]
    if np.isfinite(found.vapour[0]).all():
        phases.append(PhaseAnswer("vapour", float(found.vapour_fraction[0]), found.vapour[0]))
    return tuple(phases)


def of_both_liquids(bands: BoilingBands, overall: FloatArray, liquid: FloatArray) -> BoilingBands:
    """Bands around one of two coexisting liquids, told for both liquids together.

    The activities are the same in both, so gamma over the overall fractions is larger by
    x_liquid / x_overall; temperature, pressure and vapour are unchanged.

    Parameters
    ----------
    bands : BoilingBands
        Of one point.
    overall, liquid : array of shape (1, n_components)
        Mole fractions of both liquids together, and of the one the bands were drawn around.

    Returns
    -------
    BoilingBands
    """
    ratio = np.divide(liquid, overall, out=np.ones_like(liquid), where=overall > 0.0)
    share = ratio / ratio[:, -1:]

    def scaled(one: Band, by: FloatArray) -> Band:
        return Band(one.lower * by, one.upper * by)

    return BoilingBands(
        bands.temperature_K,
        bands.pressure_kPa,
        Band(overall, overall),
        bands.vapour,
        scaled(bands.gamma, ratio),
        scaled(bands.relative_volatility, share),
        bands.ln_k_half_width,
    )
