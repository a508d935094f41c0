import numpy as np
import pytest

from groups.activity import (
    activity_model,
    batch,
    ln_gamma_infinite,
    ln_gamma_infinite_pairs,
    missing_parameter_pairs,
)
from groups.errors import InvalidInputError, MissingParameterError, OutOfRangeError, ShapeError
from groups.parameters import METHODS, table

HEXANE, BUTANE, ETHANOL = {1: 2, 2: 4}, {1: 2, 2: 2}, {1: 1, 2: 1, 14: 1}


def random_molecules(method, n, seed):
    rng, parameters = np.random.default_rng(seed), table(method)
    numbers = parameters.subgroup_numbers[parameters.Q > 0.0]
    return [
        {int(k): int(rng.integers(1, 6)) for k in rng.choice(numbers, rng.integers(1, 4), False)}
        for _ in range(n)
    ]


@pytest.mark.parametrize("method", METHODS)
def test_every_pair_agrees_with_the_model_and_every_gap_with_its_error(method, monkeypatch):
    monkeypatch.setattr(batch, "CHUNK_ROWS", 64)  # so that several chunks are crossed
    n = 300
    solutes, solvents = random_molecules(method, n, 1), random_molecules(method, n, 2)
    # Random groups mostly lack a parameter; molecules of the first subgroups mostly have them.
    solutes += [HEXANE] * n
    solvents += solvents
    T = np.random.default_rng(3).uniform(250.0, 450.0, 2 * n)
    values = ln_gamma_infinite_pairs(method, solutes, solvents, T)
    missing = missing_parameter_pairs(method, solutes, solvents)
    found = 0
    for k in range(2 * n):
        try:
            model = activity_model([solutes[k], solvents[k]], method)
        except MissingParameterError as error:
            assert np.isnan(values[k])
            assert missing[k] == error.pairs
            continue
        found += 1
        expected = ln_gamma_infinite(model, T[k])[0, 1]
        assert missing[k] == ()
        assert values[k] == pytest.approx(expected, rel=1e-12, abs=1e-12)
    assert found > 20
    assert np.isnan(values).any() or not np.isnan(table(method).a).any()


def test_one_solute_serves_all_solvents_and_one_solvent_all_solutes():
    pair = ln_gamma_infinite_pairs("unifac", [ETHANOL, ETHANOL], [HEXANE, BUTANE], 300.0)
    np.testing.assert_array_equal(
        ln_gamma_infinite_pairs("unifac", [ETHANOL], [HEXANE, BUTANE], 300.0), pair
    )
    np.testing.assert_array_equal(
        ln_gamma_infinite_pairs("unifac", [HEXANE, BUTANE], [ETHANOL], [300.0, 300.0]),
        ln_gamma_infinite_pairs("unifac", [HEXANE, BUTANE], [ETHANOL, dict(ETHANOL)], 300.0),
    )


def test_a_molecule_in_itself_is_ideal():
    assert ln_gamma_infinite_pairs("psrk", [ETHANOL], [ETHANOL], 350.0) == pytest.approx(
        0, abs=1e-13
    )


def test_no_pairs_give_no_answers():
    assert ln_gamma_infinite_pairs("unifac", [], [], 300.0).shape == (0,)
    assert missing_parameter_pairs("unifac", [], []) == ()


def test_sequences_that_do_not_fit_are_refused():
    with pytest.raises(ShapeError, match="3 solutes do not fit 2 solvents"):
        ln_gamma_infinite_pairs("unifac", [HEXANE] * 3, [ETHANOL] * 2, 300.0)
    with pytest.raises(ShapeError, match="3 solutes do not fit 0 solvents"):
        ln_gamma_infinite_pairs("unifac", [HEXANE] * 3, [], 300.0)
    with pytest.raises(ShapeError, match="do not fit 2 pairs"):
        ln_gamma_infinite_pairs("unifac", [HEXANE] * 2, [ETHANOL] * 2, [300.0, 310.0, 320.0])


def test_a_temperature_that_is_none_is_refused():
    with pytest.raises(OutOfRangeError):
        ln_gamma_infinite_pairs("unifac", [HEXANE], [ETHANOL], -1.0)


@pytest.mark.parametrize("counts", [{}, {9999: 1}])
def test_a_molecule_without_known_groups_is_refused(counts):
    with pytest.raises(InvalidInputError):
        ln_gamma_infinite_pairs("unifac", [HEXANE], [counts], 300.0)
