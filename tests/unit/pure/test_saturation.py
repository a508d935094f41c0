"""The curve with its continuation, its inverse and what it tells about itself."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from groups.errors import OutOfRangeError
from groups.pure.coefficients import candidates, every_registry_number
from groups.pure.equations import Antoine
from groups.pure.published import published_vapour_pressure
from groups.pure.saturation import VapourPressure


def ethanol() -> VapourPressure:
    curve = published_vapour_pressure("64-17-5")
    assert curve is not None
    return curve


def clausius(range_K: tuple[float, float] = (300.0, 400.0)) -> VapourPressure:
    """ln P = 15 - 4000/T, whose continuation is itself."""
    return VapourPressure("user", "", "", (), range_K, Antoine(15.0, 4000.0, 0.0), 0.01)


def test_within_the_range_it_is_the_equation() -> None:
    curve = ethanol()
    T = np.linspace(*curve.range_K, 50)
    assert curve.ln_kPa(T) == pytest.approx(curve.curve.ln_kPa(T), abs=0.0)
    assert not curve.extrapolated(T).any()


def test_a_straight_line_continues_as_itself() -> None:
    T = np.array([100.0, 299.0, 401.0, 2000.0])
    assert clausius().ln_kPa(T) == pytest.approx(15.0 - 4000.0 / T, rel=1e-14)
    assert clausius().slope(T) == pytest.approx(4000.0 / T**2, rel=1e-14)
    assert clausius().extrapolated(T).all()


def test_value_and_slope_are_continuous_at_the_edges() -> None:
    curve = replace(ethanol(), range_K=(300.0, 400.0))
    for edge in curve.range_K:
        near = np.array([edge * (1 - 1e-10), edge * (1 + 1e-10)])
        assert np.ptp(curve.ln_kPa(near)) < 1e-8  # slope below 0.1/K times 1e-7 K
        assert np.ptp(curve.slope(near)) < 1e-9


@pytest.mark.parametrize("cas", every_registry_number()[::60])
def test_every_published_curve_rises_from_50_to_1500_K(cas: str) -> None:
    T = np.linspace(50.0, 1500.0, 2901)
    for c in candidates(cas):
        curve = VapourPressure("published", "", "", (), c.range_K, c.curve, 0.01)
        assert np.all(np.diff(curve.ln_kPa(T)) > 0.0)
        assert np.all(curve.slope(T) > 0.0)


@given(st.lists(st.floats(1e-3, 2e4), min_size=1, max_size=30))
@settings(max_examples=100, deadline=None)
def test_the_inverse_undoes_the_curve(pressures: list[float]) -> None:
    curve = ethanol()
    # Newton stops at 1e-12 in ln P.
    assert curve.ln_kPa(curve.inverse(pressures)) == pytest.approx(np.log(pressures), abs=1e-11)


def test_the_inverse_keeps_the_shape_and_marks_what_has_no_answer() -> None:
    T = ethanol().inverse([[101.325, -1.0], [np.nan, 0.0]])
    assert T.shape == (2, 2)
    assert np.isnan(T).tolist() == [[False, True], [True, True]]


def test_a_pressure_beyond_the_continuation_is_refused() -> None:
    assert np.exp(15.0) > clausius().kPa(1e9)
    with pytest.raises(OutOfRangeError, match="pressure_kPa"):
        clausius().boiling_temperature(np.exp(15.1))
    with pytest.raises(OutOfRangeError, match="pressure_kPa"):
        clausius().boiling_temperature(-1.0)


def test_the_uncertainty_grows_with_the_distance_from_the_range() -> None:
    curve = clausius()
    sigma = curve.uncertainty([200.0, 280.0, 300.0, 350.0, 400.0, 450.0, 600.0])
    assert sigma[2:5] == pytest.approx(0.01, abs=0.0)
    assert sigma[0] > sigma[1] > 0.01
    assert sigma[6] > sigma[5] > 0.01


def test_a_narrow_range_makes_the_continuation_less_certain() -> None:
    wide, narrow = clausius((300.0, 400.0)), clausius((395.0, 400.0))
    assert narrow.uncertainty(420.0) > 2.0 * wide.uncertainty(420.0)


def test_near_critical_and_supercritical_are_told() -> None:
    curve = ethanol()
    assert curve.critical_temperature_K is not None
    T = np.array([0.89, 0.91, 0.999, 1.0, 1.2]) * curve.critical_temperature_K
    assert curve.near_critical(T).tolist() == [False, True, True, False, False]
    assert curve.supercritical(T).tolist() == [False, False, False, True, True]
    unknown = replace(curve, critical_temperature_K=None)
    assert not unknown.near_critical(T).any()
    assert not unknown.supercritical(T).any()
