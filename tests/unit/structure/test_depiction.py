"""The picture: well-formed, the same every time, and readable without colour."""

import re
from dataclasses import replace
from xml.etree import ElementTree

import pytest

from groups.structure import Molecule, molecule_from_smiles
from groups.structure.assignment import Assignment, GroupCount
from groups.structure.depiction import depict

SVG = "{http://www.w3.org/2000/svg}"


def ethanol() -> tuple[Molecule, Assignment]:
    groups = (
        GroupCount(1, "CH3", 1, "CH2", 1, ((0,),)),
        GroupCount(2, "CH2", 1, "CH2", 1, ((1,),)),
        GroupCount(14, "OH", 5, "OH", 1, ((2,),)),
    )
    return molecule_from_smiles("CCO"), Assignment("unifac", True, groups, (), None, ())


def benzonitrile() -> tuple[Molecule, Assignment]:
    molecule = molecule_from_smiles("N#Cc1ccccc1")
    groups = (
        GroupCount(9, "ACH", 3, "ACH", 5, ((3,), (4,), (5,), (6,), (7,))),
        GroupCount(10, "AC", 3, "ACH", 1, ((2,),)),
    )
    why = "No group for the nitrile attached to an aromatic ring <here> & now."
    return molecule, Assignment("unifac", False, groups, (0, 1), why, ())


def texts(svg: str) -> list[str]:
    return [element.text or "" for element in ElementTree.fromstring(svg).iter(f"{SVG}text")]


@pytest.mark.parametrize("example", [ethanol(), benzonitrile()], ids=["ethanol", "benzonitrile"])
def test_the_picture_is_one_well_formed_svg_and_always_the_same(
    example: tuple[Molecule, Assignment],
) -> None:
    svg = depict(*example)
    assert ElementTree.fromstring(svg).tag == f"{SVG}svg"
    assert svg.count("<svg") == 1
    assert depict(*example) == svg


def test_it_speaks_to_screen_readers() -> None:
    root = ElementTree.fromstring(depict(*ethanol()))
    assert root.get("role") == "img"
    title, description = root.find(f"{SVG}title"), root.find(f"{SVG}desc")
    assert title is not None
    assert description is not None
    assert root.get("aria-labelledby") == f"{title.get('id')} {description.get('id')}"
    assert "unifac" in (title.text or "")
    assert all(name in (description.text or "") for name in ("CH3", "CH2", "OH"))


def test_the_legend_lists_symbol_group_and_count() -> None:
    words = texts(depict(*benzonitrile()))
    assert {"A", "D", "?"} <= set(words)
    assert any(re.match(r"ACH × 5\b", word) for word in words)
    assert any(re.match(r"AC × 1\b", word) for word in words)
    assert "no group of unifac" in words


def test_symbols_are_no_symbols_of_elements() -> None:
    molecule = molecule_from_smiles("C" * 30)
    groups = tuple(GroupCount(n, f"g{n}", n, "m", 1, ((n,),)) for n in range(30))
    words = texts(depict(molecule, Assignment("unifac", True, groups, (), None, ())))
    symbols = words[1::2][:30]
    assert len(set(symbols)) == 30
    assert not set(symbols) & {"B", "C", "F", "H", "I", "K", "N", "O", "P", "S", "U", "V", "W", "Y"}


def test_each_atom_carries_its_label() -> None:
    # RDKit draws a note as outlines of class 'note', one or more for each labelled atom.
    labelled = depict(*ethanol()).count("class='note'")
    molecule, assignment = ethanol()
    bare = depict(molecule, replace(assignment, groups=()))
    assert labelled >= 3
    assert bare.count("class='note'") == 0


def test_atoms_without_a_group_are_hatched_and_explained() -> None:
    svg = depict(*benzonitrile())
    hatched = [line for line in svg.splitlines() if "circle" in line and "url(#no-group)" in line]
    assert len(hatched) == 2
    assert "url(#no-group)" not in depict(*ethanol()).replace('id="no-group"', "")
    assert "aromatic ring <here> & now." in " ".join(texts(svg))


def test_nothing_is_drawn_outside_the_picture() -> None:
    for molecule, assignment in (ethanol(), benzonitrile()):
        root = ElementTree.fromstring(depict(molecule, assignment))
        _, _, width, height = map(float, (root.get("viewBox") or "").split())
        for text in root.iter(f"{SVG}text"):
            # 8.9 px is the mean character width that the layout reckons with.
            end = float(text.get("x") or 0) + 8.9 * len(text.text or "")
            if text.get("text-anchor") == "start":
                assert end <= width
            assert 0 < float(text.get("y") or 0) < height


def test_a_chain_of_200_atoms_says_that_its_labels_are_left_out() -> None:
    molecule = molecule_from_smiles("C" * 200)
    groups = (GroupCount(2, "CH2", 1, "CH2", 200, tuple((n,) for n in range(200))),)
    svg = depict(molecule, Assignment("unifac", True, groups, (), None, ()))
    assert "too large for labels" in " ".join(texts(svg))
    assert float(ElementTree.fromstring(svg).get("width") or 0) < 2_000


@pytest.mark.parametrize("smiles", ["O", "[H][H]", "[Ar]", "C"])
def test_one_and_two_atoms_are_drawn(smiles: str) -> None:
    molecule = molecule_from_smiles(smiles)
    atoms = (tuple(range(molecule.mol.GetNumAtoms())),)
    groups = (GroupCount(1, smiles, 1, smiles, 1, atoms),)
    svg = depict(molecule, Assignment("psrk", True, groups, (), None, ()))
    assert ElementTree.fromstring(svg) is not None
    assert "nan" not in svg
