"""Intervals by propagation against the equations solved anew for every drawn mixture."""

from dataclasses import dataclass, replace

import numpy as np
import pytest

from groups.equilibrium import (
    System,
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    dew_temperature,
)
from groups.prediction import bubble_point, dew_point, diagram
from groups.prediction.bands import Drawn
from groups.prediction.boiling_bands import (
    KnownStates,
    bubble_bands,
    bubble_draws,
    dew_bands,
    dew_curve_band,
)
from groups.prediction.boiling_mixture import boiling_mixture
from tests.unit.prediction.mixtures import ONE_ATM, mixture

N_SOLVED = 60
CASES = (
    (("CCO", "O"), (0.3, 0.7)),
    (("CC(C)=O", "ClC(Cl)Cl"), (0.4, 0.6)),
    (("CCCCCC", "CCO"), (0.8, 0.2)),
    (("CC(C)=O", "CO", "c1ccccc1"), (0.3, 0.3, 0.4)),
)


@dataclass(frozen=True)
class ShiftedLine:
    """A vapour pressure multiplied by a constant factor; all else is the line's own."""

    line: object
    shift: float

    def ln_kPa(self, temperature_K):
        return self.line.ln_kPa(temperature_K) + self.shift

    def __getattr__(self, name):
        return getattr(self.line, name)


def drawn_systems(mixed, drawn):
    """Every draw as a whole system, the vapour pressures shifted."""
    for model, shift in zip(drawn.models, drawn.shift, strict=True):
        lines = [ShiftedLine(*one) for one in zip(mixed.lines, shift, strict=True)]
        yield System(model, lines)


def few(drawn):
    """The first draws alone."""
    models = replace(drawn.models, dilute=drawn.models.dilute[:N_SOLVED])
    return Drawn(models, drawn.shift[:N_SOLVED])


def solved(kind, fixed, smiles, fractions):
    """The prediction, its interval from few draws, and the same draws solved one by one."""
    solve = {
        ("bubble", "T"): bubble_pressure,
        ("bubble", "P"): bubble_temperature,
        ("dew", "T"): dew_pressure,
        ("dew", "P"): dew_temperature,
    }[kind, fixed]
    at = 330.0 if fixed == "T" else ONE_ATM
    named = {"temperature_K": at} if fixed == "T" else {"pressure_kPa": at}
    mixed = boiling_mixture(mixture(*smiles), "auto", "estimate", **named)
    x = np.array([fractions])
    own = solve(mixed.system, np.array([at]), x)
    drawn = few(mixed.drawn(float(own.temperature_K[0])))
    ratio = relative(mixed.system, own)
    known = KnownStates(
        own.temperature_K, own.pressure_kPa, own.liquid, own.vapour, own.gamma, ratio, fixed == "P"
    )
    carry = bubble_bands if kind == "bubble" else dew_bands
    found = carry(drawn, mixed.system, known)
    each = [(one, solve(one, np.array([at]), x)) for one in drawn_systems(mixed, drawn)]
    assert all(states.converged[0] for _, states in each)
    return found, each, known


def relative(system, states):
    ln_k = np.log(states.gamma) + system.ln_saturation(states.temperature_K)
    return np.exp(ln_k - ln_k[:, -1:])


def ends(values):
    """Ends of nine tenths of the draws."""
    return np.quantile(np.array(values), [0.05, 0.95], axis=0)


def assert_close(found, own, values, share):
    """Both ends agree within a share of the width; both are stretched to hold the prediction."""
    lower, upper = ends(values)
    lower, upper = np.minimum(lower, own), np.maximum(upper, own)
    width = np.maximum(upper - lower, 1e-12)
    np.testing.assert_array_less(np.abs(found.lower - lower), share * width)
    np.testing.assert_array_less(np.abs(found.upper - upper), share * width)


