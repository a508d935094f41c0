"""Constants with their sources."""

from dataclasses import replace

import pytest

from groups.pure.constants import constants, published_boiling, published_constant
from groups.structure.molecule import molecule_from_smiles

UNKNOWN = "0-00-0"


def test_handbook_constants_are_taken_where_they_exist() -> None:
    toluene = constants(molecule_from_smiles("Cc1ccccc1"))
    # Poling, Prausnitz, O'Connell, 5th ed. (2001), appendix A, from memory, and its rounding.
    for constant, expected, tolerance in (
        (toluene.normal_boiling_K, 383.79, 0.3),
        (toluene.critical_temperature_K, 591.75, 0.6),
        (toluene.critical_pressure_kPa, 4108.0, 40.0),
        (toluene.acentric_factor, 0.264, 0.01),
    ):
        assert constant is not None and not constant.estimated and constant.source
        assert constant.value == pytest.approx(expected, abs=tolerance)


def test_an_unlisted_molecule_gets_estimates_that_say_so() -> None:
    toluene = replace(molecule_from_smiles("Cc1ccccc1"), cas=UNKNOWN)
    estimated = constants(toluene)
    for constant in (
        estimated.normal_boiling_K,
        estimated.critical_temperature_K,
        estimated.critical_pressure_kPa,
        estimated.acentric_factor,
    ):
        assert constant is not None and constant.estimated and constant.uncertainty > 0.0


def test_a_slip_in_one_compilation_is_passed_over() -> None:
    # Phenanthrene: 869 K; one compilation prints 0.869.
    Tc = published_constant("85-01-8", "Tc")
    assert Tc is not None
    assert Tc.value == pytest.approx(869.0, abs=10.0)


def test_a_boiling_point_is_surer_where_two_handbooks_agree() -> None:
    agreed = published_boiling("108-88-3")
    assert agreed is not None
    assert ";" in agreed.source and agreed.uncertainty < 1.0
    assert published_boiling(UNKNOWN) is None


def test_what_nothing_covers_stays_open() -> None:
    strange = replace(molecule_from_smiles("C[Si](C)(C)CCCCC[Si](C)(C)CCC"), cas=UNKNOWN)
    known = constants(strange)
    assert known.normal_boiling_K is None
    assert known.critical_temperature_K is None
    assert known.acentric_factor is None
