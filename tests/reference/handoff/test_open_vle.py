"""The open sets of measured boiling points, tested and compared whole."""

import numpy as np
import pytest

from groups.handoff import compare, read_records
from groups.prediction.component import Component
from groups.structure.molecule import molecule_from_smiles
from tests.bench.open_data import ABSENT, OPEN_DATA, VleSet, vle

pytestmark = pytest.mark.skipif(not OPEN_DATA.is_dir(), reason=ABSENT)
METHODS = ("unifac", "unifac-dortmund", "ideal")


def answer_of(one: VleSet, shift_y: float = 0.0):
    molecules = [molecule_from_smiles(s) for s in one.smiles]
    rows = []
    for T, P, x, y in zip(one.temperature_K, one.pressure_kPa, one.x1, one.y1, strict=True):
        row = {"temperature": float(T), "pressure": float(P), "x1": float(x)}
        if np.isfinite(y):
            row["y1"] = float(np.clip(y + (shift_y if 0.0 < y < 1.0 else 0.0), 0.0, 1.0))
        if one.pressure_uncertainty_kPa is not None:
            row["u_pressure"] = one.pressure_uncertainty_kPa
        rows.append(row)
    masses = (molecules[0].molar_mass_g_mol, molecules[1].molar_mass_g_mol)
    return compare([Component(m) for m in molecules], read_records(rows, masses), methods=METHODS)


@pytest.fixture(scope="module")
def sets() -> dict[str, VleSet]:
    return {one.set_id: one for one in vle()}


def test_every_set_is_compared_without_a_hitch(sets):
    for one in sets.values():
        answer = answer_of(one)
        assert answer.measurements.n_points == len(one.x1)
        assert any(model.kind == "predicted" for model in answer.models)
        assert answer.recommendation.text
        codes = {mark.code for mark in answer.marks}
        assert not codes & {"swapped_components", "pressure_unit", "mixed_units"}


def test_hexane_and_chloropropane_is_consistent_and_fails_once_shifted(sets):
    # n-Hexane / 1-chloropropane at 298.15 K (set V16): its authors report it consistent.
    good = answer_of(sets["V16"]).consistency
    bad = answer_of(sets["V16"], shift_y=0.03).consistency
    assert good.verdict.startswith("No reason to doubt")
    failed = {test.name for test in bad.tests if test.passed is False}
    assert {"point-to-point", "direct"} <= failed


def test_an_equation_fitted_to_a_set_beats_raoults_law_on_points_left_out(sets):
    # Sets with ten points or more: two parameters must earn their keep on points not fitted.
    for one in sets.values():
        if len(one.x1) < 10:
            continue
        answer = answer_of(one)
        ideal = next(m for m in answer.models if m.name == "ideal")
        best = min(m.fit.cross_validated_rms for m in answer.models if m.fit is not None)
        assert best < ideal.weighted_rms
