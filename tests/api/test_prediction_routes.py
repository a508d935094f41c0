"""Predictions over HTTP say what `groups.prediction` says, in the documented shape."""

import csv
import io
import math
from typing import Any

import pytest

from groups import prediction
from groups.prediction import Component
from groups.structure.molecule import molecule_from_smiles
from tests.api.problem_check import assert_problem

ETHANOL_WATER: dict[str, Any] = {"components": ["CCO", "O"]}
ATMOSPHERE = 101.325


def components(*smiles: str) -> list[Component]:
    return [Component(molecule_from_smiles(text)) for text in smiles]


def rows_of(response) -> list[dict[str, str]]:
    assert response.headers["content-type"] == "text/csv; charset=utf-8"
    return list(csv.DictReader(io.StringIO(response.text)))


def assert_trust(confidence: dict[str, Any]) -> None:
    assert confidence["grade"] in {"high", "moderate", "low", "none"}
    assert confidence["reasons"]
    assert all(r["code"] and r["message"] and r["subject"] for r in confidence["reasons"])
    assert "interval_90" in confidence
    assert "evidence" in confidence


def test_activity_coefficients_are_those_of_groups(service):
    fractions = [[0.4, 0.6], [0.0, 1.0]]
    body = ETHANOL_WATER | {
        "temperature_K": [330.0, 350.0],
        "mole_fractions": fractions,
        "method": "unifac",
    }
    answer = service.post("/v1/activity-coefficients", body).json()
    known = prediction.activity_coefficients(
        components("CCO", "O"), [330.0, 350.0], fractions, method="unifac"
    )
    for k, point in enumerate(answer["points"]):
        # The same floats, written as JSON and read back: exactly equal.
        assert point["ln_gamma"] == known.ln_gamma[k].tolist()
        assert point["gamma"] == known.gamma[k].tolist()
        assert point["excess_gibbs_RT"] == known.excess_gibbs_RT[k]
        assert point["excess_enthalpy_J_mol"] == known.excess_enthalpy_J_mol[k]
        assert point["mole_fractions"] == fractions[k]
        assert_trust(point["confidence"])
    assert answer["method"] == "unifac"
    assert answer["cautions"] == list(prediction.CAUTIONS)
    assert [c["name"] for c in answer["components"]] == ["ethanol", "water"]


def test_a_pure_component_has_gamma_one(service):
    body = ETHANOL_WATER | {"temperature_K": 330.0, "mole_fractions": [[1.0, 0.0]]}
    [point] = service.post("/v1/activity-coefficients", body).json()["points"]
    assert point["gamma"][0] == pytest.approx(1.0, abs=1e-12)  # rounding of a few operations


def test_infinite_dilution_keeps_order_and_explains_what_is_missing(service):
    pairs = [
        {"solute": "CCCCCC", "solvent": "O", "temperature_K": 298.15},
        {"solute": "CCP(=S)(CC)CC", "solvent": {"name": "toluene"}, "temperature_K": 298.15},
        {"solute": {"cas": "64-17-5"}, "solvent": "c1ccccc1", "temperature_K": 320.0},
    ]
    results = service.post("/v1/infinite-dilution", {"pairs": pairs}).json()["results"]
    assert [r["solute"]["canonical_smiles"] for r in results] == [
        "CCCCCC",
        "CCP(=S)(CC)CC",
        "CCO",
    ]
    assert results[0]["ln_gamma_inf"] > 5.0  # hexane shuns water: measured values are above 10
    assert results[0]["gamma_inf"] == pytest.approx(math.exp(results[0]["ln_gamma_inf"]))
    assert results[1]["ln_gamma_inf"] is None
    assert results[1]["gamma_inf"] is None
    assert results[1]["confidence"]["grade"] == "none"
    for result in results:
        assert_trust(result["confidence"])


# Hansen et al. 1991, table II, leaves the pair of main groups CCN and furfural blank.
MISSING = {"method": "unifac", "on_missing": "refuse"}


def test_a_refused_parameter_is_null_in_a_batch(service):
    pair = {"solute": "CC#N", "solvent": "O=Cc1ccco1", "temperature_K": 300.0}
    body = {"pairs": [pair], **MISSING}
    [result] = service.post("/v1/infinite-dilution", body).json()["results"]
    assert result["ln_gamma_inf"] is None
    assert "missing_parameter" in {r["code"] for r in result["confidence"]["reasons"]}


