"""`mixwright fit` and `mixwright compare`: what they print, write and refuse."""

import json

import pytest

from api.cli import main

PAIR = ("isopropanol", "methyl acrylate")
BODY = {
    "components": ["CC(C)O", "C=CC(=O)OC"],
    "temperature_range_K": [330.0, 360.0],
    "pressure_kPa": 101.325,
}
POINTS = "temperature_C,pressure_kPa,x1,y1\n77.0,101.325,0.3,0.34\n77.2,101.325,0.5,0.48\n"


@pytest.fixture
def run(capsys):
    def command(*arguments: str) -> tuple[int, str, str]:
        status = main(arguments)
        printed = capsys.readouterr()
        return status, printed.out, printed.err

    return command


@pytest.fixture
def points(tmp_path):
    file = tmp_path / "points.csv"
    file.write_text("# a comment\n" + POINTS, encoding="utf-8")
    return str(file)


def test_a_fit_prints_its_sheet_and_its_effects(run, tmp_path):
    written = tmp_path / "predicted.xml"
    arguments = ["fit", *PAIR, "-T", "330K", "360K", "-P", "1atm", "--thermoml", str(written)]
    status, out, err = run(*arguments)
    assert (status, err) == (0, "")
    for words in ("tau_ij = a_ij + b_ij/T", "azeotrope at 101.325 kPa", "Weights: ", "Confidence"):
        assert words in out
    assert "<DataReport" in written.read_text(encoding="utf-8")


def test_the_json_of_a_fit_is_the_answer_of_the_service(run, service):
    _, out, _ = run("fit", *PAIR, "-T", "330K", "360K", "-P", "1atm", "--json")
    assert json.loads(out) == service.post("/v1/fits", BODY).json()


def test_the_csv_of_a_fit_is_the_table_of_the_service(run, service):
    _, out, _ = run("fit", *PAIR, "-T", "330K", "360K", "-P", "1atm", "--csv")
    assert out.splitlines() == service.post("/v1/fits", BODY, "text/csv").text.splitlines()


def test_a_comparison_prints_models_advice_and_the_narrowed_diagram(run, points, tmp_path):
    picture = tmp_path / "points.png"
    status, out, err = run("compare", *PAIR, points, "--picture", str(picture))
    assert (status, err) == (0, "")
    for words in ("Data: ", "Distance from the points", "Recommended: ", "with the points"):
        assert words in out
    assert picture.read_bytes().startswith(b"\x89PNG")


def test_the_json_of_a_comparison_is_the_answer_of_the_service(run, service, points):
    _, out, _ = run("compare", *PAIR, points, "--json")
    body = {"components": BODY["components"], "csv": POINTS}
    assert json.loads(out) == service.post("/v1/comparisons", body).json()


@pytest.mark.parametrize("table", ["points", "regions"])
def test_the_csv_of_a_comparison_is_the_table_of_the_service(run, service, points, table):
    _, out, _ = run("compare", *PAIR, points, "--csv", table)
    body = {"components": BODY["components"], "csv": POINTS, "table": table}
    answered = service.post("/v1/comparisons", body, "text/csv").text
    assert out.splitlines() == answered.splitlines()


def test_the_sheet_of_an_equation_fitted_to_the_points(run, points):
    status, out, _ = run("compare", *PAIR, points, "--sheet", "margules-2")
    assert status == 0
    assert "2 measured points" in out


@pytest.mark.parametrize(
    ("arguments", "status", "words"),
    [
        (["fit", "ethanol", "-P", "1atm"], 2, "two"),
        (["fit", *PAIR], 2, "range of temperature"),
        (["fit", "1-butanol", "water", "--model", "wilson", "-T", "320", "350"], 3, "Wilson"),
        (["compare", *PAIR, "nowhere.csv"], 1, "nowhere.csv"),
        (["compare", *PAIR, "."], 2, "folder"),
    ],
)
def test_refusals_say_what_to_do(run, arguments, status, words):
    found, out, err = run(*arguments)
    assert (found, out) == (status, "")
    assert words.lower() in err.lower()


def test_a_file_that_is_no_text_is_refused(run, tmp_path):
    file = tmp_path / "points.xlsx"
    file.write_bytes(b"PK\x03\x04\xff\xfe\x00")
    status, _, err = run("compare", *PAIR, str(file))
    assert status == 2
    assert "UTF-8" in err
