from dataclasses import replace

import numpy as np
import pytest

from groups.activity import GroupContributionModel, activity_model
from groups.activity.composition import counts_matrix
from groups.errors import InvalidInputError, MissingParameterError, UnknownMethodError
from groups.parameters import table

ETHANOL, HEXANE, WATER = {1: 1, 2: 1, 14: 1}, {1: 2, 2: 4}, {16: 1}


def without_parameters(method, *pairs):
    """The table with the parameters of some main-group numbers blanked, in one direction."""
    whole = table(method)
    a = whole.a.copy()
    for i, j in pairs:
        a[whole.main_index(i), whole.main_index(j)] = np.nan
    return replace(whole, a=a)


def model_from(parameters, counts):
    return GroupContributionModel.from_table(parameters, counts_matrix(parameters, counts))


def test_main_groups_that_carry_surface_are_kept_in_the_order_of_the_table():
    model = activity_model([WATER, ETHANOL], "unifac")
    assert model.main_numbers == (1, 5, 7)  # CH2, OH, H2O
    # Hansen et al. 1991: Q of CH3 0.848, CH2 0.540, OH 1.200, H2O 1.400.
    np.testing.assert_allclose(model.groups.surface, [[0, 0, 1.4], [0.848 + 0.54, 1.2, 0]])
    np.testing.assert_allclose(model.groups.area, [1.4, 2.588])
    # R of CH3 0.9011, CH2 0.6744, OH 1.0000, H2O 0.9200.
    np.testing.assert_allclose(model.groups.volume, [0.92, 2.5755])


def test_a_missing_parameter_names_the_main_groups_in_either_direction():
    for pair in ((1, 5), (5, 1)):
        with pytest.raises(MissingParameterError, match=r"1 \(CH2\) with 5 \(OH\)") as caught:
            model_from(without_parameters("unifac", pair), [ETHANOL])
        assert caught.value.pairs == ((1, 5),)
        assert caught.value.method == "unifac"


def test_all_missing_parameters_are_named_at_once():
    parameters = without_parameters("unifac", (1, 5), (7, 5), (7, 1))
    with pytest.raises(MissingParameterError) as caught:
        model_from(parameters, [ETHANOL, WATER])
    assert caught.value.pairs == ((1, 5), (1, 7), (5, 7))


def test_a_pair_that_the_mixture_lacks_is_not_asked_for():
    parameters = without_parameters("unifac", (7, 5))
    assert model_from(parameters, [ETHANOL, HEXANE]).main_numbers == (1, 5)


def test_a_published_gap_is_refused():
    parameters = table("unifac")
    absent = np.argwhere(np.isnan(parameters.a))
    first = absent[0]
    numbers = [
        int(parameters.subgroup_numbers[(parameters.subgroup_main == k) & (parameters.Q > 0)][0])
        for k in first
    ]
    with pytest.raises(MissingParameterError) as caught:
        activity_model([{numbers[0]: 1}, {numbers[1]: 1}], "unifac")
    assert set(caught.value.pairs[0]) == {int(k) for k in parameters.main_numbers[first]}


def test_a_main_group_without_surface_needs_no_parameter():
    # Subgroup 4 of unifac is C, Q = 0: alone in its main group it cannot touch anything.
    parameters = without_parameters("unifac", (1, 5))
    assert table("unifac").Q[table("unifac").subgroup_index(4)] == 0.0
    model = model_from(parameters, [{4: 1, 14: 4}, {14: 1}])
    assert model.main_numbers == (5,)
    assert np.isfinite(model.ln_gamma(300.0, [0.4, 0.6])).all()


@pytest.mark.parametrize("counts", [{}, {1: 0}, {4: 2}])
def test_a_molecule_without_groups_or_surface_is_refused(counts):
    with pytest.raises(InvalidInputError, match="Component 1 has no groups"):
        activity_model([HEXANE, counts], "unifac")


def test_no_components_are_refused():
    with pytest.raises(InvalidInputError, match="at least one"):
        activity_model([], "unifac")


@pytest.mark.parametrize("counts", [{1: -1}, {1: float("nan")}])
def test_a_negative_or_absent_count_is_refused(counts):
    with pytest.raises(InvalidInputError, match="group count"):
        activity_model([counts], "unifac")


def test_an_unknown_subgroup_is_refused_by_number():
    with pytest.raises(InvalidInputError, match="no subgroup 9999") as caught:
        activity_model([HEXANE, {9999: 1}], "unifac")
    assert caught.value.field == "components[1]"


def test_an_unknown_method_is_refused():
    with pytest.raises(UnknownMethodError):
        activity_model([HEXANE], "nothing")
