"""Slips that data sets have: components swapped, a wrong unit, a few points in another unit."""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium import LiquidModel
from groups.equilibrium.system import SaturationLine
from groups.handoff.comparisons.answers import Mark
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations, observations
from groups.handoff.comparisons.units import PRESSURE_UNITS

#: Swapping must fit this many times better, and the points as given this badly, before it is said.
SWAP_GAIN = 2.0
SWAP_LEAST_RMS = 3.0
#: A prediction of a boiling pressure is rarely wrong by more than a factor of three; the nearest
#: units are seven apart. Common practice, no source.
FAR = float(np.log(3.0))
NEAR = float(np.log(1.6))


def swap_mark(
    points: Measurements,
    lines: tuple[SaturationLine, SaturationLine] | None,
    models: list[LiquidModel],
    reference: LiquidModel,
    given: list[float],
) -> Mark | None:
    """Say so where the points fit far better with the two components exchanged.

    Parameters
    ----------
    points : Measurements
    lines : tuple of SaturationLine or None
    models : list of LiquidModel
        Predictions; a fitted model would follow the points either way.
    reference : LiquidModel
    given : list of float
        Weighted rms of the points as given, model by model.

    Returns
    -------
    Mark or None
    """
    if not models or not given:
        return None
    seen = observations(points.swapped(), lines, reference)
    if not seen.n_residuals:
        return None
    swapped = [float(np.sqrt((seen.of_model(model) ** 2).mean())) for model in models]
    before, after = min(given), min(swapped)
    if not (before > SWAP_LEAST_RMS and after * SWAP_GAIN < before):
        return None
    return Mark(
        "swapped_components",
        f"With the two components exchanged the points would fit far better: the best prediction "
        f"misses them by {after:.1f} standard deviations then, by {before:.1f} as given. Check "
        "which component x1 and y1 belong to.",
    )


def unit_mark(points: Measurements, seen: Observations, reference: LiquidModel) -> Mark | None:
    """Say so where all or some pressures look as if they were in another unit.

    Parameters
    ----------
    points : Measurements
    seen : Observations
    reference : LiquidModel

    Returns
    -------
    Mark or None
    """
    if not seen.boiling:
        return None
    ln_gamma = reference.ln_gamma(seen.temperature_K, seen.fractions)[: seen.boiling]
    off = seen.ln_pressure - seen.boil(ln_gamma)[0]
    far = np.abs(off) > FAR
    if not far.any():
        return None
    unit = _unit_of(off[far])
    number = points.vapour_liquid.number[far]
    named = tuple(int(k) for k in number)
    if unit is None:
        return Mark(
            "pressure_far_off",
            f"{len(named)} boiling pressures lie more than a factor of three off every "
            "expectation, and by no factor between two units. Check temperature, pressure and "
            "components.",
            named,
        )
    if far.all():
        return Mark(
            "pressure_unit",
            f"All pressures look as if they were stated in {unit}; check the unit.",
            named,
        )
    return Mark(
        "mixed_units",
        f"{len(named)} of {len(off)} pressures look as if they were stated in {unit}, the others "
        "not: the units are mixed.",
        named,
    )


def _unit_of(off: FloatArray) -> str | None:
    """The unit whose factor best explains ln(P as read in kPa / P expected), if one does."""
    distance = {
        name: abs(float(np.median(off)) + float(np.log(factor)))
        for name, factor in PRESSURE_UNITS.items()
        if name != "kPa" and (np.abs(off + np.log(factor)) < NEAR).all()
    }
    return min(distance, key=lambda name: distance[name], default=None)
