"""Measured points against every method and fitted equation, and the slips that are seen."""

import csv
import io
from dataclasses import dataclass

import numpy as np
import pytest

from groups.equilibrium import System, binary_split, bubble_temperature
from groups.errors import NoVapourPressureError, ShapeError, UnknownMethodError
from groups.handoff import compare, parameters_of_fit, read_records, to_text
from groups.handoff.comparisons import points_to_csv, regions_to_csv
from groups.handoff.comparisons.deviations import REGIONS, in_region
from groups.handoff.correlations import correlative_model
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.component import Component
from groups.structure.molecule import molecule_from_smiles

ACETONE_METHANOL = [Component(molecule_from_smiles(one)) for one in ("CC(C)=O", "CO")]
MASSES = (58.08, 32.04)


@dataclass(frozen=True)
class Held:
    """A vapour whose correction is one number."""

    value: float
    ideal: bool = False

    def ln_correction(self, temperature_K, pressure_kPa, vapour):  # noqa: ARG002
        return np.full_like(vapour, self.value)


METHODS = ("unifac", "unifac-dortmund", "ideal")


def isobaric(n: int = 12, seed: int = 2, method: str = "unifac-dortmund") -> list[dict[str, float]]:
    """Points of a known model with small noise, inside the diagram."""
    mixture = boiling_mixture(ACETONE_METHANOL, method, "estimate", pressure_kPa=101.325)
    rng = np.random.default_rng(seed)
    x1 = np.linspace(0.05, 0.95, n)
    states = bubble_temperature(mixture.system, 101.325, np.stack([x1, 1.0 - x1], axis=-1))
    return [
        {
            "temperature": float(T) + 0.03 * rng.normal(),
            "pressure": 101.325,
            "x1": float(a),
            "y1": float(b) + 0.002 * rng.normal(),
        }
        for T, a, b in zip(states.temperature_K, x1, states.vapour[:, 0], strict=True)
    ]


def compared(rows, **options):
    points = read_records(rows, MASSES)
    return compare(ACETONE_METHANOL, points, methods=METHODS, **options)


def model_of(answer, name):
    return next(one for one in answer.models if one.name == name)


def test_the_method_that_made_the_points_is_found():
    answer = compared(isobaric())
    own, ideal = model_of(answer, "unifac-dortmund"), model_of(answer, "ideal")
    assert own.weighted_rms < 1.0 < 5.0 < ideal.weighted_rms
    assert answer.marks == ()
    quantities = {one.quantity: one for one in own.regions[0].deviations}
    assert quantities["temperature"].mean_absolute < 0.06
    assert quantities["y1"].mean_absolute < 0.004
    assert quantities["pressure"].unit == "%"
    assert {"ln_gamma_1", "ln_gamma_2"} <= set(quantities)


def test_regions_part_the_points():
    answer = compared(isobaric())
    own = model_of(answer, "unifac-dortmund")
    assert [one.region for one in own.regions] == list(REGIONS)
    everything, *parts = own.regions
    assert everything.points == 12 == sum(one.points for one in parts)
    assert in_region("dilute in 1", np.array([0.0, 0.19, 0.2, 1.0])).tolist() == [1, 1, 0, 0]


def test_an_error_at_one_end_shows_there_and_not_in_the_middle():
    rows = isobaric()
    for row in rows:
        if row["x1"] > 0.8:
            row["temperature"] += 1.5
    own = model_of(compared(rows), "unifac-dortmund")
    by_name = {one.region: one.weighted_rms for one in own.regions}
    assert by_name["dilute in 2"] > 3.0
    assert by_name["middle"] < 1.5
    assert by_name["dilute in 1"] < 1.5


def test_fitted_equations_carry_their_statistics():
    answer = compared(isobaric(), models=("nrtl", "margules-2"))
    fit = model_of(answer, "nrtl").fit
    assert fit is not None
    assert np.isfinite([fit.aicc, fit.cross_validated_rms]).all()
    assert fit.folds == 10
    assert model_of(answer, "nrtl").regions[0].weighted_rms == pytest.approx(fit.weighted_rms)


def test_a_fit_is_recommended_where_no_prediction_is_near_it():
    rows = isobaric()
    answer = compare(
        ACETONE_METHANOL, read_records(rows, MASSES), methods=("ideal",), models=("nrtl", "wilson")
    )
    assert answer.recommendation.kind == "fitted"
    assert "x1 from 0.050 to 0.950" in answer.recommendation.holds_for
    assert "left out" in answer.recommendation.text


def test_a_prediction_is_kept_where_it_is_as_good():
    answer = compared(isobaric(), models=("margules-2",))
    assert answer.recommendation.model == "unifac-dortmund"
    assert answer.recommendation.kind == "predicted"


def test_two_points_are_too_few_to_leave_a_prediction_for():
    answer = compared(isobaric(2), models=("margules-2",))
    assert answer.recommendation.kind == "predicted"
    assert "too few" in answer.recommendation.text


