import tracemalloc

import numpy as np
import pytest

from groups.activity import activity_model, blocks
from groups.errors import FractionSumError, OutOfRangeError, ShapeError

WATER, ETHANOL, HEXANE = {16: 1}, {1: 1, 2: 1, 14: 1}, {1: 2, 2: 4}
TEMPERATURES = np.linspace(280.0, 400.0, 5)
COMPOSITIONS = np.array([[0.2, 0.3, 0.5], [0.0, 1.0, 0.0], [0.6, 0.4, 0.0], [0.0, 0.0, 1.0]])


@pytest.fixture
def model():
    return activity_model([WATER, ETHANOL, HEXANE], "unifac-dortmund")


def point_by_point(model, temperatures, compositions):
    return np.array([model.ln_gamma(T, x) for T, x in zip(temperatures, compositions, strict=True)])


def test_a_column_of_temperatures_makes_a_grid(model):
    grid = model.ln_gamma(TEMPERATURES[:, None], COMPOSITIONS)
    assert grid.shape == (5, 4, 3)
    for T, row in zip(TEMPERATURES, grid, strict=True):
        expected = point_by_point(model, [T] * 4, COMPOSITIONS)
        np.testing.assert_allclose(row, expected, rtol=1e-12, atol=1e-12)


def test_a_column_of_compositions_makes_the_transposed_grid(model):
    grid = model.ln_gamma(TEMPERATURES, COMPOSITIONS[:, None])
    transposed = model.ln_gamma(TEMPERATURES[:, None], COMPOSITIONS).swapaxes(0, 1)
    np.testing.assert_allclose(grid, transposed, rtol=1e-12, atol=1e-12)


def test_one_temperature_a_point_goes_pair_by_pair(model):
    pairs = model.ln_gamma(TEMPERATURES[:4], COMPOSITIONS)
    expected = point_by_point(model, TEMPERATURES[:4], COMPOSITIONS)
    np.testing.assert_allclose(pairs, expected, rtol=1e-12, atol=1e-12)


def test_equal_temperatures_and_one_temperature_agree(model):
    np.testing.assert_array_equal(
        model.ln_gamma(np.full(4, 330.0), COMPOSITIONS), model.ln_gamma(330.0, COMPOSITIONS)
    )


def test_equal_temperatures_still_make_a_grid_with_a_column_of_compositions(model):
    grid = model.ln_gamma(np.full(5, 330.0), COMPOSITIONS[:, None])
    assert grid.shape == (4, 5, 3)
    expected = model.ln_gamma(330.0, COMPOSITIONS)[:, None]
    np.testing.assert_allclose(grid, np.broadcast_to(expected, grid.shape), rtol=1e-12, atol=1e-12)


def test_axes_that_interleave_are_broadcast(model):
    T = TEMPERATURES[:3].reshape(3, 1, 1) + np.arange(2.0)
    x = COMPOSITIONS.reshape(4, 1, 3)
    answer = model.ln_gamma(T, x)
    assert answer.shape == (3, 4, 2, 3)
    np.testing.assert_allclose(
        answer[2, 3, 1], model.ln_gamma(T[2, 0, 1], x[3, 0]), rtol=1e-12, atol=1e-12
    )


def test_no_points_give_no_answers(model):
    assert model.ln_gamma(300.0, np.empty((0, 3))).shape == (0, 3)
    assert model.ln_gamma(np.empty(0), np.empty((0, 3))).shape == (0, 3)


@pytest.mark.parametrize("numbers", [1, 7, 64])
def test_the_size_of_a_block_does_not_change_the_answer(model, monkeypatch, numbers):
    T, x = TEMPERATURES[:, None], COMPOSITIONS
    names = ("ln_gamma", "ln_gamma_slope", "ln_gamma_curvature", "ln_gamma_mole_derivatives")
    whole = [getattr(model, name)(T, x) for name in names]
    monkeypatch.setattr(blocks, "BLOCK_NUMBERS", numbers)
    for name, expected in zip(names, whole, strict=True):
        np.testing.assert_allclose(getattr(model, name)(T, x), expected, rtol=1e-12, atol=1e-14)


def test_a_large_grid_needs_little_more_memory_than_its_answer(model):
    T, x = np.linspace(280.0, 400.0, 2000)[:, None], np.tile(COMPOSITIONS, (25, 1))
    model.ln_gamma(T[:2], x)
    tracemalloc.start()
    answer = model.ln_gamma(T, x)
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    # A dozen working arrays of one block (256 KiB each) beside the answer itself.
    assert peak < answer.nbytes + 12 * 8 * blocks.BLOCK_NUMBERS


def test_nan_passes_through_to_its_own_point_only(model):
    x = COMPOSITIONS.copy()
    x[1] = np.nan
    answer = model.ln_gamma(330.0, x)
    assert np.isnan(answer[1]).all()
    assert np.isfinite(answer[[0, 2, 3]]).all()
    assert np.isnan(model.ln_gamma([330.0, np.nan], COMPOSITIONS[:2])).any(axis=1).tolist() == [
        False,
        True,
    ]


@pytest.mark.parametrize("temperature_K", [0.0, -5.0, np.inf, [300.0, -1.0, 300.0, 300.0]])
def test_a_temperature_that_is_none_is_refused(model, temperature_K):
    with pytest.raises(OutOfRangeError, match="temperature_K"):
        model.ln_gamma(temperature_K, COMPOSITIONS)


def test_a_negative_fraction_is_refused_with_its_value(model):
    with pytest.raises(OutOfRangeError, match=r"-0\.1"):
        model.ln_gamma(300.0, [-0.1, 0.5, 0.6])


def test_fractions_that_do_not_sum_to_one_are_refused_with_their_sum(model):
    with pytest.raises(FractionSumError, match=r"0\.9"):
        model.ln_gamma(300.0, [[0.2, 0.3, 0.5], [0.2, 0.2, 0.5]])


@pytest.mark.parametrize("x", [0.5, [0.5, 0.5], [[0.25] * 4]])
def test_a_wrong_number_of_components_is_refused(model, x):
    with pytest.raises(ShapeError, match="3 components"):
        model.ln_gamma(300.0, x)


def test_temperatures_that_do_not_fit_the_points_are_refused(model):
    with pytest.raises(ShapeError, match="do not fit"):
        model.ln_gamma(TEMPERATURES, COMPOSITIONS)
