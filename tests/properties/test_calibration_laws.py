"""Weighted, corrected and drawn models obey thermodynamics and agree with the dilute answers."""

from functools import cache

import numpy as np
import pytest

from groups.confidence.calibration import (
    AutoModel,
    auto_model,
    dilute_answers,
    ln_gamma_interval,
    sample_models,
)
from groups.confidence.calibration.addition import added_ln_gamma, added_mole_derivatives
from groups.structure.molecule import Molecule, molecule_from_smiles

MIXTURES = [("CCO", "O"), ("CCO", "O", "CC(C)=O"), ("CCCCCC", "c1ccccc1", "CN(C)C=O", "CO")]


def molecules_of(smiles: tuple[str, ...]) -> list[Molecule]:
    return [molecule_from_smiles(one) for one in smiles]


@cache
def model_of(smiles: tuple[str, ...]) -> AutoModel:
    found = auto_model(molecules_of(smiles))
    assert found is not None
    return found


def points(n: int, number: int = 12) -> np.ndarray:
    return np.random.default_rng(3).dirichlet(np.ones(n), number)


@pytest.mark.parametrize("power", [2, 4])
@pytest.mark.parametrize("n", [2, 3, 5])
def test_an_addition_follows_from_its_excess_gibbs_energy(power, n):
    random = np.random.default_rng(11)
    a = random.normal(size=(n, n)) * (1.0 - np.eye(n))

    def total_gibbs(amounts):
        x = amounts / amounts.sum(axis=-1, keepdims=True)
        return amounts.sum(axis=-1) * np.einsum("...i,ij,...j->...", x, a, x**power)

    x, step = points(n), 1e-6
    for k in range(n):
        shift = step * np.eye(n)[k]
        slope = (total_gibbs(x + shift) - total_gibbs(x - shift)) / (2.0 * step)
        # central difference with step 1e-6 of numbers about 1: rounding leaves about 1e-10
        assert added_ln_gamma(a[None], power, x)[0, :, k] == pytest.approx(slope, abs=1e-8)


@pytest.mark.parametrize("power", [2, 4])
def test_mole_derivatives_of_an_addition_match_differences(power):
    n, step = 4, 1e-6
    a = np.random.default_rng(5).normal(size=(n, n)) * (1.0 - np.eye(n))
    x = points(n)
    found = added_mole_derivatives(a, power, x)
    for j in range(n):
        ends = []
        for sign in (1.0, -1.0):
            amounts = x + sign * step * np.eye(n)[j]
            fractions = amounts / amounts.sum(axis=-1, keepdims=True)
            ends.append(added_ln_gamma(a[None], power, fractions)[0])
        slope = (ends[0] - ends[1]) / (2.0 * step)
        assert found[:, :, j] == pytest.approx(slope, abs=1e-8)


@pytest.mark.parametrize("smiles", MIXTURES)
def test_gibbs_duhem_holds_for_auto_and_for_every_draw(smiles):
    auto = model_of(smiles)
    x = points(len(smiles))
    drawn = sample_models(auto.model, molecules_of(smiles), 330.0, 3, seed=1)
    for model in (auto.model, *drawn):
        derivatives = model.ln_gamma_mole_derivatives(330.0, x)
        # sum_i x_i d ln gamma_i / dn_j = 0 in exact arithmetic
        assert np.abs(np.einsum("pi,pij->pj", x, derivatives)).max() < 1e-11


@pytest.mark.parametrize("smiles", MIXTURES)
def test_pure_components_have_no_error(smiles):
    pure = np.eye(len(smiles))
    drawn = sample_models(model_of(smiles).model, molecules_of(smiles), 330.0, 20, seed=2)
    own = np.diagonal(drawn.ln_gamma(330.0, pure), axis1=1, axis2=2)
    assert np.abs(own).max() < 1e-12
    other = ~np.eye(len(smiles), dtype=bool)
    assert drawn.errors(pure).std(axis=0)[other].min() > 0.01


def test_draws_are_the_same_for_the_same_seed_and_as_a_whole_or_one_by_one():
    smiles = MIXTURES[1]
    auto, molecules, x = model_of(smiles), molecules_of(smiles), points(3)
    first, second, third = (sample_models(auto.model, molecules, 300.0, 4, s) for s in (7, 7, 8))
    assert np.array_equal(first.dilute, second.dilute)
    assert not np.array_equal(first.dilute, third.dilute)
    whole = first.ln_gamma(300.0, x)
    assert whole.shape == (4, len(x), 3)
    for row, model in zip(whole, first, strict=True):
        assert model.ln_gamma(300.0, x) == pytest.approx(row, abs=1e-13)


@pytest.mark.parametrize("level", [0.5, 0.9])
def test_draws_fill_the_interval_they_come_from(level):
    smiles = MIXTURES[0]
    molecules = molecules_of(smiles)
    auto = model_of(smiles)
    drawn = sample_models(auto.model, molecules, 330.0, 4000, seed=5)
    value = drawn.ln_gamma(330.0, np.array([[0.0, 1.0]]))[:, 0, 0]
    _, lower, upper = ln_gamma_interval([(molecules[0], molecules[1], 330.0)], level)
    inside = np.mean((value >= lower[0]) & (value <= upper[0]))
    # 4,000 draws: standard error of a share 0.5 is 0.008
    assert inside == pytest.approx(level, abs=0.03)


@pytest.mark.parametrize("temperature_K", [298.15, 350.0])
def test_the_mixture_model_meets_the_dilute_answer(temperature_K):
    molecules = molecules_of(MIXTURES[0])
    answer = dilute_answers([(molecules[0], molecules[1], temperature_K)]).ln_gamma[0]
    limit = model_of(MIXTURES[0]).model.ln_gamma(temperature_K, np.array([0.0, 1.0]))[0]
    # the same equations in two forms; both keep full precision
    assert answer == pytest.approx(limit, abs=1e-9)


def test_the_order_of_components_does_not_matter():
    x = points(3)
    forward = model_of(MIXTURES[1]).model.ln_gamma(320.0, x)
    backward = model_of(MIXTURES[1][::-1]).model.ln_gamma(320.0, x[:, ::-1])
    assert backward[:, ::-1] == pytest.approx(forward, abs=1e-10)


def test_pairs_in_a_batch_do_not_touch_each_other():
    pairs = [(*molecules_of(("CCO", "O")), 300.0), (*molecules_of(("CCCCCC", "CO")), 320.0)]
    together = dilute_answers(pairs)
    for k, pair in enumerate(pairs):
        alone = dilute_answers([pair])
        assert alone.ln_gamma[0] == pytest.approx(together.ln_gamma[k], abs=1e-12)
        assert alone.scale[0] == pytest.approx(together.scale[k], abs=1e-12)


def test_a_pair_that_no_table_describes_has_no_number():
    # no published table has a group for a phosphane
    pairs = [(*molecules_of(("CP(C)C", "O")), 300.0)]
    value, lower, upper = ln_gamma_interval(pairs)
    assert np.isnan([value[0], lower[0], upper[0]]).all()
    assert auto_model(molecules_of(("CP(C)C", "O"))) is None
