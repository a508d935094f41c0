"""Laws that fugacity coefficients of a vapour and of the equation of state obey."""

import sys
from functools import lru_cache
from pathlib import Path

import numpy as np
import pytest

sys.path.insert(0, str(Path(__file__).parents[1] / "unit" / "vapour"))

from vapour_mixtures import virial

from groups.structure.molecule import molecule_from_smiles
from groups.vapour.psrk import PsrkModel, phase, psrk_flash, psrk_model
from groups.vapour.psrk.model import slopes, temperature_slope
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3

ACIDS = ("CC(=O)O", "CCC(=O)O", "O", "CCOC(C)=O")
PLAIN = ("CCO", "CC(C)=O", "CCCCCC", "c1ccccc1")
GASES = ("O=C=O", "C", "CO", "CCCCCC", "O")
N = 40


def points(n_components: int, seed: int = 5) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    rng = np.random.default_rng(seed)
    T, P = rng.uniform(300.0, 450.0, N), np.exp(rng.uniform(0.0, 6.0, N))
    # Away from the corners, so that differences to both sides exist.
    return T, P, 0.98 * rng.dirichlet(np.ones(n_components), N) + 0.02 / n_components


def derivative(function, values, step):
    return (function(values + step) - function(values - step)) / (2.0 * step)


@pytest.mark.parametrize("smiles", [ACIDS, PLAIN])
def test_virial_ln_phi_obeys_gibbs_duhem(smiles):
    model, _ = virial(*smiles)
    T, P, y = points(len(smiles))
    h = 1e-5
    total = np.zeros(N)
    for i in range(len(smiles) - 1):
        direction = np.zeros(len(smiles))
        direction[[i, -1]] = 1.0, -1.0
        slope = derivative(
            lambda s, d=direction: model.ln_fugacity_coefficients(T, P, y + s[:, None] * d),
            np.zeros(N),
            h,
        )
        total = np.maximum(total, np.abs((y * slope).sum(axis=1)))
    # h^2 of the difference and rounding over h.
    assert total.max() < 1e-7


@pytest.mark.parametrize("smiles", [ACIDS, PLAIN])
def test_pressure_moves_the_virial_ln_phi_by_the_partial_volume(smiles):
    # d ln phi_i / dP = vbar_i / RT - 1/P; sum_i y_i gives (Z - 1) / P, Z computed apart from phi.
    model, _ = virial(*smiles)
    T, P, y = points(len(smiles))
    slope = derivative(
        lambda s: model.ln_fugacity_coefficients(T, P * np.exp(s), y),
        np.zeros(N),
        1e-5,
    )
    Z = model.compressibility(T, P, y)
    np.testing.assert_allclose((y * slope).sum(axis=1), Z - 1.0, atol=1e-8)


def test_virial_phi_follows_from_the_moles_of_the_whole_volume():
    # ln phi_i is the integral of (vbar_i/RT - 1/P) dP; vbar_i = d(n V)/dn_i by differences.
    model, _ = virial(*ACIDS)
    T, P, y = points(4)
    h = 1e-6

    def volume(P_now, moles):
        total = moles.sum(axis=1)
        Z = model.compressibility(T, P_now, moles / total[:, None])
        return Z * total * GAS_CONSTANT_KPA_CM3 * T / P_now

    nodes, weights = np.polynomial.legendre.leggauss(40)
    share, weight = 0.5 * (nodes + 1.0), 0.5 * weights
    for i in (0, 2):
        step = h * np.eye(4)[i]
        answer = np.zeros(N)
        # In sqrt(P): the dimers make ln phi start like P, smooth enough for the quadrature.
        for s, w in zip(share, weight, strict=True):
            now = P * s**2
            partial = (volume(now, y + step) - volume(now, y - step)) / (2.0 * h)
            answer += w * 2.0 * P * s * (partial / (GAS_CONSTANT_KPA_CM3 * T) - 1.0 / now)
        ln_phi = model.ln_fugacity_coefficients(T, P, y)[:, i]
        np.testing.assert_allclose(answer, ln_phi, atol=1e-5)


@pytest.mark.parametrize("smiles", [ACIDS, PLAIN])
def test_the_order_of_components_changes_nothing(smiles):
    order = [2, 0, 3, 1]
    T, P, y = points(4)
    here = virial(*smiles)[0].ln_correction(T, P, y)
    there = virial(*[smiles[i] for i in order])[0].ln_correction(T, P, y[:, order])
    np.testing.assert_allclose(there, here[:, order], atol=1e-12)


def test_a_vapour_of_acids_becomes_ideal_at_no_pressure():
    model, _ = virial(*ACIDS)
    T, _, y = points(4)
    ln_phi = model.ln_fugacity_coefficients(T, np.full(N, 1e-7), y)
    np.testing.assert_allclose(ln_phi, 0.0, atol=1e-5)  # K P is below 1e-5 at 300 K


@lru_cache(maxsize=4)
def equation(*smiles: str) -> PsrkModel:
    return psrk_model([molecule_from_smiles(text) for text in smiles])[0]


