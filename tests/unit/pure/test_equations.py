"""The published forms, against the scalar functions of the `chemicals` package and their slopes."""

import chemicals.vapor_pressure as scalar
import numpy as np
import pytest
from chemicals.dippr import EQ101

from groups.pure.coefficients import WATER, Candidate, candidates
from groups.pure.equations import Antoine, SaturationEquation

ROUNDING = 1e-10  # of ln P: two orders of the same operations in double precision


def curve_of(cas: str, key: str) -> Candidate:
    return next(c for c in candidates(cas) if c.record.key == key)


def test_the_original_wagner_form_is_that_of_the_library() -> None:
    c = curve_of("64-17-5", "wagner-mcgarry")
    T = np.linspace(295.0, 510.0, 9)
    a = [v for _, v in c.coefficients]
    assert c.critical_temperature_K and c.critical_pressure_kPa
    expected = [
        scalar.Wagner_original(t, c.critical_temperature_K, c.critical_pressure_kPa * 1e3, *a)
        for t in T
    ]
    assert c.curve.ln_kPa(T) == pytest.approx(np.log(expected) - np.log(1e3), abs=ROUNDING)


@pytest.mark.parametrize("key", ["wagner-poling", "vdi-ppds"])
def test_the_later_wagner_form_is_that_of_the_library(key: str) -> None:
    c = curve_of("71-43-2", key)
    T = np.linspace(285.0, 550.0, 9)
    a = [v for _, v in c.coefficients]
    assert c.critical_temperature_K and c.critical_pressure_kPa
    expected = [
        scalar.Wagner(t, c.critical_temperature_K, c.critical_pressure_kPa * 1e3, *a) for t in T
    ]
    assert c.curve.ln_kPa(T) == pytest.approx(np.log(expected) - np.log(1e3), abs=ROUNDING)


def test_dippr_101_is_that_of_the_library() -> None:
    c = curve_of("67-64-1", "perry-dippr101")
    T = np.linspace(200.0, 500.0, 9)
    expected = [EQ101(t, *(v for _, v in c.coefficients)) for t in T]
    assert c.curve.ln_kPa(T) == pytest.approx(np.log(expected) - np.log(1e3), abs=ROUNDING)


def test_the_extended_antoine_equation_is_that_of_the_library() -> None:
    c = curve_of("62-53-3", "antoine-extended")
    v = dict(c.coefficients)
    T = np.linspace(490.0, 670.0, 9)
    expected = [
        scalar.TRC_Antoine_extended(
            t, v["Tc"], v["to"], v["A"], v["B"], v["C"], v["n"], v["E"], v["F"]
        )
        for t in T
    ]
    # The library writes log10(e) as 0.43429, five digits: 1.5e-5 of a term that stays below 0.1.
    assert c.curve.ln_kPa(T) == pytest.approx(np.log(expected) - np.log(1e3), abs=1e-5)


@pytest.mark.parametrize(("key", "base"), [("antoine-poling", 10.0), ("landolt-antoine", np.e)])
def test_the_antoine_equation_is_that_of_the_library(key: str, base: float) -> None:
    c = curve_of("71-43-2", key)
    T = np.linspace(285.0, 370.0, 9)
    expected = [scalar.Antoine(t, *(v for _, v in c.coefficients), base=base) for t in T]
    assert c.curve.ln_kPa(T) == pytest.approx(np.log(expected) - np.log(1e3), abs=ROUNDING)


def test_water_follows_the_industrial_formulation() -> None:
    T = np.linspace(273.16, 645.0, 40)
    expected = [scalar.Psat_IAPWS(t) for t in T]
    # The auxiliary equation of 1992 and that of IAPWS-IF97 differ by up to 0.03 %.
    assert curve_of(WATER, "iapws").curve.ln_kPa(T) == pytest.approx(
        np.log(expected) - np.log(1e3), abs=3e-4
    )


def every_form() -> list[tuple[str, SaturationEquation, float]]:
    forms = [("64-17-5", "wagner-mcgarry"), ("64-17-5", "wagner-poling"), ("64-17-5", "vdi-ppds")]
    forms += [("64-17-5", "perry-dippr101"), ("64-17-5", "antoine-poling"), (WATER, "iapws")]
    named = [(key, curve_of(cas, key).curve, 330.0) for cas, key in forms]
    aniline = curve_of("62-53-3", "antoine-extended").curve
    return [
        *named,
        ("antoine-extended", aniline, 600.0),
        ("antoine", Antoine(14.0, 3000, -40), 330),
    ]


@pytest.mark.parametrize(("key", "curve", "T"), every_form(), ids=[f[0] for f in every_form()])
def test_the_slope_is_the_derivative(key: str, curve: SaturationEquation, T: float) -> None:
    step = 1e-3
    ends = curve.ln_kPa(np.array([T - step, T + step]))
    # Central difference: rounding 1e-16 * ln P / step, and the third derivative times step^2.
    assert float(curve.slope(np.array(T))) == pytest.approx(
        (ends[1] - ends[0]) / 2 / step, rel=1e-8
    )
