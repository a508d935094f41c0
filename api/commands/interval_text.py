"""Intervals and chances as text beside the numbers."""

from collections.abc import Sequence

from api.schemas.confidence import Confidence, Interval
from api.schemas.equilibrium import AzeotropeChance, SplitChance


def ends(lower: float | None, upper: float | None) -> str:
    """Both ends of an interval, or a dash."""
    if lower is None or upper is None:
        return "-"
    return f"{shown(lower)} to {shown(upper)}"


def column(
    lower: Sequence[float | None] | None, upper: Sequence[float | None] | None, count: int
) -> list[str]:
    """Intervals of `count` numbers; dashes where there are none."""
    if lower is None or upper is None:
        return ["-"] * count
    return [ends(*pair) for pair in zip(lower, upper, strict=True)]


def interval(found: Interval | None) -> str:
    """An interval, or a dash."""
    return "-" if found is None else ends(found.lower, found.upper)


def sought(confidence: Confidence, unit: str) -> str:
    """A line on the number that was sought, empty without an interval."""
    found = confidence.interval_90
    return "" if found is None else f"90 % interval {interval(found)} {unit}"


def azeotrope_line(chance: AzeotropeChance, names: Sequence[str]) -> str:
    """How probable an azeotrope of two components is, and where it would lie."""
    first, second = (names[k] for k in chance.components)
    text = f"Azeotrope of {first} and {second}: probability {chance.probability:.2f}"
    if chance.x1 is not None:
        text += f"; if so, x of the first {interval(chance.x1)}"
    if chance.temperature_K is not None:
        text += f", {interval(chance.temperature_K)} K"
    if chance.pressure_kPa is not None:
        text += f", {interval(chance.pressure_kPa)} kPa"
    return text


def split_line(chance: SplitChance | None) -> str:
    """How probable a split is, and between which liquids; empty without calibration."""
    if chance is None:
        return ""
    text = f"Liquid split: probability {chance.probability:.2f}"
    if chance.x1_lower is not None and chance.x1_upper is not None:
        text += f"; if so, x1 {interval(chance.x1_lower)} and {interval(chance.x1_upper)}"
    return text


def shown(value: float) -> str:
    """Three digits after the point, four below one, four significant ones below a thousandth."""
    size = abs(value)
    if size >= 1.0:
        return f"{value:.3f}"
    return f"{value:.4f}" if size >= 1e-3 or size == 0.0 else f"{value:.3e}"