def test_a_refused_parameter_is_a_problem_for_one_mixture(service):
    mixture = {"components": ["CC#N", "O=Cc1ccco1"], "temperature_K": 300.0, **MISSING}
    body = mixture | {"mole_fractions": [[0.5, 0.5]]}
    problem = assert_problem(service.post("/v1/activity-coefficients", body), "missing-parameter")
    assert problem["method"] == "unifac"
    assert len(problem["pairs"]) >= 1


def test_an_estimated_parameter_is_never_trusted_much(service):
    pair = {"solute": "CC#N", "solvent": "O=Cc1ccco1", "temperature_K": 300.0}
    body = {"pairs": [pair], "method": "unifac", "on_missing": "estimate"}
    [result] = service.post("/v1/infinite-dilution", body).json()["results"]
    assert result["ln_gamma_inf"] is not None
    assert result["method"] != "unifac"
    assert result["confidence"]["grade"] in {"low", "none"}


@pytest.mark.parametrize("given", [{"pressure_kPa": ATMOSPHERE}, {"temperature_K": 350.0}])
def test_bubble_point_is_that_of_groups(service, given):
    body = ETHANOL_WATER | {"mole_fractions": [0.3, 0.7], "method": "unifac"} | given
    answer = service.post("/v1/bubble-point", body).json()
    known = prediction.bubble_point(components("CCO", "O"), [0.3, 0.7], method="unifac", **given)
    assert answer["temperature_K"] == known.temperature_K
    assert answer["pressure_kPa"] == known.pressure_kPa
    assert answer["y"] == known.y.tolist()
    assert answer["gamma"] == known.gamma.tolist()
    assert answer["failure"] is None
    assert len(answer["vapour_pressures"]) == 2
    assert_trust(answer["confidence"])


def test_bubble_point_satisfies_modified_raoult(service):
    body = ETHANOL_WATER | {"mole_fractions": [0.3, 0.7], "pressure_kPa": ATMOSPHERE}
    a = service.post("/v1/bubble-point", body).json()
    partial = [x * g * p for x, g, p in zip(a["x"], a["gamma"], a["saturation_kPa"], strict=True)]
    # The law itself, to the tolerance of the solver's own check.
    assert sum(partial) == pytest.approx(ATMOSPHERE, rel=1e-8)
    assert a["y"] == pytest.approx([p / ATMOSPHERE for p in partial], rel=1e-8)


def test_dew_point_turns_the_bubble_point_round(service):
    body = ETHANOL_WATER | {"mole_fractions": [0.3, 0.7], "pressure_kPa": ATMOSPHERE}
    bubble = service.post("/v1/bubble-point", body).json()
    back = ETHANOL_WATER | {"mole_fractions": bubble["y"], "pressure_kPa": ATMOSPHERE}
    dew = service.post("/v1/dew-point", back).json()
    # Two solvers of one equation, each to about 1e-9; the slope dx/dy loses some digits.
    assert dew["x"] == pytest.approx([0.3, 0.7], abs=1e-6)
    assert dew["temperature_K"] == pytest.approx(bubble["temperature_K"], abs=1e-6)


def test_flash_balances_the_feed(service):
    feed = [0.4, 0.6]
    body = {"components": ["CO", "O"], "mole_fractions": feed} | {
        "temperature_K": 350.0,
        "pressure_kPa": ATMOSPHERE,
    }
    a = service.post("/v1/flash", body).json()
    assert 0.0 < a["vapour_fraction"] < 1.0
    v = a["vapour_fraction"]
    mixed = [(1 - v) * x + v * y for x, y in zip(a["x"], a["y"], strict=True)]
    assert mixed == pytest.approx(feed, abs=1e-8)  # the balance is part of the solver's check


def test_ethanol_water_azeotrope_over_http(service):
    # Handbook value at 1 atm, from memory: 78.2 C and 95.6 % by mass of ethanol, x1 = 0.895.
    # Tolerance: what the best fitted tables miss it by, doubled (0.01 and 0.3 K).
    a = service.post("/v1/azeotropes", ETHANOL_WATER | {"pressure_kPa": ATMOSPHERE}).json()
    [azeotrope] = a["azeotropes"]
    assert azeotrope["x1"] == pytest.approx(0.895, abs=0.01)
    assert azeotrope["temperature_K"] == pytest.approx(351.35, abs=0.3)
    assert azeotrope["kind"] == "minimum-boiling"
    assert azeotrope["stable_liquid"] is True
    assert_trust(a["confidence"])


