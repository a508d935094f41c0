"""The chemical theory of dimers: its balances, its limits and who takes part."""

import numpy as np
import pytest

from groups.structure.molecule import molecule_from_smiles
from groups.vapour.association import dimer_equilibrium, dimerisation


def balances(ln_K, P, y):
    """Pressures of all true species from the monomers, built pair by pair."""
    dimers = dimer_equilibrium(ln_K, P, y)
    p = np.exp(dimers.ln_monomer) * y * P[:, None]
    K = np.exp(ln_K)
    cross = 2.0 * np.sqrt(K[:, :, None] * K[:, None, :]) * p[:, :, None] * p[:, None, :]
    cross = np.where(np.eye(y.shape[1]) > 0, (K * p**2)[:, :, None], cross)
    return dimers, p, cross


def test_monomers_and_dimers_satisfy_pressure_and_mole_balances():
    rng = np.random.default_rng(4)
    y = rng.dirichlet(np.ones(4), 400)
    P = np.exp(rng.uniform(-10.0, 8.0, 400))
    ln_K = rng.uniform(-12.0, 6.0, (400, 4))
    ln_K[:, 3] = -np.inf
    dimers, p, pairs = balances(ln_K, P, y)
    once = np.triu(np.ones((4, 4))) * pairs  # each pair once
    # 1e-12: a few hundred roundings of double precision.
    np.testing.assert_allclose(p.sum(axis=1) + once.sum(axis=(1, 2)), P, rtol=1e-12)
    own = np.einsum("nii->ni", pairs)
    amount = p + pairs.sum(axis=2) + own
    np.testing.assert_allclose(amount / amount.sum(axis=1, keepdims=True), y, atol=1e-12)
    true = (p.sum(axis=1) + once.sum(axis=(1, 2))) / amount.sum(axis=1)
    np.testing.assert_allclose(dimers.true_moles, true, rtol=1e-12)


def test_one_acid_alone_follows_the_quadratic():
    # K p^2 + p = P solved by hand: p = (sqrt(1 + 4 K P) - 1) / (2 K).
    K, P = np.array([0.02, 0.5, 30.0]), np.array([100.0, 3.0, 0.1])
    monomer = (np.sqrt(1.0 + 4.0 * K * P) - 1.0) / (2.0 * K)
    dimers = dimer_equilibrium(np.log(K)[:, None], P, np.ones((3, 1)))
    np.testing.assert_allclose(np.exp(dimers.ln_monomer[:, 0]), monomer / P, rtol=1e-12)


def test_without_acids_nothing_happens():
    dimers = dimer_equilibrium(np.full((2, 2), -np.inf), np.array([10.0, 1e4]), np.eye(2))
    np.testing.assert_array_equal(dimers.ln_monomer, 0.0)
    np.testing.assert_array_equal(dimers.true_moles, 1.0)


def test_dimers_vanish_at_low_pressure_and_rule_at_high():
    ln_K, y = np.zeros((2, 1)), np.ones((2, 1))
    dimers = dimer_equilibrium(ln_K, np.array([1e-9, 1e9]), y)
    assert dimers.true_moles[0] == pytest.approx(1.0, abs=1e-8)
    assert dimers.true_moles[1] == pytest.approx(0.5, abs=1e-4)  # 1 / (2 sqrt(K P)) is left over


@pytest.mark.parametrize(
    ("smiles", "takes_part"),
    [("CC(=O)O", True), ("CCCCCC(=O)O", True), ("CCO", False), ("OC(=O)CCC(=O)O", False)],
)
def test_who_forms_dimers(smiles, takes_part):
    molecule = molecule_from_smiles(smiles)
    assert (dimerisation(molecule.mol, molecule.canonical_smiles) is not None) is takes_part


def test_a_long_acid_borrows_its_constant_and_says_so():
    molecule = molecule_from_smiles("CCCCCC(=O)O")
    found = dimerisation(molecule.mol, molecule.canonical_smiles)
    assert found is not None and found.estimated and "butanoic" in found.source
