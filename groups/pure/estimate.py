"""A vapour-pressure curve hung on a boiling point, measured or estimated, and a critical point."""

from dataclasses import dataclass

import numpy as np
from rdkit import Chem

from groups.pure.constants import PureConstants
from groups.pure.corresponding_states import (
    Anchor,
    ambrose_walton,
    riedel,
    vetere_alcohol_K,
)
from groups.pure.equations import SaturationEquation
from groups.pure.saturation import Source, VapourPressure

_LOWEST_REDUCED = 0.70
"""Lowest temperature over boiling point down to which the error of the estimate was measured."""

_SHAPE_LN = {"published": 0.06, "estimated": 0.09}
"""Error of ln P from 0.7 Tb to 0.9 Tb with a known boiling point: measured 68 % quantile 0.043
with a published and 0.060 with an estimated critical point, taken larger for the long tails.

By whether the critical point is published or estimated;
`tests/bench/measure_vapour_pressure_estimate.py` prints them.
"""

_ALCOHOL = Chem.MolFromSmarts("[OX2H1;$(O[CX4])]")
_ACID = Chem.MolFromSmarts("[CX3](=[OX1])[OX2H1]")


@dataclass(frozen=True, slots=True)
class ShapedCurve:
    """A corresponding-states equation and its name."""

    name: str
    citation: str
    curve: SaturationEquation


def corresponding_states_curve(mol: Chem.Mol, anchor: Anchor) -> ShapedCurve:
    """The equation that measurement favours for the kind of molecule.

    Riedel's equation with Vetere's constant for molecules with one alcohol group, the
    Ambrose-Walton equation for all others.

    Parameters
    ----------
    mol : Chem.Mol
    anchor : Anchor

    Returns
    -------
    ShapedCurve

    Source
    ------
    See `corresponding_states`; the choice is by `tests/bench/measure_vapour_pressure_estimate.py`.
    """
    if len(mol.GetSubstructMatches(_ALCOHOL)) == 1 and not mol.HasSubstructMatch(_ACID):
        citation = "Riedel, Chem. Ing. Tech. 26 (1954) 83; Vetere, Fluid Phase Equilib. 62 (1991) 1"
        return ShapedCurve(
            "Riedel with Vetere's constant", citation, riedel(anchor, vetere_alcohol_K(anchor))
        )
    citation = "Ambrose & Walton, Pure Appl. Chem. 61 (1989) 1395"
    return ShapedCurve("Ambrose-Walton corresponding states", citation, ambrose_walton(anchor))


def estimated_vapour_pressure(mol: Chem.Mol, known: PureConstants) -> VapourPressure | None:
    """A curve through the boiling point of a molecule that no published equation describes.

    Parameters
    ----------
    mol : Chem.Mol
    known : PureConstants
        Published where possible.

    Returns
    -------
    VapourPressure or None
        With source "published boiling point" where the boiling point is measured, "estimated"
        where it is not. None where the constants are missing or no sensible liquid has them.
    """
    Tb, Tc, Pc = known.normal_boiling_K, known.critical_temperature_K, known.critical_pressure_kPa
    if Tb is None or Tc is None or Pc is None:
        return None
    anchor = Anchor(Tb.value, Tc.value, Pc.value)
    if not (0.3 < anchor.reduced_boiling < 0.95 and anchor.ln_reduced_atmosphere < -0.5):
        return None
    shaped = corresponding_states_curve(mol, anchor)
    low, high = _LOWEST_REDUCED * Tb.value, Tc.value
    if not np.all(shaped.curve.slope(np.linspace(low, high, 50)) > 0.0):
        return None
    steep = float(shaped.curve.slope(np.asarray(Tb.value)))
    shape = _SHAPE_LN["estimated" if Tc.estimated or Pc.estimated else "published"]
    source: Source = "estimated" if Tb.estimated else "published boiling point"
    return VapourPressure(
        source=source,
        equation=f"{shaped.name} through the normal boiling point",
        citation=f"{shaped.citation}. Tb: {Tb.source}. Tc: {Tc.source}. Pc: {Pc.source}",
        coefficients=(("Tb_K", Tb.value), ("Tc_K", Tc.value), ("Pc_kPa", Pc.value)),
        range_K=(low, high),
        curve=shaped.curve,
        uncertainty_ln=float(np.hypot(steep * Tb.uncertainty, shape)),
        critical_temperature_K=Tc.value,
        critical_pressure_kPa=Pc.value,
    )
