"""The order of the sources."""

import subprocess
import sys

import pytest

from groups.errors import InvalidInputError, NoVapourPressureError
from groups.pure import AntoineInput, PointsInput, vapour_pressure
from groups.structure.molecule import molecule_from_smiles


def test_the_callers_own_goes_before_published_coefficients() -> None:
    ethanol = molecule_from_smiles("CCO")
    own = AntoineInput(8.20417, 1642.89, 230.3, "10", "mmHg", "C")
    assert vapour_pressure(ethanol).source == "published"
    mine = vapour_pressure(ethanol, own)
    assert mine.source == "user"
    assert mine.critical_temperature_K == pytest.approx(514.0, abs=2.0)  # IUPAC


def test_the_callers_nonsense_is_not_replaced_by_something_else() -> None:
    with pytest.raises(InvalidInputError):
        vapour_pressure(molecule_from_smiles("CCO"), PointsInput((300.0, 320.0), (50.0, 20.0)))


def test_a_published_boiling_point_goes_before_an_estimate() -> None:
    # 2,2,2-trifluoroethanol boils at 347 K (CRC Handbook, from memory); its only published curve
    # is rejected by the audit.
    curve = vapour_pressure(molecule_from_smiles("OCC(F)(F)F"))
    assert curve.source == "published boiling point"
    assert curve.boiling_temperature(101.325) == pytest.approx(347.0, abs=1.5)


def test_an_undocumented_molecule_is_estimated_from_structure() -> None:
    curve = vapour_pressure(molecule_from_smiles("CC(C)CC(=O)OCC(C)CCO"))
    assert curve.source == "estimated"
    assert curve.uncertainty_ln > 0.15  # 6 K of boiling point are already 0.15
    assert "Stein" in curve.citation


def test_a_molecule_without_any_source_is_refused() -> None:
    with pytest.raises(NoVapourPressureError) as refusal:
        vapour_pressure(molecule_from_smiles("C[Si](C)(C)CCCCC[Si](C)(C)CCC"))
    assert refusal.value.smiles and refusal.value.cure


def test_importing_does_not_load_the_collections() -> None:
    code = (
        "import sys, groups.pure; sys.exit('pandas' in sys.modules or 'chemicals' in sys.modules)"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
