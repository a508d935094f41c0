"""Maps of residue curves: topology, monotone temperatures, boundaries; bubble points that split."""

import numpy as np
import pytest

from groups.equilibrium import (
    azeotrope_set,
    bubble_temperature,
    diagram,
    residue_curves,
    stable_bubble_pressure,
    stable_bubble_temperature,
)
from groups.errors import ShapeError
from tests.unit.equilibrium.equilibrium_mixtures import (
    ACETONE,
    BENZENE,
    ETHANOL,
    METHANOL,
    TOLUENE,
    WATER,
    Antoine,
    regular_system,
)

# Smith, Van Ness & Abbott (2005), appendix B.2, from memory; a smooth line only.
CHLOROFORM = Antoine(13.7324, 2548.74, 218.552 - 273.15)
SADDLE = regular_system(-0.75, 0.65, 1.0, lines=(ACETONE, CHLOROFORM, METHANOL))
SPLITTING = regular_system(1.7, 1.3, 6.0, lines=(ETHANOL, BENZENE, WATER))


@pytest.fixture(scope="module")
def saddle_map():
    return residue_curves(SADDLE, 101.325)


def test_the_rule_of_zharov_and_serafimov_holds_on_the_map(saddle_map):
    # 2 (N3 - S3) + N2 - S2 + N1 = 2, counted from the stabilities on the map.
    count = 0
    for point in saddle_map.fixed_points:
        size = int((point.mole_fractions > 0.0).sum())
        node = point.stability != "saddle"
        count += {1: int(node), 2: 1 if node else -1, 3: 2 if node else -2}[size]
    assert count == 2
    assert saddle_map.index_balanced


def test_curves_run_from_unstable_to_stable_nodes(saddle_map):
    for curve in (*saddle_map.curves, *saddle_map.boundaries):
        assert curve.begins is not None and curve.ends is not None
    for curve in saddle_map.curves:
        assert saddle_map.fixed_points[curve.begins].stability == "unstable node"
        assert saddle_map.fixed_points[curve.ends].stability == "stable node"


def test_the_temperature_rises_along_every_curve(saddle_map):
    for curve in (*saddle_map.curves, *saddle_map.boundaries):
        # The last step to a node is a jump of up to 0.015, not a step of the integration.
        assert (np.diff(curve.temperature_K[1:-1]) > -1e-6).all()


def test_four_boundaries_meet_in_the_ternary_saddle(saddle_map):
    (saddle,) = [
        k for k, point in enumerate(saddle_map.fixed_points) if (point.mole_fractions > 0.0).all()
    ]
    assert saddle_map.fixed_points[saddle].stability == "saddle"
    assert len(saddle_map.boundaries) == 4
    assert sum(curve.begins == saddle for curve in saddle_map.boundaries) == 2
    assert sum(curve.ends == saddle for curve in saddle_map.boundaries) == 2


def test_a_curve_is_tangent_to_the_line_from_liquid_to_vapour(saddle_map):
    # dx is parallel to x - y. The chord of two steps of 0.02 differs by the curvature.
    curve = max(saddle_map.curves, key=lambda c: len(c.mole_fractions))
    k = len(curve.mole_fractions) // 2
    x = curve.mole_fractions[k - 1 : k + 2]
    y = bubble_temperature(SADDLE, 101.325, x[1]).vapour[0]
    chord, direction = x[2] - x[0], x[1] - y
    cosine = chord @ direction / np.linalg.norm(chord) / np.linalg.norm(direction)
    assert cosine > 0.999


def test_an_ideal_map_has_one_bundle_of_curves():
    found = residue_curves(regular_system(0.0, 0.0, 0.0, lines=(ACETONE, BENZENE, TOLUENE)), 100.0)
    assert [p.stability for p in found.fixed_points] == ["unstable node", "saddle", "stable node"]
    assert {(c.begins, c.ends) for c in found.curves} == {(0, 2)}
    assert found.boundaries == ()


def test_a_heterogeneous_ternary_azeotrope_is_where_the_curves_begin():
    found = residue_curves(SPLITTING, 101.325, starts=np.array([[0.3, 0.4, 0.3], [0.6, 0.2, 0.2]]))
    lowest = int(np.argmin([p.temperature_K for p in found.fixed_points]))
    assert found.fixed_points[lowest].stability == "unstable node"
    assert all(curve.begins == lowest for curve in found.curves)


def test_a_missing_azeotrope_is_told():
    assert azeotrope_set(SADDLE, pressure_kPa=101.325).index_balanced
    assert not azeotrope_set(SADDLE, pressure_kPa=101.325, most_components=2).index_balanced


def test_a_map_of_two_components_is_refused():
    with pytest.raises(ShapeError):
        residue_curves(regular_system(0.5), 101.325)


def test_bubble_points_inside_a_gap_are_those_of_the_three_phase_line():
    system = regular_system(4.0, lines=(BENZENE, WATER))
    line = diagram(system, "Txy", pressure_kPa=101.325).liquid_split
    x1 = np.array([0.1, 0.5, 0.8])
    found = stable_bubble_temperature(system, 101.325, np.stack([x1, 1.0 - x1], axis=1))
    assert found.phase == ("three-phase",) * 3
    np.testing.assert_allclose(found.temperature_K, line.temperature_K, atol=1e-8)
    np.testing.assert_allclose(found.vapour[:, 0], line.y1, atol=1e-9)
    back = stable_bubble_pressure(system, line.temperature_K, [0.5, 0.5])
    assert back.pressure_kPa[0] == pytest.approx(101.325, rel=1e-8)


def test_bubble_points_of_a_stable_liquid_are_the_plain_ones():
    x = np.random.default_rng(1).dirichlet(np.ones(3), 20)
    plain, stable = bubble_temperature(SADDLE, 50.0, x), stable_bubble_temperature(SADDLE, 50.0, x)
    np.testing.assert_allclose(stable.temperature_K, plain.temperature_K, atol=1e-12)
    assert set(stable.phase) == {"two-phase"}
