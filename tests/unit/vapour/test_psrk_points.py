"""Bubble points, dew points, flash and solubility by the equation of state."""

import numpy as np
import pytest

from groups.errors import OutOfRangeError
from groups.structure.molecule import molecule_from_smiles
from groups.vapour.psrk import (
    gas_solubility,
    henry_constants,
    phase,
    psrk_bubble_pressure,
    psrk_bubble_temperature,
    psrk_dew_pressure,
    psrk_dew_temperature,
    psrk_flash,
    psrk_model,
    psrk_notes,
)


def model(*smiles):
    return psrk_model([molecule_from_smiles(text) for text in smiles])[0]


X = np.array([[0.1, 0.9], [0.3, 0.7], [0.6, 0.4]])


def test_a_dew_point_leads_back_to_the_bubble_point():
    found = model("CCO", "O")
    bubble = psrk_bubble_temperature(found, 101.325, X)
    dew = psrk_dew_temperature(found, 101.325, bubble.vapour)
    assert bubble.converged.all() and dew.converged.all()
    # 1e-8 in ln fugacity is less than 1e-6 K.
    np.testing.assert_allclose(dew.temperature_K, bubble.temperature_K, atol=1e-6)
    bubble = psrk_bubble_pressure(found, 350.0, X)
    dew = psrk_dew_pressure(found, 350.0, bubble.vapour)
    np.testing.assert_allclose(dew.pressure_kPa, bubble.pressure_kPa, rtol=1e-8)
    np.testing.assert_allclose(dew.liquid, X, atol=1e-7)


def test_a_dew_point_of_an_almost_splitting_liquid_is_found():
    found = model("CO", "CCCCC")
    states = psrk_dew_pressure(found, [350.2, 281.5], [[0.317, 0.683], [0.5, 0.5]])
    assert states.converged.all() and states.stable.all()


def test_beyond_the_critical_point_nothing_is_returned():
    states = psrk_bubble_pressure(model("C", "CCCCCCCCCC"), 377.6, [[1.0, 0.0], [0.97, 0.03]])
    assert not states.converged[0]
    assert np.isnan(states.pressure_kPa[0])
    assert "critical" in (states.failure[0] or "")


def test_phases_of_a_returned_state_are_never_the_same_phase_twice():
    found = model("N#N", "C")
    x1 = np.linspace(0.0, 1.0, 41)
    states = psrk_bubble_pressure(found, 150.0, np.stack([x1, 1.0 - x1], axis=1))
    good = states.converged
    apart = np.abs(states.liquid - states.vapour).max(axis=1)
    volume = states.vapour_compressibility / states.liquid_compressibility
    assert ((apart > 1e-4) | (volume > 1.003))[good].all()
    assert states.near_critical.any()  # the locus is at about x1 = 0.6
    assert "near_critical_locus" in {n.code for n in psrk_notes(found, states, np.array([150.0]))}


def test_an_absent_component_changes_nothing_and_has_a_distribution():
    pair, triple = model("CCO", "O"), model("CCO", "O", "N#N")
    two = psrk_bubble_pressure(pair, 350.0, X)
    three = psrk_bubble_pressure(triple, 350.0, np.column_stack([X, np.zeros(3)]))
    np.testing.assert_allclose(three.pressure_kPa, two.pressure_kPa, rtol=1e-9)
    assert (three.vapour[:, 2] == 0.0).all() and (three.ln_k[:, 2] > 5.0).all()


