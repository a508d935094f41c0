"""The fitted width, the quantiles and the grades."""

import numpy as np
import pytest

from groups.confidence import grade_of_half_width
from groups.confidence.calibration.model import calibration
from groups.confidence.calibration.scale import fit_scale, half_width, interval_score
from groups.errors import OutOfRangeError


def test_the_score_is_the_width_inside_and_a_penalty_outside():
    # By hand from Winkler's definition with alpha = 0.1: width 2; missed by 0.5 costs 20 * 0.5.
    score = interval_score(np.array([-1.0, -1.0]), np.array([1.0, 1.0]), np.array([0.0, 1.5]), 0.9)
    assert score == pytest.approx([2.0, 12.0])


def test_a_known_log_linear_width_is_recovered():
    random = np.random.default_rng(7)
    x = random.uniform(-1.0, 1.0, 20_000)
    features = np.stack([np.ones_like(x), x], axis=1)
    # Normal errors with sigma = exp(-1 + 0.8 x): the 90 % half-width is 1.6449 sigma.
    error = np.exp(-1.0 + 0.8 * x) * random.standard_normal(x.size)
    found = fit_scale(features, error)
    # 20,000 normal errors fix a 90 % quantile to about 1.5 %; 0.05 is three times that.
    assert found == pytest.approx([-1.0 + np.log(1.6449), 0.8], abs=0.05)
    inside = np.abs(error) <= half_width(features, found)
    assert inside.mean() == pytest.approx(0.90, abs=0.01)


def test_intervals_widen_with_the_level():
    widths = []
    for level in (0.5, 0.8, 0.9, 0.95, 0.99):
        low, high = calibration().bounds(level)
        assert low < 0.0 < high
        widths.append(high - low)
    assert widths == sorted(widths)


@pytest.mark.parametrize("level", [0.0, 1.0, -0.1, float("nan")])
def test_an_impossible_level_is_refused(level):
    with pytest.raises(OutOfRangeError):
        calibration().bounds(level)


def test_grades_fall_as_the_width_grows():
    grades = [grade_of_half_width(width) for width in (0.0, 0.3, 0.31, 0.7, 0.71, 50.0)]
    assert grades == ["high", "high", "moderate", "moderate", "low", "low"]
    assert grade_of_half_width(float("nan")) == "none"
