import numpy as np
import pytest

from groups.activity import (
    IdealModel,
    WeightedModel,
    activity_model,
    excess_enthalpy,
    excess_gibbs,
    excess_heat_capacity,
    ln_gamma_infinite,
)
from groups.errors import InvalidInputError, ShapeError

HEXANE, ETHANOL = {1: 2, 2: 4}, {1: 1, 2: 1, 14: 1}
T, X = np.array([300.0, 350.0, 400.0]), np.array([[0.0, 1.0], [0.3, 0.7], [0.5, 0.5]])
NAMES = ("ln_gamma", "ln_gamma_slope", "ln_gamma_curvature", "ln_gamma_mole_derivatives")


@pytest.fixture
def models():
    return tuple(activity_model([HEXANE, ETHANOL], name) for name in ("unifac", "unifac-dortmund"))


def test_the_ideal_solution_has_no_excess_of_any_kind(models):
    ideal = IdealModel(2)
    assert ideal.method == "ideal"
    for name in NAMES:
        zero = getattr(ideal, name)(T[:, None], X)
        assert zero.shape == getattr(models[0], name)(T[:, None], X).shape
        assert not zero.any()
    for part in ideal.ln_gamma_parts(T, X):
        assert part.shape == (3, 2) and not part.any()
    for excess in (excess_gibbs, excess_enthalpy, excess_heat_capacity):
        assert not excess(ideal, T, X).any()


@pytest.mark.parametrize("name", NAMES)
def test_every_property_is_summed_with_the_weights(models, name):
    mixed = getattr(WeightedModel(models, (0.25, 0.75)), name)(T, X)
    first, second = (getattr(model, name)(T, X) for model in models)
    np.testing.assert_allclose(mixed, 0.25 * first + 0.75 * second, rtol=1e-13)


def test_the_weighted_parts_add_up_to_the_whole(models):
    model = WeightedModel(models, (0.5, 0.5))
    combinatorial, residual = model.ln_gamma_parts(T, X)
    np.testing.assert_allclose(combinatorial + residual, model.ln_gamma(T, X), rtol=1e-12)
    assert model.method == "unifac+unifac-dortmund"
    assert model.n_components == 2


def test_models_and_weights_must_fit_together(models):
    with pytest.raises(ShapeError, match="2 models cannot take 1 weights"):
        WeightedModel(models, (1.0,))
    with pytest.raises(ShapeError, match="0 models"):
        WeightedModel((), ())
    with pytest.raises(ShapeError, match="same components"):
        WeightedModel((models[0], IdealModel(3)), (0.5, 0.5))


@pytest.mark.parametrize("weights", [(0.5, 0.6), (-0.5, 1.5), (float("nan"), 1.0)])
def test_weights_must_be_shares(models, weights):
    with pytest.raises(InvalidInputError, match="sum to 1"):
        WeightedModel(models, weights)


def test_infinite_dilution_has_the_solute_first(models):
    matrix = ln_gamma_infinite(models[0], T)
    assert matrix.shape == (3, 2, 2)
    hexane_in_ethanol = models[0].ln_gamma(T, [0.0, 1.0])[:, 0]
    np.testing.assert_allclose(matrix[:, 0, 1], hexane_in_ethanol, rtol=1e-12)


def test_the_parts_add_up_and_only_the_residual_knows_temperature(models):
    for model in models:
        combinatorial, residual = model.ln_gamma_parts(T[:, None], X)
        np.testing.assert_allclose(
            combinatorial + residual, model.ln_gamma(T[:, None], X), rtol=1e-12
        )
        np.testing.assert_array_equal(combinatorial[0], combinatorial[2])
        combinatorial += 1.0  # the arrays are the caller's own
