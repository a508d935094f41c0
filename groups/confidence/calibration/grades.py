"""Grades from the half-width of the 90 % interval."""

from groups.confidence.confidence import Grade

# Half-width of the 90 % interval of ln gamma up to which each grade is given: a factor 1.35,
# 1.8 and 3.3 in gamma. Beyond the last one the number is no better than an order of magnitude.
THRESHOLDS: tuple[tuple[Grade, float], ...] = (("high", 0.30), ("moderate", 0.60), ("low", 1.20))


def grade_of_half_width(half_width_ln: float) -> Grade:
    """The grade of a number whose logarithm is known to within a half-width.

    Parameters
    ----------
    half_width_ln : float
        Half the width of the 90 % interval in ln units.

    Returns
    -------
    Grade
        "none" beyond the last threshold, and where the width is not a number.
    """
    for grade, most in THRESHOLDS:
        if half_width_ln <= most:
            return grade
    return "none"
