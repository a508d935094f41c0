"""Pictures of diagrams: well formed, readable in black and white, honest about two liquids."""

import re
import xml.etree.ElementTree as ElementTree

import numpy as np
import pytest

from api.pictures import stable_branches

ATMOSPHERE = {"kind": "Txy", "pressure_kPa": 101.325, "points": 41}


def picture(service, components, accept="image/svg+xml", **given):
    body = ATMOSPHERE | {"components": components} | given
    return service.post("/v1/diagrams", body, accept)


def test_svg_is_well_formed_and_always_the_same(service):
    first = picture(service, ["CCO", "O"])
    assert first.headers["content-type"] == "image/svg+xml"
    ElementTree.fromstring(first.text)
    assert picture(service, ["CCO", "O"]).content == first.content


def test_png_is_a_png(service):
    response = picture(service, ["CCO", "O"], "image/png")
    assert response.headers["content-type"] == "image/png"
    assert response.content.startswith(b"\x89PNG\r\n\x1a\n")


def words(picture_of):
    """What is written in a picture; every text stands beside its outline as a comment."""
    return " ".join(re.findall(r"<!-- (.*?) -->", picture_of.text))


def test_two_liquids_are_hatched_and_one_is_not(service):
    two, one = picture(service, ["CCCCO", "O"]), picture(service, ["CCO", "O"])
    assert "Two liquids, no single one" in words(two)
    assert "Two liquids" not in words(one)
    assert two.text.count("<pattern") == one.text.count("<pattern") + 1


def test_intervals_are_shaded_and_told_apart_without_colour(service):
    text = picture(service, ["CCO", "O"])
    assert "Liquid, 90 % interval" in words(text) and "Vapour, 90 % interval" in words(text)
    assert text.text.count("<pattern") == 1  # the vapour's is dotted, the liquid's plain


def test_the_chance_of_an_azeotrope_stands_in_the_legend(service):
    body = ATMOSPHERE | {"components": ["CCO", "O"]}
    chance = service.post("/v1/diagrams", body).json()["azeotrope_chance"]
    assert f"probability {chance['probability']:.2f}" in words(picture(service, ["CCO", "O"]))


def test_an_ideal_solution_has_neither_interval_nor_chance(service):
    text = words(picture(service, ["CCO", "O"], method="ideal"))
    assert "interval" not in text and "probability" not in text


def test_lines_are_told_apart_without_colour(service):
    text = picture(service, ["CCO", "O"]).text
    assert "stroke-dasharray" in text  # the vapour is dashed, the liquid is not


@pytest.mark.parametrize("name", ["water & salt <x>", "$x_1$"])
def test_names_cannot_break_the_picture(service, name):
    # A name reaches the picture only through the offline list; SMILES with '$' or '<' do not parse.
    response = picture(service, ["CCO", {"name": name}])
    assert response.status_code == 422


def test_smiles_with_characters_of_markup_are_drawn_as_text(service):
    # No common name: the SMILES itself, with '#', '\\' and '/', becomes the label.
    response = picture(service, ["CC#CCCCCCC/C=C\\CCCCCO", "CCO"], kind="Txy")
    assert response.status_code == 200
    ElementTree.fromstring(response.text)


def test_branches_leave_out_what_is_unstable_or_failed():
    x1 = np.linspace(0.0, 1.0, 6)
    stable = np.array([True, True, False, False, True, True])
    level = np.array([1.0, 2.0, 3.0, 3.0, np.nan, 5.0])
    first, second = stable_branches(x1, x1, level, stable)
    assert first.x1.tolist() == [0.0, 0.2]
    assert second.x1.tolist() == [1.0]
