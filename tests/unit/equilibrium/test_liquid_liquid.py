"""Liquids alone: distribution, mutual solubilities, consolute points, ternary binodals."""

import numpy as np
import pytest

from groups.equilibrium import (
    consolute_points,
    distribution_coefficients,
    liquid_flash,
    mutual_solubility,
    stability,
    ternary_binodal,
)
from groups.errors import OutOfRangeError, ShapeError
from tests.unit.equilibrium.equilibrium_mixtures import Regular


def regular(*pairs: float, power: float = 0.0) -> Regular:
    n = next(k for k in range(2, 9) if k * (k - 1) // 2 == len(pairs))
    A = np.zeros((n, n))
    A[np.triu_indices(n, 1)] = pairs
    return Regular(A + A.T, power=power)


def test_an_absent_solute_distributes_as_its_activity_coefficients_say():
    liquid = regular(3.5, 2.0, -0.5)
    found = distribution_coefficients(liquid, 300.0, [[0.5, 0.5, 0.0], [0.5, 0.5 - 1e-8, 1e-8]])
    x = found.liquids.liquids[0, :2]
    # Regular solution at infinite dilution: ln gamma_3 = A13 x1 + A23 x2 - A12 x1 x2.
    ln_gamma = 2.0 * x[:, 0] - 0.5 * x[:, 1] - 3.5 * x[:, 0] * x[:, 1]
    assert found.coefficient[0, 2] == pytest.approx(np.exp(ln_gamma[0] - ln_gamma[1]), rel=1e-9)
    # A part in 1e8 of solute moves the solvents by as much.
    assert found.coefficient[1, 2] == pytest.approx(found.coefficient[0, 2], rel=1e-6)


def test_a_single_liquid_has_no_distribution():
    found = distribution_coefficients(regular(1.0), 300.0, [0.5, 0.5])
    assert np.isnan(found.coefficient).all() and found.liquids.phase == ("liquid",)


def test_four_liquids_components_split_into_the_lowest_gibbs_energy():
    liquid = regular(4.0, 3.5, 0.3, 3.8, 0.8, 0.2)
    z = np.random.default_rng(2).dirichlet(np.ones(4), 50)
    found = liquid_flash(liquid, 300.0, z)
    assert found.converged.all()
    assert {"two liquids", "liquid"} == set(found.phase)
    rows, places = np.nonzero(np.isfinite(found.liquids[:, :, 0]))
    assert stability(liquid, 300.0, found.liquids[rows, places]).stable.all()


@pytest.mark.parametrize(
    ("power", "kind", "T"),
    # gE/RT = A (350/T)^p x1 x2 with A = 2.5: the consolute point is where the factor is 2/2.5.
    [(1.0, "upper", 350.0 * 2.5 / 2.0), (-1.0, "lower", 350.0 * 2.0 / 2.5)],
)
def test_the_consolute_point_of_the_symmetric_liquid(power, kind, T):
    found = mutual_solubility(regular(2.5, power=power), np.linspace(250.0, 500.0, 11))
    (point,) = found.consolute_points
    assert point.kind == kind
    assert point.temperature_K == pytest.approx(T, abs=1e-4)  # sought within 1e-6 K
    # At the consolute point the slope is flat to the second order: x to the root of the error.
    assert point.mole_fractions[0] == pytest.approx(0.5, abs=1e-4)
    below = found.temperature_K < T
    np.testing.assert_array_equal(found.splits, below if kind == "upper" else ~below)


def test_the_solubilities_are_those_of_the_closed_equation():
    found = mutual_solubility(regular(3.0, power=1.0), [300.0, 350.0])
    for T, x in zip(found.temperature_K, found.first, strict=True):
        A = 3.0 * 350.0 / T
        assert np.log(x[1] / x[0]) == pytest.approx(A * (x[1] - x[0]), abs=1e-9)


def test_a_range_of_no_width_has_no_consolute_points():
    with pytest.raises(OutOfRangeError):
        consolute_points(regular(2.5), 300.0, 300.0)


def test_the_plait_point_of_a_diluted_symmetric_gap():
    # Only 1 and 2 dislike each other: tie lines keep x3, and the gap closes at A (1 - x3) = 2.
    found = ternary_binodal(regular(3.0, 0.0, 0.0), 300.0, tie_lines=20)
    (region,) = found.regions
    assert region.whole and len(region.first) == 20
    np.testing.assert_allclose(region.first[:, 2], region.second[:, 2], atol=1e-8)
    np.testing.assert_allclose(region.first[:, 0], region.second[:, 1], atol=1e-8)
    (plait,) = region.plait_points
    # 1e-4: the eigenvalue is zero within 1e-7, and its change is taken by differences.
    np.testing.assert_allclose(plait, 1.0 / 3.0, atol=1e-4)
    for x in region.first[:-1]:
        rest = 1.0 - x[2]
        assert np.log(x[1] / x[0]) == pytest.approx(3.0 * (x[1] - x[0]), abs=1e-8)
        assert rest > 2.0 / 3.0


def test_a_band_runs_from_one_gap_to_another():
    # Component 3 dislikes both others, which do not mind each other: no plait point.
    found = ternary_binodal(regular(0.2, 3.5, 3.0), 300.0, tie_lines=15)
    (region,) = found.regions
    assert region.plait_points == () and region.whole
    middles = 0.5 * (region.first + region.second)
    assert {middles[0].argmin(), middles[-1].argmin()} == {0, 1}


def test_three_liquids_make_a_triangle():
    found = ternary_binodal(regular(4.0, 4.0, 4.0), 300.0)
    (triangle,) = found.triangles
    # By symmetry: one liquid rich in each, the others equal in it.
    corner = triangle[triangle[:, 0].argmax()]
    assert corner[1] == pytest.approx(corner[2], abs=1e-8)
    assert len(found.regions) == 3 and not any(region.whole for region in found.regions)


def test_an_island_has_two_plait_points():
    # Attraction of 1 and 2 drives 3 out of their mixture although no pair splits.
    found = ternary_binodal(regular(-6.0, 1.9, 1.9), 300.0, tie_lines=10)
    assert len(found.regions) == 1
    assert len(found.regions[0].plait_points) == 2


def test_a_stable_ternary_has_no_region():
    assert ternary_binodal(regular(0.5, 0.5, 0.5), 300.0).regions == ()


def test_a_binodal_of_two_components_is_refused():
    with pytest.raises(ShapeError):
        ternary_binodal(regular(3.0), 300.0)