def test_four_points_with_vapour_carry_two_parameters():
    answer = compare(
        ACETONE_METHANOL,
        read_records(isobaric(4), MASSES),
        methods=("ideal",),
        models=("nrtl", "margules-2"),
    )
    assert answer.recommendation.kind == "fitted"


def test_a_real_vapour_is_taken_at_the_measured_state():
    rows = isobaric(6)
    points = read_records(rows, MASSES)
    plain = compare(ACETONE_METHANOL, points, methods=("unifac",), models=("nrtl",))
    real = compare(
        ACETONE_METHANOL, points, methods=("unifac",), models=("nrtl",), vapour=Held(0.05)
    )
    # y_i P exp(c) = x_i gamma_i Psat_i: every pressure falls by c, every measured ln gamma rises.
    before, after = (
        {(d.point, d.quantity): d for d in model_of(a, "unifac").points} for a in (plain, real)
    )
    for point in range(6):
        P = [one[point, "pressure"].calculated for one in (before, after)]
        assert np.log(P[1] / P[0]) == pytest.approx(-0.05, abs=1e-9)
        ln_gamma = [one[point, "ln_gamma_1"].measured for one in (before, after)]
        assert ln_gamma[1] - ln_gamma[0] == pytest.approx(0.05, abs=1e-9)
    seen = [a.seen.of_model(model_of(a, "unifac").model) for a in (plain, real)]
    step = (seen[1] - seen[0])[:6] * plain.seen.sigma_ln_pressure
    assert step == pytest.approx(-0.05, abs=1e-9)


def test_swapped_components_are_noticed():
    rows = isobaric()
    for row in rows:
        row["x1"], row["y1"] = 1.0 - row["x1"], 1.0 - row["y1"]
    codes = {mark.code for mark in compared(rows, models=()).marks}
    assert "swapped_components" in codes


def test_pressures_in_another_unit_are_noticed():
    rows = isobaric()
    for row in rows:
        row["pressure"] *= 760.0 / 101.325
    (mark,) = [m for m in compared(rows, models=()).marks if m.code == "pressure_unit"]
    assert "mmHg" in mark.message


def test_some_pressures_in_another_unit_are_named():
    rows = isobaric()
    for k in (3, 7):
        rows[k]["pressure"] /= 100.0
    (mark,) = [m for m in compared(rows, models=()).marks if m.code == "mixed_units"]
    assert mark.points == (3, 7)
    assert "bar" in mark.message


def test_one_point_is_marked_as_few():
    answer = compared(isobaric()[:1], models=("nrtl",))
    assert "few_points" in {mark.code for mark in answer.marks}


def test_what_cannot_be_compared_says_why():
    points = read_records([{"temperature": 300.0, "gamma_inf_1": 1.9}], MASSES)
    answer = compare(ACETONE_METHANOL, points, methods=("unifac-lle", "ideal"), models=("nrtl",))
    reasons = {one.name: one.reason for one in answer.left_out}
    assert "methanol" in reasons["unifac-lle"] or "CO " in reasons["unifac-lle"]
    assert "parameters" in reasons["nrtl"]
    assert answer.vapour_pressures is None
    assert answer.consistency.tests == ()


def test_activities_solubilities_and_enthalpies_are_compared():
    points = read_records(
        [
            {"temperature": 300.0, "gamma_inf_1": 1.9},
            {"temperature": 300.0, "gamma_1": 1.2, "x1": 0.5},
            {"temperature": 300.0, "x1": 0.5, "excess_enthalpy": 700.0},
        ],
        MASSES,
    )
    answer = compare(ACETONE_METHANOL, points, methods=("unifac-dortmund",), models=())
    listed = {one.quantity for one in answer.models[0].points}
    assert listed == {"ln_gamma_infinite", "ln_gamma", "excess_enthalpy"}


def test_solubilities_are_compared_with_the_split_of_the_model():
    butanol_water = [Component(molecule_from_smiles(one)) for one in ("CCCCO", "O")]
    # 1-Butanol / water at 298.15 K: x1 = 0.019 and 0.51 (handbook solubilities, from memory).
    points = read_records(
        [{"temperature": 298.15, "x1_poor": 0.019, "x1_rich": 0.51}], (74.12, 18.015)
    )
    answer = compare(butanol_water, points, methods=("unifac-dortmund",), models=())
    listed = {one.quantity: one for one in answer.models[0].points}
    # A prediction of mutual solubilities may miss the alcohol's side by 0.2, the water's by half.
    assert listed["x1_rich"].calculated == pytest.approx(0.51, abs=0.2)
    assert listed["x1_poor"].calculated == pytest.approx(0.019, abs=0.012)
    split = binary_split(answer.models[0].model, 298.15)
    assert split is not None
    assert listed["x1_rich"].calculated == split[1][0]


def test_bad_questions_are_refused():
    points = read_records([{"temperature": 300.0, "gamma_inf_1": 1.9}], MASSES)
    with pytest.raises(UnknownMethodError):
        compare(ACETONE_METHANOL, points, methods=("unifacs",))
    with pytest.raises(UnknownMethodError):
        compare(ACETONE_METHANOL, points, models=("nrtll",))
    with pytest.raises(ShapeError):
        compare(ACETONE_METHANOL[:1], points)


