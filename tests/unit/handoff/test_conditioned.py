"""Measured points narrow the prediction, near them most, and leave the truth inside."""

import numpy as np
import pytest

from groups.confidence.calibration import sample_models
from groups.equilibrium import System, bubble_temperature
from groups.handoff import compare, condition, read_records
from groups.handoff.calibrated_sigma import SCATTER, calibrated_sigma
from groups.handoff.comparisons.measurements import DEFAULT_U_TEMPERATURE_K, DEFAULT_U_Y
from groups.handoff.conditioned import usual_condition
from groups.prediction import Component
from groups.prediction.bands import drawn_around
from groups.prediction.boiling_mixture import boiling_mixture
from groups.structure.molecule import molecule_from_smiles

PAIR = [Component(molecule_from_smiles(one)) for one in ("CC(C)O", "C=CC(=O)OC")]
MASSES = (60.1, 86.09)
ATMOSPHERE = 101.325


def rows(temperature_K, x1, y1):
    return [
        {"temperature": float(T), "pressure": ATMOSPHERE, "x1": float(x), "y1": float(y)}
        for T, x, y in zip(temperature_K, x1, y1, strict=True)
    ]


def predicted(x1, model=None):
    mixture = boiling_mixture(PAIR, "auto", "estimate", pressure_kPa=ATMOSPHERE)
    system = mixture.system if model is None else System(model, mixture.lines)
    x = np.stack([x1, 1.0 - x1], axis=-1)
    return bubble_temperature(system, ATMOSPHERE, x)


def conditioned(listed, **options):
    answer = compare(PAIR, read_records(listed, MASSES), methods=("unifac",), models=())
    return condition(PAIR, answer, **options)


def widths(found):
    band = found.bands.temperature_K
    return band.upper - band.lower


def test_a_point_narrows_the_diagram_and_most_near_itself():
    x1 = np.array([0.3])
    states = predicted(x1)
    found = conditioned(rows(states.temperature_K, x1, states.vapour[:, 0]))
    share = widths(found.after) / widths(found.before)
    inside = slice(2, -2)  # at the ends only the vapour pressures count
    assert (share[inside] < 1.0).all()
    near = np.abs(found.before.diagram.x1 - 0.3) < 0.05
    # 0.6 of the doubt is left to the form: 0.6/sqrt(1 + 0.36) = 0.51 of the width at the point,
    # more for the measurement itself and beside the point.
    assert (share[near] < 0.65).all()
    far = found.before.diagram.x1 > 0.85
    assert share[near].mean() < share[inside][far[inside]].mean()


def test_the_centre_moves_towards_the_points():
    x1 = np.array([0.3, 0.6])
    off = predicted(x1).temperature_K - 1.0
    found = conditioned(
        [
            {"temperature": float(T), "pressure": ATMOSPHERE, "x1": float(x)}
            for T, x in zip(off, x1, strict=True)
        ]
    )
    at = np.searchsorted(found.before.diagram.x1, x1 - 1e-9)
    moved = found.after.diagram.temperature_K[at] - found.before.diagram.temperature_K[at]
    assert (moved < -0.6).all()
    assert (moved > -1.2).all()


def test_the_truth_lies_inside_at_the_nominal_rate():
    # Truths drawn from the distribution of the intervals themselves, by another seed, and measured
    # with the stated noise. 60 truths of one interval each: 90 % has a standard error of 4 %.
    mixture = boiling_mixture(PAIR, "auto", "estimate", pressure_kPa=ATMOSPHERE)
    molecules = [one.molecule for one in PAIR]
    truths = sample_models(mixture.liquid.model, molecules, 350.0, 60, seed=11)
    generator, held = np.random.default_rng(5), []
    measured, asked = np.array([0.25, 0.6]), np.linspace(0.1, 0.9, 9)
    for truth in truths:
        states = predicted(measured, truth)
        T = states.temperature_K + DEFAULT_U_TEMPERATURE_K * generator.standard_normal(2)
        y1 = states.vapour[:, 0] + DEFAULT_U_Y * generator.standard_normal(2)
        found = conditioned(rows(T, measured, y1), points=11).after
        band, true = found.bands.temperature_K, predicted(asked, truth).temperature_K
        held.append(((band.lower[1:-1] <= true) & (true <= band.upper[1:-1])).mean())
    # The share left to the form makes it wider than a truth of the very form needs: up to all.
    assert np.mean(held) > 0.82


def test_four_points_scatter_no_less_than_two_say():
    x1 = np.array([0.2, 0.4, 0.6, 0.8])
    states = predicted(x1)
    wild = states.temperature_K + np.array([2.0, -2.0, 2.0, -2.0])
    calm = conditioned(rows(states.temperature_K, x1, states.vapour[:, 0]))
    found = conditioned(rows(wild, x1, states.vapour[:, 0]))
    assert calm.scatter == 1.0
    assert widths(found.after)[25] >= widths(calm.after)[25]


def test_activity_at_infinite_dilution_alone_is_enough():
    found = conditioned([{"temperature": 330.0, "gamma_inf_1": 2.0}])
    assert found.kind == "Pxy"
    before, after = found.ln_gamma_infinite_before[0], found.ln_gamma_infinite_after[0]
    assert after[2] - after[0] < 0.6 * (before[2] - before[0])
    assert abs(after[1] - np.log(2.0)) < abs(before[1] - np.log(2.0)) + 1e-12


def test_enthalpies_alone_move_nothing():
    assert conditioned([{"temperature": 298.15, "x1": 0.5, "excess_enthalpy": 900.0}]) is None


@pytest.mark.parametrize(
    ("listed", "kind"),
    [
        ([{"temperature": 350.0, "pressure": 101.0, "x1": 0.5}], (101.0, None)),
        (
            [{"temperature": 330.0, "pressure": P, "x1": x} for P, x in ((40.0, 0.2), (50.0, 0.6))],
            (None, 330.0),
        ),
    ],
)
def test_the_diagram_is_that_of_the_points(listed, kind):
    assert usual_condition(read_records(listed, MASSES)) == kind


def test_weights_of_a_fit_are_those_of_the_drawn_liquids():
    molecules = [one.molecule for one in PAIR]
    sigma = calibrated_sigma(molecules, "estimate", 350.0)
    assert sigma is not None
    at_ends = np.asarray(sigma((0, 1), np.array([350.0]), np.array([0.0, 1.0])))[0]
    drawn = drawn_around(molecules, "estimate", 350.0).models.dilute
    assert at_ends[0, 0] == pytest.approx(np.hypot(drawn[:, 0, 1].std(), SCATTER))
    assert at_ends[1, 1] == pytest.approx(np.hypot(drawn[:, 1, 0].std(), SCATTER))
    assert at_ends[1, 0] == pytest.approx(SCATTER)  # a pure component has no error