def solved_numbers(each):
    """The numbers of every draw under the names that the intervals have."""
    states = [one for _, one in each]
    return {
        "temperature_K": [one.temperature_K for one in states],
        "pressure_kPa": [one.pressure_kPa for one in states],
        "liquid": [one.liquid for one in states],
        "vapour": [one.vapour for one in states],
        "gamma": [one.gamma for one in states],
        "relative_volatility": [relative(*one) for one in each],
    }


@pytest.mark.parametrize(("smiles", "fractions"), CASES)
@pytest.mark.parametrize("kind", ["bubble", "dew"])
def test_at_given_temperature_propagation_is_the_solution(kind, smiles, fractions):
    found, each, own = solved(kind, "T", smiles, fractions)
    for name, values in solved_numbers(each).items():
        # The same equations; only the end of the dew iteration, far under 1e-3, differs.
        assert_close(getattr(found, name), getattr(own, name), values, 1e-3)


@pytest.mark.parametrize(("smiles", "fractions"), CASES)
@pytest.mark.parametrize("kind", ["bubble", "dew"])
def test_at_given_pressure_propagation_keeps_to_the_solution(kind, smiles, fractions):
    found, each, own = solved(kind, "P", smiles, fractions)
    for name, values in solved_numbers(each).items():
        # Straight lines in 1/T over the few kelvin of an interval: within 3 % of its width.
        assert_close(getattr(found, name), getattr(own, name), values, 0.03)


@pytest.mark.parametrize("condition", [{"temperature_K": 330.0}, {"pressure_kPa": ONE_ATM}])
@pytest.mark.parametrize("solve", [bubble_point, dew_point])
def test_what_was_given_is_certain_and_what_was_sought_holds_its_number(solve, condition):
    answer = solve(mixture("CCO", "O"), [0.3, 0.7], **condition)
    bands = answer.bands
    given, sought = (
        (bands.temperature_K, bands.pressure_kPa)
        if "temperature_K" in condition
        else (bands.pressure_kPa, bands.temperature_K)
    )
    assert given.half_width[0] == 0.0 < sought.half_width[0]
    interval = answer.confidence.interval_90
    assert (interval.lower, interval.upper) == (sought.lower[0], sought.upper[0])
    for number, band in (
        (answer.temperature_K, bands.temperature_K),
        (answer.pressure_kPa, bands.pressure_kPa),
        (answer.x, bands.liquid),
        (answer.y, bands.vapour),
        (answer.gamma, bands.gamma),
        (answer.relative_volatility, bands.relative_volatility),
    ):
        assert (band.lower[0] <= number).all() and (number <= band.upper[0]).all()
    assert bands.relative_volatility.half_width[0, 1] == 0.0  # the last over itself
    phase = bands.liquid if solve is bubble_point else bands.vapour
    assert (phase.half_width == 0.0).all()


@pytest.mark.parametrize("kind", ["Txy", "Pxy"])
def test_a_diagram_holds_its_curves_and_is_sure_of_the_composition_of_pure_ends(kind):
    condition = {"pressure_kPa": ONE_ATM} if kind == "Txy" else {"temperature_K": 330.0}
    answer = diagram(kind, mixture("CCO", "O"), points=21, **condition)
    found, bands = answer.diagram, answer.bands
    level = found.temperature_K if kind == "Txy" else found.pressure_kPa
    band = bands.temperature_K if kind == "Txy" else bands.pressure_kPa
    assert (band.lower <= level).all() and (level <= band.upper).all()
    assert (bands.vapour.lower[:, 0] <= found.y1).all()
    assert (found.y1 <= bands.vapour.upper[:, 0]).all()
    assert bands.vapour.half_width[[0, -1]] == pytest.approx(np.zeros((2, 2)), abs=1e-15)
    # Only the vapour pressures are uncertain at the ends: less than anywhere between.
    assert band.half_width[[0, -1]].max() < band.half_width[1:-1].max()


def test_the_curves_of_a_diagram_are_the_bubble_points():
    answer = diagram("Txy", mixture("CCO", "O"), pressure_kPa=ONE_ATM, points=11)
    alone = bubble_point(mixture("CCO", "O"), [0.3, 0.7], pressure_kPa=ONE_ATM)
    width = alone.bands.temperature_K.half_width[0]
    # One set of draws with widths taken at the middle of the diagram, or at the point: some 10 %.
    assert answer.bands.temperature_K.half_width[3] == pytest.approx(width, rel=0.1)


