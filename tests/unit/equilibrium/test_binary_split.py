"""Binary splits against the analytic binodal of the symmetric Margules liquid."""

import numpy as np
import pytest

from groups.equilibrium import binary_split, binary_splits, stability
from groups.errors import ShapeError
from tests.unit.equilibrium.equilibrium_mixtures import Margules, Regular


def symmetric(strength: float) -> Regular:
    return Regular(np.array([[0.0, strength], [strength, 0.0]]))


@pytest.mark.parametrize("strength", [2.0001, 2.01, 2.5, 3.0, 6.0, 12.0, 20.0, 30.0, 60.0])
def test_the_symmetric_binodal_satisfies_its_closed_equation(strength):
    # gE/RT = A x1 x2: both liquids satisfy ln(x2/x1) = A (1 - 2 x1).
    split = binary_split(symmetric(strength), 300.0)
    assert split is not None
    for x1, x2 in split:
        # 1e-8: near the consolute point (A = 2) the equation is flat to the third order.
        assert np.log(x2 / x1) == pytest.approx(strength * (x2 - x1), rel=1e-9, abs=1e-8)
    assert split[0][0] < 0.5 < split[1][0]
    assert split[0][0] == pytest.approx(split[1][1], rel=1e-4)


@pytest.mark.parametrize("strength", [-5.0, 0.0, 1.0, 1.99, 1.9999])
def test_a_stable_liquid_has_no_split(strength):
    assert binary_split(symmetric(strength), 300.0) is None


@pytest.mark.parametrize(("A12", "A21"), [(12.0, 2.0), (1.5, 14.0), (25.0, 5.0), (2.4, 1.9)])
def test_both_liquids_of_an_asymmetric_split_have_equal_activities(A12, A21):
    liquid = Margules(A12, A21)
    split = binary_split(liquid, 300.0)
    assert split is not None
    ln_a = [np.log(x) + liquid.ln_gamma(300.0, x) for x in split]
    np.testing.assert_allclose(ln_a[0], ln_a[1], atol=1e-9)  # the tolerance of the search: 1e-10


def test_the_same_split_is_found_with_the_components_swapped():
    first, second = binary_split(Margules(9.0, 2.0), 300.0)
    other_second, other_first = binary_split(Margules(2.0, 9.0), 300.0)
    np.testing.assert_allclose(first, other_first[::-1], rtol=1e-8)
    np.testing.assert_allclose(second, other_second[::-1], rtol=1e-8)


def test_stability_changes_at_the_binodal():
    liquid = symmetric(3.0)
    (x1, _), _ = binary_split(liquid, 300.0)
    points = np.array([0.0, 0.5 * x1, 0.999 * x1, 1.001 * x1, 0.3, 0.5, 1.0])
    result = stability(liquid, 300.0, np.stack([points, 1 - points], axis=1))
    assert result.stable.tolist() == [True, True, True, False, False, False, True]


def test_a_spinodal_liquid_at_the_consolute_composition_is_unstable():
    assert not stability(symmetric(2.0001), 300.0, [0.5, 0.5]).stable[0]
    assert stability(symmetric(1.9999), 300.0, [0.5, 0.5]).stable[0]


def test_a_ternary_liquid_is_unstable_where_one_of_its_binaries_is():
    A = np.array([[0.0, 4.0, 0.2], [4.0, 0.0, 0.3], [0.2, 0.3, 0.0]])
    result = stability(Regular(A), 300.0, [[0.49, 0.49, 0.02], [0.05, 0.05, 0.9], [0.5, 0.5, 0.0]])
    assert result.stable.tolist() == [False, True, False]
    assert (result.distance[[0, 2]] < -0.1).all()


def test_a_split_of_three_components_is_refused():
    with pytest.raises(ShapeError):
        binary_splits(Regular(np.zeros((3, 3))), 300.0)
