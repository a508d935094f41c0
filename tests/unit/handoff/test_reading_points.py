"""Measured points as users have them: columns, units, slips."""

import numpy as np
import pytest

from groups.errors import MeasurementError, TooFewPointsError
from groups.handoff.comparisons import Units, read_csv, read_records

MASSES = (46.069, 18.015)


def test_units_in_the_column_names():
    found = read_csv("temperature_C,pressure_mmHg,x1_mass,y1\n78.2,760,0.5,0.6\n", MASSES)
    v = found.vapour_liquid
    assert v.temperature_K[0] == pytest.approx(351.35)
    assert v.pressure_kPa[0] == pytest.approx(101.325)
    moles = (0.5 / MASSES[0], 0.5 / MASSES[1])
    assert v.x1[0] == pytest.approx(moles[0] / sum(moles))
    assert v.y1[0] == 0.6


@pytest.mark.parametrize(
    ("unit", "value", "kelvin"),
    [("K", 300.0, 300.0), ("C", 26.85, 300.0), ("F", 80.33, 300.0)],
)
def test_temperatures(unit, value, kelvin):
    points = read_records(
        [{"temperature": value, "gamma_inf_1": 2.0}], MASSES, Units(temperature=unit)
    )
    assert points.activities.temperature_K[0] == pytest.approx(kelvin, abs=1e-9)


@pytest.mark.parametrize(
    ("unit", "value"),
    [("kPa", 101.325), ("bar", 1.01325), ("atm", 1.0), ("mmHg", 760.0), ("torr", 760.0),
     ("psi", 14.695949), ("Pa", 101325.0), ("MPa", 0.101325), ("mbar", 1013.25)],
)  # fmt: skip
def test_one_atmosphere_in_every_unit(unit, value):
    points = read_records(
        [{"temperature": 350.0, "pressure": value, "x1": 0.3}], MASSES, Units(pressure=unit)
    )
    assert points.vapour_liquid.pressure_kPa[0] == pytest.approx(101.325, rel=1e-7)


def test_every_kind_of_point():
    text = (
        "temperature;pressure;x1;y1;gamma_inf_1;gamma_inf_2;x1_poor;x1_rich;excess_enthalpy_kJ_mol\n"
        "330;50;0.2;;;;;;\n"
        "330;;;;3.5;;;;\n"
        "330;;;;;2.5;;;\n"
        "330;;;;;;0.02;0.6;\n"
        "330;;0.5;;;;;;0.8\n"
    )
    found = read_csv(text, MASSES)
    assert found.n_points == 5
    assert np.isnan(found.vapour_liquid.y1[0])
    assert found.activities.ln_gamma == pytest.approx(np.log([3.5, 2.5]))
    assert found.activities.solute.tolist() == [0, 1]
    assert found.activities.x1.tolist() == [0.0, 1.0]
    assert found.solubilities.x1_rich[0] == 0.6
    assert found.enthalpies.excess_enthalpy_J_mol[0] == 800.0
    assert found.enthalpies.number[0] == 4


def test_uncertainties_take_the_unit_of_their_quantity():
    text = "temperature_C,u_temperature,pressure_bar,u_pressure,x1\n60,0.02,1,0.001,0.3\n"
    v = read_csv(text, MASSES).vapour_liquid
    assert v.u_temperature_K[0] == pytest.approx(0.02)
    assert v.u_pressure_kPa[0] == pytest.approx(0.1)


def test_swapping_twice_changes_nothing():
    points = read_records(
        [{"temperature": 330.0, "pressure": 50.0, "x1": 0.2, "y1": 0.4},
         {"temperature": 330.0, "gamma_inf_1": 3.0}], MASSES
    )  # fmt: skip
    once = points.swapped()
    assert once.vapour_liquid.x1[0] == pytest.approx(0.8)
    assert (once.activities.solute[0], once.activities.x1[0]) == (1, 1.0)
    assert once.swapped().vapour_liquid.y1[0] == pytest.approx(0.4)


@pytest.mark.parametrize(
    ("record", "words", "field"),
    [
        ({"temperature": 330.0, "pressure": 50.0, "x1": 1.2}, "between 0 and 1", "points[1].x1"),
        ({"temperature": 330.0, "pressure": 50.0, "x1": -0.1}, "between 0 and 1", "points[1].x1"),
        ({"temperature": 330.0, "pressure": -5.0, "x1": 0.1}, "above zero", "points[1].pressure"),
        ({"temperature": 60.0, "pressure": 50.0, "x1": 0.1}, "Celsius", "points[1].temperature"),
        ({"temperature": 330.0, "pressure": "much", "x1": 0.1}, "no number", "points[1].pressure"),
        ({"temperature": 330.0, "x1": 0.1}, "say nothing", "points[1]"),
        ({"temperature": 330.0, "x1_poor": 0.6, "x1_rich": 0.2}, "below", "points[1].x1_poor"),
        ({"temperature": 330.0, "presure": 3.0, "x1": 0.1}, "not known", "points[0].presure"),
    ],
)
def test_what_cannot_be_true_is_refused_and_named(record, words, field):
    good = {"temperature": 330.0, "pressure": 50.0, "x1": 0.5}
    with pytest.raises(MeasurementError, match=words) as caught:
        read_records([good, record], MASSES)
    assert caught.value.field == field


def test_percent_given_as_a_fraction_is_recognised():
    with pytest.raises(MeasurementError) as caught:
        read_records([{"temperature": 330.0, "pressure": 50.0, "x1": 35.0}], MASSES)
    assert "percent" in caught.value.cure


def test_one_quantity_in_two_units_is_refused():
    with pytest.raises(MeasurementError, match="two columns"):
        read_csv("temperature_C,temperature_K,pressure,x1\n60,333,50,0.2\n", MASSES)


@pytest.mark.parametrize("text", ["", "# nothing\n", "temperature,pressure,x1\n"])
def test_no_points_are_too_few(text):
    with pytest.raises(TooFewPointsError):
        read_csv(text, MASSES)
