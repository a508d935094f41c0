"""Intervals, chances and plans as the command line prints them."""

import json

import pytest

from api.cli import main


@pytest.fixture
def run(capsys):
    def command(*arguments: str) -> tuple[int, str, str]:
        status = main(arguments)
        printed = capsys.readouterr()
        return status, printed.out, printed.err

    return command


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["-x", "0.3", "0.7", "-P", "1atm"], ["90 % interval", " K\n"]),
        (["-x", "0.3", "0.7", "-T", "350"], ["90 % interval", " kPa\n"]),
        (["-P", "1atm", "--points", "5"], ["90 % interval of T", "probability"]),
        (["-T", "350", "--points", "5"], ["90 % interval of P", "probability"]),
        (["-P", "1atm", "--what", "azeotropes"], ["Azeotrope of ethanol and water: probability"]),
        (["-T", "300", "--what", "split"], ["Liquid split: probability"]),
        (["-T", "300", "-x", "0.5", "0.5", "--what", "activity"], ["90 % interval"]),
        (["-T", "300", "--what", "dilution", "--level", "0.5"], ["90 % interval", "50 % interval"]),
    ],
)
def test_numbers_stand_beside_their_intervals_and_chances(run, arguments, words):
    status, out, err = run("predict", "ethanol", "water", *arguments)
    assert (status, err) == (0, "")
    assert all(word in out for word in words)


def test_an_ideal_solution_prints_no_interval(run):
    _, out, _ = run("predict", "CCO", "O", "-x", "0.3", "0.7", "-P", "1atm", "--method", "ideal")
    assert "interval" not in out


@pytest.mark.parametrize("level", ["0", "1", "90", "much"])
def test_a_level_that_is_no_probability_is_refused_by_name(run, capsys, level):
    with pytest.raises(SystemExit) as stopped:
        run("predict", "CCO", "O", "-T", "300", "--what", "dilution", "--level", level)
    assert stopped.value.code == 2
    assert "--level" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["CC(C)O", "C=CC(=O)OC", "-P", "1atm"], "x1 of the azeotrope"),
        (
            ["CCO", "O", "-x", "0.3", "0.7", "-T", "330"],
            "relative volatility of ethanol over water",
        ),
        (["CCCCCC", "c1ccccc1", "--solvents", "sulfolane", "NMP", "-T", "330"], "lead of"),
    ],
)
def test_a_plan_names_what_to_measure(run, arguments, words):
    status, out, err = run("plan", *arguments)
    assert (status, err) == (0, "")
    assert words in out and "width expected after it" in out


def test_a_plan_as_json_is_that_of_the_service(run, service):
    _, out, _ = run("plan", "CC(C)O", "C=CC(=O)OC", "-P", "101.325", "--json")
    body = {
        "components": ["CC(C)O", "C=CC(=O)OC"],
        "question": "azeotrope",
        "pressure_kPa": 101.325,
    }
    assert json.loads(out) == service.post("/v1/measurement-plan", body).json()


def test_a_ranking_without_a_temperature_is_refused(run):
    status, _, err = run("plan", "CCCCCC", "c1ccccc1", "--solvents", "CS(C)=O", "CN(C)C=O")
    assert status == 2 and "temperature" in err
