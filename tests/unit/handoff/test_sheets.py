"""The texts of a sheet say what the numbers do."""

import re

import numpy as np
import pytest

from groups.handoff.correlations import FORMS
from groups.handoff.sheets import interactions_text
from groups.handoff.sheets.vapour_pressure_text import vapour_pressure_text
from groups.pure import AntoineInput, vapour_pressure
from groups.structure.identify import molecule_from_name
from groups.structure.molecule import molecule_from_smiles


def evaluated(text: str, numbers: dict[str, float], T: float) -> float:
    """ln(P/kPa) by the very words of the sheet."""
    left, right = text.split(" = ", 1)
    formula = right.partition(", ")[0].replace("^", "**")
    names = {"ln": np.log, "T": T, "max": max, **numbers}
    names |= {"Tc": numbers.get("Tc_K"), "Pc": numbers.get("Pc_kPa"), "T0": numbers.get("T0_K")}
    if "tau" in formula:
        names["tau"] = 1.0 - T / names["Tc"]
    if "x =" in right:
        names["x"] = max(0.0, (T - names["T0"]) / names["Tc"])
    value = eval(formula.replace(") (", ") * ("), {}, names)
    if left == "ln(P/Pc)":
        return float(value + np.log(names["Pc"]))
    return float(value * np.log(10.0) - np.log(1000.0) if left == "log10(P/Pa)" else value)


def in_python(text: str) -> str:
    """A product is written with a space between its factors; Python wants a star."""
    return re.sub(r"(?<=[\w)]) (?=[A-Za-z(])(?!\w* =)", " * ", text)


@pytest.mark.parametrize("name", ["ethanol", "water", "acetone", "toluene", "1-octanol", "hexane"])
def test_a_published_curve_can_be_typed_in(name):
    line = vapour_pressure(molecule_from_name(name))
    written = vapour_pressure_text(line)
    head, _, formula = written.equation.partition(" = ")
    formula, comma, rest = formula.partition(", ")
    text = f"{head} = {in_python(formula)}{comma}{rest}"
    T = 0.5 * sum(line.range_K)
    assert evaluated(text, dict(written.numbers), T) == pytest.approx(
        float(line.ln_kPa(T)), abs=1e-9
    )


def test_the_callers_own_antoine_equation_comes_out_in_one_unit():
    # Acetone, log10, mmHg and deg C (the common form; from memory, only the conversion is tested).
    own = AntoineInput(7.11714, 1210.595, 229.664, "10", "mmHg", "C")
    line = vapour_pressure(molecule_from_smiles("CC(C)=O"), own)
    written = vapour_pressure_text(line)
    numbers = dict(written.numbers)
    T = 329.0
    by_hand = 10.0 ** (7.11714 - 1210.595 / (T - 273.15 + 229.664)) * 101.325 / 760.0
    assert written.equation == "ln(P/kPa) = A - B/(T + C), T in K"
    assert numbers["A"] - numbers["B"] / (T + numbers["C"]) == pytest.approx(np.log(by_hand))


def test_an_estimated_curve_is_refitted_and_says_how_well():
    line = vapour_pressure(molecule_from_smiles("CCCCOC(=O)CCC(=O)OCCO"))
    written = vapour_pressure_text(line)
    numbers = dict(written.numbers)
    T = np.linspace(*line.range_K, 33)
    if written.note.startswith("Fitted here"):
        off = np.abs(numbers["A"] - numbers["B"] / (T + numbers["C"]) - line.ln_kPa(T)).max()
        stated = float(written.note.split("up to ")[1].split(" %")[0])
        assert 100.0 * np.expm1(off) <= stated + 0.006  # printed to two decimals


@pytest.mark.parametrize("form", FORMS)
def test_the_terms_of_a_form_carry_indices(form):
    text = interactions_text("nrtl", form)
    assert text.startswith("tau_ij = ")
    assert text.endswith("; T in K")
    assert text.count("_ij") == 1 + len(FORMS[form])