def test_boiling_points_need_vapour_pressures(monkeypatch):
    def none(*_args, **_kwargs):
        raise NoVapourPressureError("None is known.", smiles="CO")

    monkeypatch.setattr("groups.handoff.compare_door.vapour_pressure", none)
    with pytest.raises(NoVapourPressureError):
        compared(isobaric())


def test_a_comparison_reads_a_system_as_it_is_given():
    # The reference of the weights must not move the answer of a model.
    answer = compared(isobaric(), models=())
    own = model_of(answer, "unifac-dortmund")
    v = answer.measurements.vapour_liquid
    states = bubble_temperature(System(own.model, answer.vapour_pressures), 101.325, v.fractions)
    listed = [one for one in own.points if one.quantity == "temperature"]
    assert [one.calculated for one in listed] == pytest.approx(states.temperature_K.tolist())


def test_a_fitted_equation_comes_as_a_sheet_that_gives_the_model_back():
    answer = compared(isobaric(), models=("nrtl", "uniquac"), form="b/T")
    sheet = parameters_of_fit(answer, "nrtl")
    assert not sheet.predicted
    assert "12 measured points" in to_text(sheet)
    numbers = {one.name: one.value for one in sheet.pairs[0].numbers}
    b = [[[0.0, numbers["b_1,2"]], [numbers["b_2,1"], 0.0]]]
    again = correlative_model("nrtl", "b/T", b, alpha=numbers["alpha_1,2"])
    own = model_of(answer, "nrtl").model
    assert again.ln_gamma(330.0, [0.3, 0.7]) == pytest.approx(own.ln_gamma(330.0, [0.3, 0.7]))
    assert "r (UNIQUAC)" in to_text(parameters_of_fit(answer, "uniquac"))
    with pytest.raises(UnknownMethodError):
        parameters_of_fit(answer, "wilson")


def test_a_fit_that_splits_an_unsplit_liquid_is_marked():
    rows = [
        {"temperature": 320.0, "gamma_inf_1": 14.0},
        {"temperature": 320.0, "gamma_inf_2": 14.0},
        {"temperature": 320.5, "gamma_inf_1": 14.0},
    ]
    answer = compare(
        ACETONE_METHANOL, read_records(rows, MASSES), methods=("ideal",), models=("margules-2",)
    )
    assert "fit_splits" in {mark.code for mark in answer.marks}


def test_a_comparison_comes_as_two_tables():
    answer = compared(isobaric(3), models=("margules-2",))
    points = list(csv.DictReader(io.StringIO(points_to_csv(answer))))
    assert len(points) == sum(len(model.points) for model in answer.models)
    for row in points:
        gap = float(row["calculated"]) - float(row["measured"])
        # Eight digits are printed, so a difference of kPa or K holds to 1e-5.
        assert float(row["difference"]) == pytest.approx(gap, abs=1e-5)
    regions = list(csv.DictReader(io.StringIO(regions_to_csv(answer))))
    assert {row["region"] for row in regions} == set(REGIONS)
    assert {row["model"] for row in regions} == {one.name for one in answer.models}


def test_points_that_scatter_wildly_are_compared_without_a_number_that_is_not_one():
    # Boiling temperatures drawn at random, by a seed with which a fitted equation overflows.
    rng = np.random.default_rng(8)
    pair = [Component(molecule_from_smiles(one)) for one in ("CC(C)O", "C=CC(=O)OC")]
    rows = [
        {
            "temperature": 350.0 + float(rng.normal()),
            "pressure": 101.325,
            "x1": float(x),
            "y1": float(x),
        }
        for x in rng.uniform(0.01, 0.99, 30)
    ]
    answer = compare(pair, read_records(rows, (60.1, 86.1)), methods=())
    assert all(np.isfinite(one.calculated) for model in answer.models for one in model.points)


def test_points_that_contradict_each_other_are_answered():
    # Found by random points: a fitted equation overflows where its liquids are looked for.
    pair = [Component(molecule_from_smiles(one)) for one in ("CCCCCC", "c1ccccc1")]
    rows = [
        {
            "temperature": 351.0,
            "x1": 0.9820873275093553,
            "pressure": 733.6481670647346,
            "gamma_inf_1": 69232.53067010948,
            "u_x1": 0.9765625,
            "gamma_2": 20.309822576798965,
        },
        {
            "temperature": 349.1031519826052,
            "gamma_2": 0.1,
            "x1": 0.0,
            "gamma_inf_1": 31300.784884980778,
            "excess_enthalpy": 0.0,
        },
        {
            "temperature": 351.0,
            "x1": 0.9820873275093553,
            "pressure": 733.6481670647346,
            "u_x1": 0.9765625,
            "excess_enthalpy": 0.0,
            "gamma_inf_1": 69232.53067010948,
        },
    ]
    answer = compare(pair, read_records(rows, (86.2, 78.1)), methods=())
    assert answer.models