def test_the_dew_curve_has_the_interval_of_dew_points():
    smiles = ("CC(C)=O", "CCO")
    mixed = boiling_mixture(mixture(*smiles), "auto", "estimate", pressure_kPa=ONE_ATM)
    x = np.column_stack([np.linspace(0.0, 1.0, 101), np.linspace(1.0, 0.0, 101)])
    found = bubble_temperature(mixed.system, ONE_ATM, x)
    drawn = few(mixed.drawn(340.0))
    known = KnownStates(
        found.temperature_K,
        found.pressure_kPa,
        found.liquid,
        found.vapour,
        found.gamma,
        relative(mixed.system, found),
        True,
    )
    curve = dew_curve_band(bubble_draws(drawn, mixed.system, known), known)
    points = dew_bands(drawn, mixed.system, known)
    # The same curve read at given vapours: linear between 101 points, and both straight in 1/T.
    width = 2.0 * points.temperature_K.half_width
    inside = slice(5, 96)  # at the very ends a draw's curve stops short of some vapours
    for one, other in (
        (curve.lower, points.temperature_K.lower),
        (curve.upper, points.temperature_K.upper),
    ):
        np.testing.assert_array_less(np.abs(one - other)[inside], 0.05 * width[inside])


def test_one_component_has_the_interval_of_its_vapour_pressure():
    answer = bubble_point(mixture("CCO"), [1.0], temperature_K=330.0)
    sigma = float(answer.vapour_pressures[0].uncertainty(330.0))
    interval = answer.confidence.interval_90
    # 90 % of a normal error are 1.645 sigma; 400 draws know it to 5 %, three times.
    assert np.log(interval.upper / interval.lower) / 2.0 == pytest.approx(1.645 * sigma, rel=0.15)
    assert answer.bands.gamma.half_width == 0.0


def test_an_ideal_solution_and_a_state_that_was_not_found_have_no_interval():
    ideal = bubble_point(mixture("CCO", "O"), [0.3, 0.7], temperature_K=330.0, method="ideal")
    assert ideal.bands is None and ideal.confidence.interval_90 is None
    drawn = diagram("Txy", mixture("CCO", "O"), pressure_kPa=ONE_ATM, points=5, method="ideal")
    assert drawn.bands is None and drawn.azeotrope_chance is None


def test_points_without_a_state_keep_their_place_and_have_no_interval():
    answer = bubble_point(mixture("CCO", "O"), [0.3, 0.7], temperature_K=330.0)
    wide = answer.bands.spread(np.array([2]), 4)
    assert np.flatnonzero(np.isfinite(wide.pressure_kPa.lower)).tolist() == [2]
    assert wide.vapour.lower.shape == (4, 2)
    assert wide.pressure_kPa.lower[2] == answer.bands.pressure_kPa.lower[0]
    assert np.isnan(wide.ln_k_half_width[[0, 1, 3]]).all()


def test_an_absent_component_has_no_share_in_any_draw():
    for solve in (bubble_point, dew_point):
        answer = solve(mixture("CCO", "O", "CC(C)=O"), [0.4, 0.6, 0.0], pressure_kPa=ONE_ATM)
        assert answer.bands.vapour.upper[0, 2] == answer.bands.liquid.upper[0, 2] == 0.0
        assert np.isfinite(answer.bands.gamma.upper).all()


def test_the_widest_volatility_gives_the_grade():
    answer = bubble_point(mixture("CCO", "O"), [0.0, 1.0], temperature_K=330.0)
    gamma = answer.bands.gamma
    width = np.log(gamma.upper[0, 0] / gamma.lower[0, 0]) / 2.0
    # ln K of the dilute component varies by ln gamma and the little of its vapour pressure.
    assert answer.bands.ln_k_half_width[0] == pytest.approx(width, rel=0.15)
