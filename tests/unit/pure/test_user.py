"""The caller's own vapour pressure: units, fits and refusals."""

import numpy as np
import pytest

from groups.errors import InvalidInputError
from groups.pure.points import PointsInput
from groups.pure.user import (
    AntoineInput,
    Dippr101Input,
    UserVapourPressure,
    user_vapour_pressure,
)

# Ethanol, log10 P/mmHg = 8.20417 - 1642.89/(t/C + 230.300): Gmehling & Onken, VLE data
# collection, from memory. It boils at 78.3 degrees Celsius.
ETHANOL = AntoineInput(8.20417, 1642.89, 230.300, "10", "mmHg", "C")


def test_antoine_coefficients_keep_their_meaning_in_other_units() -> None:
    curve = user_vapour_pressure(ETHANOL)
    assert curve.source == "user"
    assert curve.boiling_temperature(101.325) == pytest.approx(351.45, abs=0.1)  # rounding of A
    ln10, ln_kPa = np.log(10.0), np.log(101.325 / 760.0)
    same = AntoineInput(8.20417 * ln10 + ln_kPa, 1642.89 * ln10, 230.3 - 273.15, "e", "kPa", "K")
    T = np.array([300.0, 350.0])
    assert user_vapour_pressure(same).ln_kPa(T) == pytest.approx(curve.ln_kPa(T), abs=1e-12)


def test_without_a_range_the_usual_pressures_are_taken_and_said() -> None:
    curve = user_vapour_pressure(ETHANOL)
    low, high = curve.kPa(curve.range_K)
    assert 1.0 <= low < 1.1 and 490.0 < high <= 500.0  # the grid has half a kelvin
    assert "no range was given" in curve.notes[0]
    given = AntoineInput(8.20417, 1642.89, 230.3, "10", "mmHg", "C", (293.0, 366.0))
    assert user_vapour_pressure(given).range_K == (293.0, 366.0)
    assert user_vapour_pressure(given).notes == ()


def test_dippr_101_is_taken_in_pascal() -> None:
    # Water: Perry's Handbook, 8th ed., table 2-8, from memory.
    water = Dippr101Input(73.649, -7258.2, -7.3037, 4.1653e-6, 2.0, range_K=(273.16, 647.1))
    # The handbook's fit meets one atmosphere within 0.2 %.
    assert float(user_vapour_pressure(water).kPa(373.15)) == pytest.approx(101.325, rel=2e-3)


def test_five_points_of_an_antoine_curve_give_it_back() -> None:
    truth = user_vapour_pressure(ETHANOL)
    T = np.linspace(300.0, 370.0, 8)
    curve = user_vapour_pressure(PointsInput(tuple(T), tuple(truth.kPa(T))))
    assert "Antoine" in curve.equation and "8 measured points" in curve.equation
    # C is searched to six decimal places of its span; between the points ln P keeps 1e-6.
    between = np.linspace(300.0, 370.0, 31)
    assert curve.ln_kPa(between) == pytest.approx(truth.ln_kPa(between), abs=1e-6)
    assert dict(curve.coefficients)["C"] == pytest.approx(230.3 - 273.15, abs=0.01)


def test_two_points_give_the_clausius_clapeyron_line_between_them() -> None:
    curve = user_vapour_pressure(PointsInput((320.0, 360.0), (20.0, 90.0)))
    assert "fitted to 2 measured points" in curve.equation
    assert curve.kPa([320.0, 360.0]) == pytest.approx([20.0, 90.0], rel=1e-12)
    assert curve.range_K == (320.0, 360.0)
    harmonic = 1.0 / (0.5 / 320.0 + 0.5 / 360.0)
    assert float(curve.kPa(harmonic)) == pytest.approx(np.sqrt(20.0 * 90.0), rel=1e-12)


def test_the_scatter_of_the_points_is_the_uncertainty() -> None:
    truth = user_vapour_pressure(ETHANOL)
    T = np.linspace(300.0, 370.0, 40)
    noise = 0.05 * np.where(np.arange(40) % 2, 1.0, -1.0)
    P = truth.kPa(T) * np.exp(noise)
    order = np.argsort(P)  # pairs stay rising: 1.8 K change P by more than the noise or are sorted
    curve = user_vapour_pressure(PointsInput(tuple(T), tuple(P[order])))
    assert 0.02 < curve.uncertainty_ln < 0.06


def test_points_may_come_in_any_order() -> None:
    one = user_vapour_pressure(PointsInput((360.0, 320.0, 340.0), (90.0, 20.0, 44.0)))
    two = user_vapour_pressure(PointsInput((320.0, 340.0, 360.0), (20.0, 44.0, 90.0)))
    assert one.coefficients == two.coefficients


NONSENSE: list[tuple[str, UserVapourPressure, str]] = [
    ("falling points", PointsInput((300.0, 320.0), (50.0, 20.0)), "does not rise"),
    ("one point", PointsInput((300.0,), (50.0,)), "two points"),
    ("no points", PointsInput((), ()), "two points"),
    ("unequal lists", PointsInput((300.0, 310.0), (50.0,)), "2 temperatures for 1"),
    ("not a number", PointsInput((300.0, np.nan), (50.0, 60.0)), "finite"),
    ("negative pressure", PointsInput((300.0, 310.0), (-5.0, 60.0)), "positive"),
    ("degrees Celsius", PointsInput((-20.0, 30.0), (5.0, 60.0)), "positive"),
    ("too steep", PointsInput((300.0, 301.0), (1.0, 60.0)), "slope"),
    ("too flat", PointsInput((300.0, 400.0), (50.0, 50.1)), "slope"),
    (
        "one point off",
        PointsInput((300.0, 310.0, 320.0, 330.0), (5.0, 8.0, 12.0, 80.0)),
        "a factor of",
    ),
    ("wrong log base", AntoineInput(8.20417, 1642.89, 230.3, "e", "mmHg", "C"), "Trouton"),
    ("falling", AntoineInput(8.2, -1642.89, 230.3, "10", "mmHg", "C"), "no temperature"),
    ("falling 101", Dippr101Input(20.0, 4000.0, range_K=(300.0, 400.0)), "falls"),
    ("infinite", Dippr101Input(np.inf, -4000.0), "finite"),
    ("pole", AntoineInput(8.2, 1600, -320.0, "10", "mmHg", "K", (300.0, 400.0)), "finite|pole"),
    ("range", AntoineInput(8.2, 1642.0, 230.3, "10", "mmHg", "C", (400.0, 300.0)), "rising"),
]


@pytest.mark.parametrize(("name", "given", "said"), NONSENSE, ids=[n[0] for n in NONSENSE])
def test_nonsense_is_refused_with_its_reason(
    name: str, given: UserVapourPressure, said: str
) -> None:
    with pytest.raises(InvalidInputError, match=said) as refusal:
        user_vapour_pressure(given)
    assert refusal.value.field == "vapour_pressure"
    assert refusal.value.cure
