"""Which published polar term a molecule gets."""

import pytest

from groups.structure.molecule import molecule_from_smiles
from groups.vapour.polar_terms import polar_class, polar_terms


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        ("O", "water"),
        ("CO", "methanol"),
        ("CCO", "alcohol"),
        ("CC(C)O", "alcohol"),
        ("CC(C)=O", "ketone or ether"),
        ("CC=O", "ketone or ether"),
        ("CC#N", "ketone or ether"),
        ("CCOCC", "ketone or ether"),
        ("CCOC(C)=O", "ketone or ether"),
        ("CCCl", "halide or sulfide"),
        ("CS", "halide or sulfide"),
        ("CCCCCC", None),
        ("c1ccccc1", None),
        ("Oc1ccccc1", None),
        ("CCN", None),
    ],
)
def test_the_class_of_a_molecule(smiles, expected):
    assert polar_class(molecule_from_smiles(smiles).mol) == expected


def test_no_dipole_means_no_polar_term_and_says_so():
    terms = polar_terms(molecule_from_smiles("CC(C)=O").mol, None, 508.0, 4700.0)
    assert (terms.a, terms.b) == (0.0, 0.0)
    assert "dipole" in terms.basis


def test_the_term_of_acetone_follows_the_printed_equation():
    # mu = 2.9 D, Tc = 508.1 K, Pc = 47.0 bar: mu_r = 1e5 * 8.41 * 46.39 / 508.1^2 = 151.1;
    # a = -2.14e-4 * 151.1 - 4.308e-21 * 151.1^8 = -0.03234 - 0.00117 (by hand).
    terms = polar_terms(molecule_from_smiles("CC(C)=O").mol, 2.9, 508.1, 4700.0)
    assert terms.a == pytest.approx(-0.03351, abs=2e-5)  # rounding of the hand calculation
    assert terms.b == 0.0


def test_attraction_grows_with_the_dipole():
    mol = molecule_from_smiles("CC#N").mol
    weak, strong = (polar_terms(mol, mu, 545.0, 4830.0).a for mu in (2.0, 3.9))
    assert strong < weak < 0.0