def test_a_flash_between_bubble_and_dew_point_balances():
    found = model("O=C=O", "CC(C)=O", "CCCCCC")
    z = np.array([[0.3, 0.4, 0.3], [0.05, 0.6, 0.35]])
    low, high = psrk_dew_pressure(found, 313.0, z), psrk_bubble_pressure(found, 313.0, z)
    P = np.sqrt(low.pressure_kPa * high.pressure_kPa)
    states = psrk_flash(found, 313.0, P, z)
    assert states.phase == ("two-phase", "two-phase")
    share = states.vapour_fraction[:, None]
    total = share * states.vapour + (1.0 - share) * states.liquid
    np.testing.assert_allclose(total, z, atol=1e-10)  # the mass balance that is promised
    dense = phase(found, states.temperature_K, P, states.liquid, "stable")
    light = phase(found, states.temperature_K, P, states.vapour, "stable")
    gap = np.log(states.liquid / states.vapour) + dense.ln_phi - light.ln_phi
    np.testing.assert_allclose(gap, 0.0, atol=1e-8)  # the equality of fugacity that is promised


def test_above_the_bubble_and_below_the_dew_pressure_there_is_one_phase():
    found = model("CCO", "O")
    bubble, dew = psrk_bubble_pressure(found, 350.0, X), psrk_dew_pressure(found, 350.0, X)
    assert set(psrk_flash(found, 350.0, 1.001 * bubble.pressure_kPa, X).phase) == {"liquid"}
    assert set(psrk_flash(found, 350.0, 0.999 * dew.pressure_kPa, X).phase) == {"vapour"}


def test_a_third_phase_is_told_and_not_hidden():
    states = psrk_flash(model("O", "CCCCCC", "N#N"), 300.0, 101.325, [[0.4, 0.3, 0.3]])
    assert states.phase == ("unknown",)
    assert "third phase" in (states.failure[0] or "")


def test_solubility_at_little_pressure_is_that_of_henry():
    found = model("O=C=O", "CO")
    law = henry_constants(found, 298.15, [0.0, 1.0])
    P = law.solvent_pressure_kPa + 1.0
    answer = gas_solubility(found, 0, 298.15, P, [0.0, 1.0])
    # 1 kPa over the solvent is 0.01 % of Henry's range; the vapour takes 3 % of non-ideality off.
    assert answer.gas_fraction[0] == pytest.approx(1.0 / law.henry_kPa[0, 0], rel=0.03)
    with pytest.raises(OutOfRangeError):
        gas_solubility(found, 0, 298.15, 1000.0, [0.5, 0.5])
    boiling = gas_solubility(found, 0, 298.15, 5.0, [0.0, 1.0])
    assert not boiling.converged[0] and "boils" in (boiling.failure[0] or "")


def test_many_points_at_once_are_those_of_one_at_a_time():
    found = model("CCO", "O")
    x1 = np.linspace(0.0, 1.0, 1300)
    x = np.stack([x1, 1.0 - x1], axis=1)
    many = psrk_bubble_temperature(found, 101.325, x)
    assert many.converged.all() and len(many.failure) == 1300
    for k in (0, 999, 1000, 1299):
        one = psrk_bubble_temperature(found, 101.325, x[k])
        # Both stop within 1e-11 of their equations; neighbours may share a different start.
        assert many.temperature_K[k] == pytest.approx(one.temperature_K[0], abs=1e-8)


def test_no_points_give_no_states():
    found = model("CCO", "O")
    assert psrk_bubble_pressure(found, [], np.zeros((0, 2))).failure == ()
    assert psrk_flash(found, [], [], np.zeros((0, 2))).phase == ()


def test_a_strongly_attracting_liquid_under_a_cold_vapour_is_not_overlooked():
    # Substitution runs away here: the liquid lies between the pure ones, far from all of them.
    found = model("N", "O", "CO")
    z = np.array([[0.75918205, 0.02819359, 0.21262436]])
    states = psrk_flash(found, 266.27646728948986, 8.301672265522514, z)
    assert states.phase == ("two-phase",) and states.converged.all()
    # A trial liquid met by chance, below the tangent plane of the feed by 0.45 RT.
    trial = np.array([[0.15237634, 0.37971441, 0.46790925]])
    T, P = states.temperature_K, states.pressure_kPa
    feed, liquid = phase(found, T, P, z, "stable"), phase(found, T, P, trial, "stable")
    gap = np.log(trial / z) + liquid.ln_phi - feed.ln_phi
    assert (trial * gap).sum() < -0.4