def test_no_azeotrope_is_an_empty_list(service):
    # Benzene and toluene: nearly ideal, boiling points 30 K apart; no azeotrope is known.
    body = {"components": ["c1ccccc1", "Cc1ccccc1"], "pressure_kPa": ATMOSPHERE}
    assert service.post("/v1/azeotropes", body).json()["azeotropes"] == []


@pytest.mark.parametrize(
    ("kind", "given"), [("Txy", {"pressure_kPa": ATMOSPHERE}), ("Pxy", {"temperature_K": 340.0})]
)
def test_diagram_arrays_are_those_of_groups(service, kind, given):
    body = ETHANOL_WATER | {"kind": kind, "points": 21, "method": "unifac-dortmund"} | given
    answer = service.post("/v1/diagrams", body).json()
    known = prediction.diagram(
        kind, components("CCO", "O"), points=21, method="unifac-dortmund", **given
    ).diagram
    for name in ("x1", "y1", "temperature_K", "pressure_kPa"):
        assert answer[name] == getattr(known, name).tolist()
    assert answer["stable"] == [True] * 21
    assert answer["failures"] == []
    assert answer["liquid_split"] is None
    assert len(answer["azeotropes"]) == 1


def test_a_diagram_over_two_liquids_says_so(service):
    body = {"kind": "Txy", "components": ["CCCCO", "O"], "pressure_kPa": ATMOSPHERE}
    a = service.post("/v1/diagrams", body).json()
    split = a["liquid_split"]
    inside = [split["x1_lower"] < x < split["x1_upper"] for x in a["x1"]]
    assert any(inside)
    assert [not stable for stable in a["stable"]] == inside
    codes = {reason["code"] for reason in a["confidence"]["reasons"]}
    assert "possible_liquid_split" in codes
    [azeotrope] = a["azeotropes"]
    assert azeotrope["stable_liquid"] is False
    assert len(azeotrope["liquids"]) == 2


def test_liquid_split_phases_have_equal_activities(service):
    body = {"components": ["CCCCO", "O"], "temperature_K": 298.15, "method": "unifac-lle"}
    a = service.post("/v1/liquid-splits", body).json()
    assert a["splits"] is True
    first, second = (
        [math.log(x) + g for x, g in zip(p["mole_fractions"], p["ln_gamma"], strict=True)]
        for p in a["phases"]
    )
    assert first == pytest.approx(second, abs=1e-7)  # isoactivity, to the solver's tolerance
    assert_trust(a["confidence"])


def test_one_liquid_has_no_phases(service):
    body = {"components": ["CCO", "O"], "temperature_K": 298.15}
    a = service.post("/v1/liquid-splits", body).json()
    assert (a["splits"], a["phases"]) == (False, [])


@pytest.mark.parametrize(
    "vapour_pressure",
    [
        # Water, 1 to 100 C, mmHg and C: the constants of Antoine tables, from memory.
        {
            "equation": "antoine",
            "A": 8.07131,
            "B": 1730.63,
            "C": 233.426,
            "log_base": "10",
            "pressure_unit": "mmHg",
            "temperature_unit": "C",
        },
        # Water by DIPPR 101, Pa: the coefficients of the DIPPR compilation, from memory.
        {
            "equation": "dippr-101",
            "C1": 73.649,
            "C2": -7258.2,
            "C3": -7.3037,
            "C4": 4.1653e-6,
            "C5": 2.0,
        },
        # Steam tables, from memory: 60, 80 and 100 C.
        {
            "equation": "points",
            "temperature_K": [333.15, 353.15, 373.15],
            "pressure_kPa": [19.95, 47.41, 101.42],
        },
    ],
    ids=lambda given: given["equation"],
)
def test_the_users_own_vapour_pressure_is_used(service, vapour_pressure):
    body = {
        "components": ["CCO", {"smiles": "O", "vapour_pressure": vapour_pressure}],
        "mole_fractions": [0.3, 0.7],
        "temperature_K": 353.15,
    }
    a = service.post("/v1/bubble-point", body).json()
    assert a["vapour_pressures"][1]["source"] == "user"
    # Steam tables: 47.41 kPa at 80 C; the three forms agree with it within 0.5 %.
    assert a["saturation_kPa"][1] == pytest.approx(47.41, rel=5e-3)


