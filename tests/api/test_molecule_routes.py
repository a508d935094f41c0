"""Molecules over HTTP: identity, groups, drawing."""

import csv
import io
import xml.etree.ElementTree as ElementTree

import pytest

# Groups of the example molecules of Hansen et al. 1991, table I: ethanol 1 CH3, 1 CH2, 1 OH;
# acetone ("2-propanone") 1 CH3, 1 CH3CO; water 1 H2O.
PUBLISHED = {
    "CCO": {"CH3": 1, "CH2": 1, "OH": 1},
    "CC(C)=O": {"CH3": 1, "CH3CO": 1},
    "O": {"H2O": 1},
}


def describe(service, molecules, methods=("unifac",), accept="application/json"):
    body = {"molecules": molecules, "methods": list(methods)}
    return service.post("/v1/molecules", body, accept)


@pytest.mark.parametrize("smiles", sorted(PUBLISHED))
def test_groups_of_published_examples(service, smiles):
    [result] = describe(service, [smiles]).json()["results"]
    assignment = result["assignments"]["unifac"]
    assert assignment["complete"] is True
    assert {g["subgroup"]: g["count"] for g in assignment["groups"]} == PUBLISHED[smiles]


def test_every_way_to_name_a_molecule_gives_the_same(service):
    ways = ["OCC", {"smiles": "C(C)O"}, {"name": "ethanol"}, {"cas": "64-17-5"}]
    results = describe(service, ways).json()["results"]
    assert all(result == results[0] for result in results)
    assert results[0]["name"] == "ethanol"
    assert results[0]["cas"] == "64-17-5"
    assert results[0]["formula"] == "C2H6O"
    # IUPAC standard atomic weights, abridged: C 12.011, H 1.008, O 15.999
    assert results[0]["molar_mass_g_mol"] == pytest.approx(46.069, abs=0.002)


def test_atoms_of_groups_cover_the_molecule_once(service):
    [result] = describe(service, ["CC(=O)Oc1ccccc1C(=O)O"], ["unifac-dortmund"]).json()["results"]
    groups = result["assignments"]["unifac-dortmund"]["groups"]
    atoms = [atom for group in groups for occurrence in group["atoms"] for atom in occurrence]
    assert sorted(atoms) == list(range(13))  # aspirin has 13 heavy atoms


def test_what_no_group_covers_is_said_and_is_no_error(service):
    response = describe(service, ["CCP(=S)(CC)CC"])  # no table has a phosphine sulfide
    assert response.status_code == 200
    assignment = response.json()["results"][0]["assignments"]["unifac"]
    assert assignment["complete"] is False
    assert assignment["unassigned_atoms"]
    assert assignment["explanation"]


def test_results_keep_the_order_of_the_request(service):
    smiles = ["C" * n for n in range(5, 60)]
    results = describe(service, smiles).json()["results"]
    assert [result["canonical_smiles"] for result in results] == smiles


def test_groups_as_csv(service):
    response = describe(service, ["CCO", "CC(C)=O"], accept="text/csv")
    assert response.headers["content-type"] == "text/csv; charset=utf-8"
    rows = list(csv.DictReader(io.StringIO(response.text)))
    assert [(r["canonical_smiles"], r["subgroup"], r["count"]) for r in rows[:3]] == [
        ("CCO", "CH3", "1"),
        ("CCO", "CH2", "1"),
        ("CCO", "OH", "1"),
    ]


def test_methods_without_groups_are_refused(service):
    response = describe(service, ["CCO"], ["ideal"])
    assert response.status_code == 422
    assert response.json()["type"] == "/problems/unknown-method"


def test_a_drawing_is_svg_and_names_the_groups(service):
    body = {"molecule": "CC(=O)Oc1ccccc1C(=O)O", "method": "unifac"}
    response = service.post("/v1/molecules/depictions", body, "image/svg+xml")
    assert response.headers["content-type"] == "image/svg+xml"
    ElementTree.fromstring(response.text)
    assert "COOH" in response.text


def test_a_drawing_of_a_bad_molecule_is_a_problem(service):
    response = service.post("/v1/molecules/depictions", {"molecule": "C("}, "image/svg+xml")
    assert response.status_code == 422
    assert response.json()["field"] == "/molecule"
