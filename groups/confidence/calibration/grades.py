"""Grades from the half-width of the 90 % interval."""

from groups.confidence.confidence import Grade

# Half-width of the 90 % interval of ln gamma up to which each grade is given: factors 1.35 and 2.0
# in gamma. Measured out of fold, the mean error grows by 1.6 to 1.8 from high to moderate and by
# 2.3 from moderate to low; about a quarter of the open set is high and half moderate.
THRESHOLDS: tuple[tuple[Grade, float], ...] = (("high", 0.30), ("moderate", 0.70))


def grade_of_half_width(half_width_ln: float) -> Grade:
    """The grade of a number whose logarithm is known to within a half-width.

    Parameters
    ----------
    half_width_ln : float
        Half the width of the 90 % interval in ln units.

    Returns
    -------
    Grade
        "low" beyond the last threshold; "none" where there is no width, hence no number.
    """
    if not half_width_ln >= 0.0:
        return "none"
    for grade, most in THRESHOLDS:
        if half_width_ln <= most:
            return grade
    return "low"