@pytest.mark.parametrize("root", ["liquid", "vapour"])
def test_equation_of_state_slopes_are_those_of_its_ln_phi(root):
    model = equation(*GASES)
    T, P, x = points(5)
    P = 10.0 * P
    at = phase(model, T, P, x, root)
    change, h = slopes(model, at), 1e-5

    def ln_phi(moles):
        return phase(model, T, P, moles / moles.sum(axis=1, keepdims=True), root).ln_phi

    for j in range(5):
        step = h * np.eye(5)[j]
        numeric = (ln_phi(x + step) - ln_phi(x - step)) / (2.0 * h)
        scale = 1.0 + np.abs(change.moles[:, :, j])
        np.testing.assert_allclose(numeric / scale, change.moles[:, :, j] / scale, atol=2e-6)
    by_P = derivative(lambda s: phase(model, T, P * np.exp(s), x, root).ln_phi, np.zeros(N), h)
    np.testing.assert_allclose(by_P, change.ln_pressure, atol=1e-6)
    by_T = derivative(lambda t: phase(model, t, P, x, root).ln_phi, T, 1e-3)
    np.testing.assert_allclose(by_T, temperature_slope(model, at), atol=1e-6)


@pytest.mark.parametrize("root", ["liquid", "vapour"])
def test_equation_of_state_obeys_gibbs_duhem_and_its_volume(root):
    model = equation(*GASES)
    T, P, x = points(5)
    at = phase(model, T, 10.0 * P, x, root)
    change = slopes(model, at)
    np.testing.assert_allclose(np.einsum("nij,nj->ni", change.moles, x), 0.0, atol=1e-9)
    np.testing.assert_allclose(change.moles, change.moles.swapaxes(1, 2), atol=1e-9)
    # sum x_i d ln phi_i / d ln P = Z - 1
    total = (x * change.ln_pressure).sum(axis=1)
    np.testing.assert_allclose(total, at.compressibility - 1.0, atol=1e-10)


def test_a_dilute_gas_of_the_equation_of_state_is_ideal():
    model = equation(*GASES)
    T, _, x = points(5)
    np.testing.assert_allclose(phase(model, T, np.full(N, 1e-6), x, "vapour").ln_phi, 0, atol=1e-6)


def test_every_flash_is_verified_or_says_why_not():
    model = equation("C", "CC", "CCC", "CCCCC", "CCCCCCCCCC")
    rng = np.random.default_rng(3)
    T, P = rng.uniform(220.0, 480.0, 400), np.exp(rng.uniform(4.0, 10.0, 400))
    z = rng.dirichlet(np.ones(5), 400)
    answer = psrk_flash(model, T, P, z)
    assert answer.converged.mean() >= 0.995  # what the issue of this package asks for
    for k in np.flatnonzero(~answer.converged):
        assert answer.failure[k] and np.isnan(answer.vapour_fraction[k])
    two = np.flatnonzero([name == "two-phase" for name in answer.phase])
    assert len(two) > 100
    dense = phase(model, T[two], P[two], answer.liquid[two], "stable")
    light = phase(model, T[two], P[two], answer.vapour[two], "stable")
    gap = np.log(answer.liquid[two] / answer.vapour[two]) + dense.ln_phi - light.ln_phi
    assert np.abs(gap).max() < 1e-8
    share = answer.vapour_fraction[two, None]
    balance = share * answer.vapour[two] + (1.0 - share) * answer.liquid[two] - z[two]
    assert np.abs(balance).max() < 1e-10


def test_no_split_of_a_binary_lies_below_the_flash():
    # Brute force: the lowest chord of the Gibbs energy over a fine grid of compositions.
    model = equation("O=C=O", "CO")
    grid = np.linspace(1e-4, 1.0 - 1e-4, 400)
    x = np.stack([grid, 1.0 - grid], axis=1)
    rng = np.random.default_rng(9)
    for _ in range(25):
        T, P, z1 = rng.uniform(270, 330), np.exp(rng.uniform(5, 9.2)), rng.uniform(0.02, 0.98)
        at = phase(model, np.full(400, T), np.full(400, P), x, "stable")
        g = (x * (np.log(x) + at.ln_phi)).sum(axis=1)
        left, right = grid < z1, grid > z1
        a, b = grid[left][:, None], grid[right][None, :]
        lowest = ((b - z1) * g[left][:, None] + (z1 - a) * g[right][None, :]) / (b - a)
        answer = psrk_flash(model, T, P, [[z1, 1.0 - z1]])
        assert answer.converged.all()
        energy, beta = 0.0, answer.vapour_fraction[0]
        for part, amount in ((answer.liquid, 1.0 - beta), (answer.vapour, beta)):
            if amount > 0.0:
                one = phase(model, np.array([T]), np.array([P]), part, "stable")
                energy += amount * float((part * (np.log(part) + one.ln_phi)).sum())
        # The grid cannot lie lower than the true minimum, beyond rounding.
        assert energy <= lowest.min() + 1e-9
