"""The command line: what it prints, and how it fails."""

import json
import os
import subprocess
import sys
import xml.etree.ElementTree as ElementTree

import pytest

from api import __version__
from api.cli import main
from api.commands.quantities import molecule, pressure_kPa, temperature_K
from groups.prediction import ALL_METHODS, CAUTIONS


@pytest.fixture
def run(capsys):
    def command(*arguments: str) -> tuple[int, str, str]:
        status = main(arguments)
        printed = capsys.readouterr()
        return status, printed.out, printed.err

    return command


def test_a_bubble_point_is_printed_with_its_doubts_and_cautions(run):
    status, out, err = run("predict", "ethanol", "water", "-x", "0.3", "0.7", "-P", "1atm")
    assert (status, err) == (0, "")
    assert "ethanol (CCO)" in out
    assert "Confidence: " in out
    assert CAUTIONS[0] in out


def test_json_is_the_answer_of_the_service(run, service):
    arguments = ["predict", "CCO", "O", "-x", "0.3", "0.7", "-P", "101.325", "--json"]
    _, out, _ = run(*arguments)
    body = {"components": ["CCO", "O"], "mole_fractions": [0.3, 0.7], "pressure_kPa": 101.325}
    assert json.loads(out) == service.post("/v1/bubble-point", body).json()


def test_csv_is_the_table_of_the_service(run, service):
    _, out, _ = run("predict", "CCO", "O", "-P", "101.325", "--points", "11", "--csv")
    body = {"kind": "Txy", "components": ["CCO", "O"], "pressure_kPa": 101.325, "points": 11}
    assert out.splitlines() == service.post("/v1/diagrams", body, "text/csv").text.splitlines()


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["CCO", "O", "-P", "1atm", "--points", "11"], "Azeotrope (minimum-boiling)"),
        (["CCO", "O", "-T", "60C", "--points", "11"], "Azeotrope (minimum-boiling)"),
        (["c1ccccc1", "Cc1ccccc1", "-P", "1bar", "--points", "11"], "No azeotrope."),
        (["CCCCO", "O", "-P", "1atm", "--points", "21"], "two liquids"),
        (["CC(C)=O", "ClC(Cl)Cl", "CO", "-P", "1atm"], "Azeotrope (saddle)"),
        (["CO", "O", "-x", "0.4", "0.6", "-T", "350", "-P", "1atm"], "vapour fraction"),
        (["CO", "O", "-x", "0.4", "0.6", "-P", "1atm", "--what", "dew"], "T = "),
        (["CCCCO", "O", "-T", "25C", "--what", "split"], "Two liquids"),
        (["CCO", "O", "-T", "25C", "--what", "split"], "One liquid"),
        (["CCO", "O", "-T", "300", "-x", "0.5", "0.5", "--what", "activity"], "gE/RT"),
        (["CCO", "O", "-T", "300", "--what", "dilution"], "in solvent"),
    ],
)
def test_each_question_is_answered(run, arguments, words):
    status, out, _ = run("predict", *arguments)
    assert status == 0
    assert words in out
    assert "Confidence: " in out


def test_advice_is_that_of_the_service(run, service):
    arguments = ["advise", "acetic acid", "water", "-T", "370K", "395K", "-P", "1atm"]
    status, out, _ = run(*arguments)
    assert status == 0
    assert "For a flowsheet: activity coefficients, real vapour" in out
    assert "Confidence: " in out and CAUTIONS[0] in out
    _, out, _ = run(*arguments, "--json")
    body = {
        "components": ["CC(=O)O", "O"],
        "temperature_K": [370.0, 395.0],
        "pressure_kPa": [101.325, 101.325],
    }
    assert json.loads(out) == service.post("/v1/advice", body).json()
    _, out, _ = run(*arguments, "--csv")
    assert out.splitlines() == service.post("/v1/advice", body, "text/csv").text.splitlines()


def test_vapour_fraction_and_vapour_are_options(run):
    pair = ["predict", "CC(=O)O", "O", "-x", "0.3", "0.7", "-P", "1atm"]
    _, half, _ = run(*pair, "--vapour-fraction", "0.5")
    assert "vapour fraction 0.5" in half and "Vapour virial" in half
    _, ideal, _ = run(*pair, "--vapour", "ideal")
    assert "Vapour ideal: asked for" in ideal
    _, split, _ = run("predict", "CCCCO", "O", "-x", "0.2", "0.8", "-P", "1atm")
    assert "The phases:" in split and "moles in a mole" in split
    status, _, _ = run(
        "predict", "CO", "O=C=O", "-x", "0.8", "0.2", "-T", "40C", "--method", "psrk"
    )
    assert status == 0


def test_pictures_are_written(run, tmp_path):
    drawing, picture = tmp_path / "diagram.svg", tmp_path / "diagram.png"
    run("predict", "CCO", "O", "-P", "1atm", "--points", "11", "--picture", str(drawing))
    run("predict", "CCO", "O", "-P", "1atm", "--points", "11", "--picture", str(picture))
    ElementTree.parse(drawing)
    assert picture.read_bytes().startswith(b"\x89PNG")


def test_groups_are_printed_and_drawn(run, tmp_path):
    target = tmp_path / "aspirin.svg"
    status, out, _ = run("groups", "aspirin", "--method", "unifac", "--picture", str(target))
    assert status == 0
    assert "COOH" in out and "50-78-2" in out
    ElementTree.parse(target)


def test_groups_say_what_is_not_covered(run):
    _, out, _ = run("groups", "CCP(=S)(CC)CC", "--method", "unifac")
    assert "Not covered" in out