CASES = [
    ("/v1/bubble-point", {"mole_fractions": [0.5, 0.5], "pressure_kPa": 101.3}, "CCO", 2),
    ("/v1/dew-point", {"mole_fractions": [0.5, 0.5], "pressure_kPa": 101.3}, "CCO", 2),
    ("/v1/diagrams", {"kind": "Txy", "pressure_kPa": 101.3, "points": 11}, "", 11),
    ("/v1/azeotropes", {"pressure_kPa": 101.3}, "", 1),
    (
        "/v1/activity-coefficients",
        {"temperature_K": 300.0, "mole_fractions": [[0.5, 0.5], [0.1, 0.9]]},
        "",
        2,
    ),
    ("/v1/liquid-splits", {"temperature_K": 300.0}, "", 0),
]


@pytest.mark.parametrize(("path", "body", "first", "count"), CASES, ids=lambda v: str(v)[:20])
def test_tables_come_as_csv(service, path, body, first, count):
    response = service.post(path, ETHANOL_WATER | body, "text/csv")
    rows = rows_of(response)
    assert len(rows) == count
    header = response.text.splitlines()[0].split(",")
    assert header[-2:] == ["grade", "reasons"]
    if first:
        assert rows[0]["canonical_smiles"] == first


def test_csv_and_json_hold_the_same_numbers(service):
    body = ETHANOL_WATER | {"kind": "Txy", "pressure_kPa": ATMOSPHERE, "points": 11}
    answer = service.post("/v1/diagrams", body).json()
    rows = rows_of(service.post("/v1/diagrams", body, "text/csv"))
    for name in ("x1", "y1", "temperature_K"):
        assert [float(row[name]) for row in rows] == answer[name]


def test_infinite_dilution_as_csv_leaves_missing_numbers_blank(service):
    pairs = [
        {"solute": "CCO", "solvent": "O", "temperature_K": 300.0},
        {"solute": "CCP(=S)(CC)CC", "solvent": "O", "temperature_K": 300.0},
    ]
    rows = rows_of(service.post("/v1/infinite-dilution", {"pairs": pairs}, "text/csv"))
    assert float(rows[0]["ln_gamma_inf"]) > 0.0
    assert (rows[1]["ln_gamma_inf"], rows[1]["grade"]) == ("", "none")


POINT = ETHANOL_WATER | {"mole_fractions": [0.3, 0.7]}
DIAGRAM = ETHANOL_WATER | {"kind": "Txy", "pressure_kPa": ATMOSPHERE}
OWN = {"equation": "antoine", "A": 8.0, "B": 1700.0, "C": 233.0} | {
    "log_base": "10",
    "pressure_unit": "mmHg",
    "temperature_unit": "C",
}
INVOLATILE = "C(C(C(C(C(CO)O)O)O)O)O"


