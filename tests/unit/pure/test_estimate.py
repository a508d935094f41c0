"""Curves for molecules that no published equation describes."""

from dataclasses import replace

import numpy as np
import pytest

from groups.pure.constant import Constant
from groups.pure.constants import PureConstants, constants
from groups.pure.estimate import estimated_vapour_pressure
from groups.structure.molecule import Molecule, molecule_from_smiles


def known(Tb: float, Tc: float, Pc: float, *, estimated: bool = False) -> PureConstants:
    return PureConstants(
        Constant(Tb, "test", estimated, 10.0 if estimated else 0.5),
        Constant(Tc, "test", False, 1.0),
        Constant(Pc, "test", False, 10.0),
        None,
    )


def butanol() -> Molecule:
    return molecule_from_smiles("CCCCO")


def test_the_source_tells_a_measured_boiling_point_from_an_estimated_one() -> None:
    mol = butanol().mol
    measured = estimated_vapour_pressure(mol, known(390.9, 563.0, 4414.0))
    guessed = estimated_vapour_pressure(mol, known(390.9, 563.0, 4414.0, estimated=True))
    assert measured is not None and guessed is not None
    assert (measured.source, guessed.source) == ("published boiling point", "estimated")
    assert guessed.uncertainty_ln > 2.0 * measured.uncertainty_ln
    assert measured.boiling_temperature(101.325) == pytest.approx(390.9, abs=1e-6)


def test_butanol_follows_its_handbook_curve() -> None:
    curve = estimated_vapour_pressure(butanol().mol, known(390.9, 563.0, 4414.0))
    assert curve is not None and "Vetere" in curve.equation
    # 13.3 kPa (100 mmHg) at 343 K: Perry's Handbook, from memory (70.1 degrees Celsius).
    assert abs(float(curve.ln_kPa(343.25)) - np.log(13.33)) < 2.0 * curve.uncertainty_ln


@pytest.mark.parametrize("smiles", ["CCCCO", "CCCC(=O)O", "CCCCCC", "OCCCO", "CCCCCCCCCCCCCCCC"])
def test_an_estimated_curve_rises_at_every_temperature(smiles: str) -> None:
    molecule = replace(molecule_from_smiles(smiles), cas="0-00-0")
    curve = estimated_vapour_pressure(molecule.mol, constants(molecule))
    assert curve is not None
    assert np.all(np.diff(curve.ln_kPa(np.linspace(100.0, 1500.0, 1401))) > 0.0)
    assert curve.critical_temperature_K is not None


def test_constants_that_no_liquid_has_give_no_curve() -> None:
    mol = butanol().mol
    assert estimated_vapour_pressure(mol, known(390.9, 395.0, 4414.0)) is None
    assert estimated_vapour_pressure(mol, known(390.9, 563.0, 110.0)) is None
    missing = replace(known(390.9, 563.0, 4414.0), critical_pressure_kPa=None)
    assert estimated_vapour_pressure(mol, missing) is None