def test_methods_are_listed_and_shown(run):
    _, out, _ = run("methods")
    assert all(method in out for method in ALL_METHODS)
    _, out, _ = run("methods", "unifac-dortmund")
    assert "Gmehling" in out


@pytest.mark.parametrize("command", [["methods"], ["methods", "psrk"], ["groups", "CCO"]])
def test_json_is_json(run, command):
    _, out, _ = run(*command, "--json")
    assert json.loads(out)


@pytest.mark.parametrize(
    ("arguments", "status", "words"),
    [
        (["predict", "CCO", "C(C", "-P", "1atm"], 2, "position"),
        (["advise", "CCO", "O", "-T", "300", "310", "320", "-P", "1atm"], 2, "-T"),
        (["predict", "unobtainium", "O", "-P", "1atm"], 2, "unobtainium"),
        (["predict", "CCO", "O", "-x", "0.3", "0.8", "-P", "1atm"], 2, "sum of 1.1"),
        (["predict", "CCO", "O"], 2, "-P 1atm"),
        (["predict", "CCO", "O", "-P", "nan"], 2, "pressure_kPa"),
        (["predict", "CCO", "O", "-T", "-5"], 2, "temperature_K"),
        (["predict", "CCO", "OCC", "-P", "1atm"], 2, "same molecule"),
        (["predict", "CCO", "O", "-P", "1atm", "--method", "unifaq"], 2, "no method"),
        (["predict", "CCO", "O", "--what", "flash", "-x", "1", "0", "-T", "300"], 2, "-P"),
        (["predict", "CCO", "O", "--what", "split", "-P", "1atm"], 2, "-T"),
        (["predict", "CCO", "O", "--what", "bubble", "-P", "1atm"], 2, "-x"),
        (["predict", "CCO", "CCP(=S)(CC)CC", "-P", "1atm"], 3, "Leave this component out"),
        (["groups", "[Na+].[Cl-]"], 2, "salt"),
        (["methods", "unifaq"], 2, "unifaq"),
    ],
)
def test_a_refusal_has_a_status_and_says_what_to_do(run, arguments, status, words):
    found, out, err = run(*arguments)
    assert (found, out) == (status, "")
    assert words in err
    assert "Traceback" not in err


def test_a_picture_that_cannot_be_written_is_no_crash(run, tmp_path):
    target = tmp_path / "nowhere" / "x.svg"
    status, _, err = run("predict", "CCO", "O", "-P", "1atm", "--picture", str(target))
    assert status == 1
    assert "nowhere" in err


@pytest.mark.parametrize(
    ("text", "kelvin"),
    [
        ("351.4", 351.4),
        ("351.4K", 351.4),
        ("351.4 K", 351.4),
        ("25C", 298.15),
        ("25°C", 298.15),
        ("-10C", 263.15),
        ("212F", 373.15),
    ],
)
def test_temperatures_are_read(text, kelvin):
    # Definitions of the scales; rounding of one or two operations.
    assert temperature_K(text) == pytest.approx(kelvin, abs=1e-9)


@pytest.mark.parametrize(
    ("text", "kilopascal"),
    [
        ("101.325", 101.325),
        ("1atm", 101.325),
        ("1.01325 bar", 101.325),
        ("760mmHg", 101.325),
        ("760torr", 101.325),
        ("101325Pa", 101.325),
        ("0.101325MPa", 101.325),
        ("1013.25mbar", 101.325),
        ("14.695948775513 psi", 101.325),  # 1 atm in psi, NIST SP 811
    ],
)
def test_pressures_are_read(text, kilopascal):
    assert pressure_kPa(text) == pytest.approx(kilopascal, rel=1e-9)


@pytest.mark.parametrize("arguments", [["-T", "5furlong"], ["-P", "x"], ["-P", "1..2"], ["-P", ""]])
def test_a_quantity_without_meaning_is_refused(arguments, capsys):
    with pytest.raises(SystemExit) as stopped:
        main(["predict", "CCO", "O", *arguments])
    assert stopped.value.code == 2
    assert "error: argument" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("text", "smiles"),
    [
        ("CO", "CO"),  # methanol: what reads as SMILES is SMILES
        ("smiles:CO", "CO"),
        ("name:methanol", "CO"),
        ("methanol", "CO"),
        ("67-56-1", "CO"),
        ("cas:67-56-1", "CO"),
    ],
)
def test_molecules_are_read(text, smiles):
    assert molecule(text).canonical_smiles == smiles


def test_a_reader_that_stops_early_is_no_crash():
    # The reader closes its end before anything is printed.
    reading, writing = os.pipe()
    os.close(reading)
    with os.fdopen(writing, "wb") as pipe:
        done = subprocess.run(
            [sys.executable, "-m", "api.cli", "methods", "unifac"],
            stdout=pipe,
            stderr=subprocess.PIPE,
            check=False,
        )
    assert b"Traceback" not in done.stderr


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["serve", "--port", "99999"], "99999 is no port"),
        (["serve", "--workers", "0"], "1 to 64 processes"),
        (["predict", "CCO", "O", "-P", "1atm", "--picture", "x.pdf"], ".svg or .png"),
        (["groups", "CCO", "--picture", "x.png"], "must end in .svg"),
    ],
)
def test_an_option_that_cannot_be_is_refused_by_name(capsys, arguments, words):
    with pytest.raises(SystemExit) as stopped:
        main(arguments)
    assert stopped.value.code == 2
    printed = capsys.readouterr().err
    assert arguments[-2] in printed and words in printed


def test_the_version_is_printed(capsys):
    with pytest.raises(SystemExit) as stopped:
        main(["--version"])
    assert stopped.value.code == 0
    assert __version__ in capsys.readouterr().out