@pytest.mark.parametrize(
    ("path", "body", "slug", "field"),
    [
        ("/v1/bubble-point", POINT, "invalid-input", "/temperature_K"),
        (
            "/v1/bubble-point",
            POINT | {"temperature_K": 350.0, "pressure_kPa": 100.0},
            "invalid-input",
            "/temperature_K",
        ),
        ("/v1/bubble-point", POINT | {"pressure_kPa": -1.0}, "out-of-range", "/pressure_kPa"),
        ("/v1/bubble-point", POINT | {"pressure_kPa": 0}, "out-of-range", "/pressure_kPa"),
        ("/v1/bubble-point", POINT | {"pressure_kPa": 1e12}, "out-of-range", "/pressure_kPa"),
        ("/v1/dew-point", POINT | {"temperature_K": 5.0}, "out-of-range", "/temperature_K"),
        (
            "/v1/dew-point",
            POINT | {"temperature_K": 350.0, "mole_fractions": [0.3]},
            "lengths-do-not-fit",
            "/mole_fractions",
        ),
        (
            "/v1/bubble-point",
            POINT | {"temperature_K": 350.0, "mole_fractions": [0.3, 0.8]},
            "fraction-sum",
            "/mole_fractions",
        ),
        (
            "/v1/flash",
            POINT | {"temperature_K": 350.0, "pressure_kPa": 100.0, "mole_fractions": [1.3, -0.3]},
            "out-of-range",
            "/mole_fractions/0",
        ),
        (
            "/v1/liquid-splits",
            ETHANOL_WATER | {"temperature_K": 300.0, "mole_fractions": [0.3, 0.8]},
            "fraction-sum",
            "/mole_fractions",
        ),
        ("/v1/flash", POINT | {"temperature_K": 350.0}, "invalid-input", "/pressure_kPa"),
        (
            "/v1/flash",
            POINT | {"temperature_K": 350.0, "vapour_fraction": 1.5},
            "out-of-range",
            "/vapour_fraction",
        ),
        (
            "/v1/flash",
            POINT | {"temperature_K": 350.0, "vapour_fraction": 0.5, "method": "psrk"},
            "invalid-input",
            "/vapour_fraction",
        ),
        (
            "/v1/bubble-point",
            POINT | {"temperature_K": 350.0, "vapour": "real"},
            "invalid-request",
            "/vapour",
        ),
        ("/v1/diagrams", DIAGRAM | {"kind": "xy"}, "invalid-request", "/kind"),
        ("/v1/diagrams", DIAGRAM | {"kind": "Pxy"}, "invalid-input", "/temperature_K"),
        (
            "/v1/diagrams",
            DIAGRAM | {"temperature_K": 300.0},
            "invalid-input",
            "/pressure_kPa",
        ),
        ("/v1/diagrams", DIAGRAM | {"points": 1}, "invalid-request", "/points"),
        ("/v1/diagrams", DIAGRAM | {"points": 10.5}, "invalid-request", "/points"),
        ("/v1/diagrams", DIAGRAM | {"points": 10**30}, "too-many-items", "/points"),
        ("/v1/diagrams", DIAGRAM | {"components": ["CCO"]}, "lengths-do-not-fit", "/components"),
        (
            "/v1/diagrams",
            DIAGRAM | {"components": ["CCO", "O", "CO"]},
            "lengths-do-not-fit",
            "/components",
        ),
        ("/v1/azeotropes", ETHANOL_WATER, "invalid-input", "/temperature_K"),
        (
            "/v1/liquid-splits",
            ETHANOL_WATER | {"temperature_K": 1e9},
            "out-of-range",
            "/temperature_K",
        ),
        (
            "/v1/bubble-point",
            POINT
            | {
                "temperature_K": 350.0,
                "components": ["CCO", {"smiles": "O", "vapour_pressure": OWN | {"B": -5.0}}],
            },
            "invalid-input",
            "/components/1/vapour_pressure",
        ),
        (
            "/v1/bubble-point",
            POINT
            | {
                "temperature_K": 350.0,
                "components": ["CCO", {"smiles": "O", "vapour_pressure": OWN | {"A": "8"}}],
            },
            "invalid-request",
            "/components/1/vapour_pressure/A",
        ),
        (
            "/v1/bubble-point",
            POINT
            | {
                "temperature_K": 350.0,
                "components": ["CCO", {"smiles": "O", "vapour_pressure": {"A": 8.0}}],
            },
            "invalid-request",
            "/components/1/vapour_pressure",
        ),
        (
            "/v1/infinite-dilution",
            {"pairs": [{"solute": "CCO", "solvent": "O(", "temperature_K": 300.0}]},
            "unreadable-smiles",
            "/pairs/0/solvent",
        ),
        (
            "/v1/infinite-dilution",
            {"pairs": [{"solute": "CCO", "solvent": "O", "temperature_K": -300.0}]},
            "out-of-range",
            None,
        ),
        ("/v1/infinite-dilution", {"pairs": []}, "invalid-request", "/pairs"),
    ],
)
def test_bad_predictions_are_refused_with_field_and_cure(service, path, body, slug, field):
    assert_problem(service.post(path, body), slug, field)


def test_atoms_without_a_group_are_a_problem_that_names_the_component(service):
    body = POINT | {"components": ["CCO", "CCP(=S)(CC)CC"], "temperature_K": 350.0}
    problem = assert_problem(
        service.post("/v1/bubble-point", body), "incomplete-assignment", "/components/1"
    )
    assert problem["smiles"] == "CCP(=S)(CC)CC"
    assert problem["atoms"]
