"""Random mixtures through every door: an answer that holds, or an error that says why.

Molecules, conditions and compositions are drawn with a fixed seed, far beyond what is sensible:
100 to 1000 K, 1e-3 to 1e5 kPa, traces and absent components. Warnings are errors, so an overflow
on the way fails too.
"""

from collections.abc import Callable

import numpy as np
import pytest

from groups.confidence import GRADES, Confidence
from groups.errors import MixwrightError
from groups.prediction import (
    ALL_METHODS,
    Component,
    PhasePointAnswer,
    activity_coefficients,
    azeotropes,
    bubble_point,
    dew_point,
    diagram,
    flash,
    infinite_dilution,
    liquid_splits,
)
from groups.prediction.liquid import liquid
from groups.structure.molecule import molecule_from_smiles
from groups.vapour import real_vapour
from groups.vapour.psrk import phase, psrk_model

# One of each kind: gases, water, hydrocarbons, polar, associating, halogenated, large, awkward.
POOL = (
    *("C", "O", "CCCCC", "CCCCCCCCCCCCCCCC", "C1CCCCC1", "CCCCC=C", "CCCC#C", "c1ccccc1"),
    *("c1ccc2ccccc2c1", "C=Cc1ccccc1", "CO", "CCO", "CCCCCCCCO", "OCCO", "OCC(O)CO", "Oc1ccccc1"),
    *("CC(C)=O", "O=C1CCCCC1", "CCOC(C)=O", "O=C1CCCO1", "CCOCC", "C1CCOC1", "COCCOC", "CC=O"),
    *("CC(=O)O", "OC(=O)CCCCC(=O)O", "CC#N", "CCN", "CCN(CC)CC", "c1ccncc1", "Nc1ccccc1"),
    *("C[N+](=O)[O-]", "CN(C)C=O", "CNC=O", "CN1CCCC1=O", "CS(C)=O", "O=S1(=O)CCCC1", "CCS"),
    *("ClC(Cl)Cl", "ClCCCl", "Clc1ccccc1", "CCBr", "CCI", "FC(F)(F)c1ccccc1", "CCCCCCF", "CSSC"),
    *("CCCCOC(=O)c1ccccc1C(=O)OCCCC", "CCCCOP(=O)(OCCCC)OCCCC", "CCB(CC)CC", "C[Si](C)(C)C"),
)
MIXTURES = 60
# The states were solved to 1e-9 in ln fugacity; y and x are given back rounded, which costs 1e-16
# over the fraction. Fractions below TRACE are left out.
FUGACITY, TRACE = 1e-7, 1e-200


class Draw:
    """One random mixture with its conditions."""

    def __init__(self, seed: int) -> None:
        rng = np.random.default_rng(seed)
        self.n = int(rng.choice([1, 2, 2, 2, 3, 3, 4]))
        smiles = rng.choice(POOL, self.n, replace=False)
        self.components = [Component(molecule_from_smiles(str(one))) for one in smiles]
        self.x = rng.dirichlet(np.full(self.n, rng.choice([0.1, 1.0, 5.0])))
        if self.n > 1 and rng.random() < 0.3:
            self.x[rng.integers(self.n)] = 0.0
            self.x /= self.x.sum()
        self.T = float(rng.choice([rng.uniform(100.0, 1000.0), rng.uniform(250.0, 450.0)]))
        self.P = float(10.0 ** rng.choice([rng.uniform(-3.0, 5.0), rng.uniform(0.0, 3.0)]))
        self.how = {
            "method": str(rng.choice(["auto"] * len(ALL_METHODS) + list(ALL_METHODS))),
            "on_missing": str(rng.choice(["estimate", "estimate", "refuse"])),
        }


def answered(ask: Callable[[], object]) -> object | None:
    """The answer; None after an error of the project's own that says what to do."""
    try:
        return ask()
    except MixwrightError as error:
        assert str(error) and error.cure
        return None


def assert_told(confidence: Confidence) -> None:
    assert confidence.grade in GRADES
    for reason in confidence.reasons:
        assert reason.code and reason.subject
        assert reason.message.endswith(".")
        assert "nan" not in reason.message.split() and "inf" not in reason.message.split()


def assert_holds(draw: Draw, answer: PhasePointAnswer) -> None:
    """Equal fugacities, whole sums, a balance; or a failure and no numbers."""
    assert_told(answer.confidence)
    if answer.failure is not None:
        assert answer.confidence.grade == "none"
        assert not (np.isfinite(answer.x).any() and np.isfinite(answer.y).any())
        return
    assert np.isfinite(answer.temperature_K) and np.isfinite(answer.pressure_kPa)
    assert 0.0 <= answer.vapour_fraction <= 1.0
    if np.isnan(answer.x).any() or np.isnan(answer.y).any():
        assert answer.vapour_fraction in (0.0, 1.0)  # a flash into one phase
        return
    assert answer.x.sum() == pytest.approx(1.0) and answer.y.sum() == pytest.approx(1.0)
    liquids = [phase.mole_fractions for phase in answer.phases if phase.kind == "liquid"]
    for x in liquids if answer.liquid_stable is False and len(liquids) > 1 else [answer.x]:
        left, right = ln_fugacities(draw, answer, x)
        both = (x > TRACE) & (answer.y > TRACE)
        np.testing.assert_allclose(left[both], right[both], atol=FUGACITY)


def ln_fugacities(
    draw: Draw, answer: PhasePointAnswer, x: np.ndarray
) -> tuple[np.ndarray, np.ndarray]:
    """ln of fugacities, up to what both phases share, by the vapour that the answer names."""
    molecules = [component.molecule for component in draw.components]
    T, P = np.array([answer.temperature_K]), np.array([answer.pressure_kPa])
    y = answer.y[None]
    ln_x, ln_y = (np.log(np.maximum(part, 1e-300)) for part in (x, answer.y))
    if answer.vapour.kind == "psrk":
        model, _ = psrk_model(molecules)
        dense, light = (
            phase(model, T, P, part, kind) for part, kind in ((x[None], "liquid"), (y, "vapour"))
        )
        return ln_x + dense.ln_phi[0], ln_y + light.ln_phi[0]
    model = liquid(molecules, draw.how["method"], draw.how["on_missing"]).model
    lines = [float(line.ln_kPa(answer.temperature_K)) for line in answer.vapour_pressures]
    correction = np.zeros_like(x)
    if answer.vapour.kind == "virial":
        real, _ = real_vapour(molecules, answer.vapour_pressures)
        correction = real.ln_correction(T, P, y)[0]
    left = ln_x + model.ln_gamma(answer.temperature_K, x) + lines
    return left, ln_y + np.log(answer.pressure_kPa) + correction


@pytest.mark.parametrize("seed", range(MIXTURES))
def test_bubble_points_dew_points_and_flashes_hold_or_say_why_not(seed):
    draw = Draw(seed)
    asked = (
        lambda: bubble_point(draw.components, draw.x, temperature_K=draw.T, **draw.how),
        lambda: bubble_point(draw.components, draw.x, pressure_kPa=draw.P, **draw.how),
        lambda: dew_point(draw.components, draw.x, temperature_K=draw.T, **draw.how),
        lambda: dew_point(draw.components, draw.x, pressure_kPa=draw.P, **draw.how),
        lambda: flash(
            draw.components, draw.x, temperature_K=draw.T, pressure_kPa=draw.P, **draw.how
        ),
    )
    for ask in asked:
        answer = answered(ask)
        if answer is not None:
            assert_holds(draw, answer)


@pytest.mark.parametrize("seed", range(MIXTURES))
def test_a_flash_between_dew_and_bubble_pressure_has_two_phases_that_balance(seed):
    draw = Draw(seed)
    low, high = (
        answered(lambda s=solve: s(draw.components, draw.x, temperature_K=draw.T, **draw.how))
        for solve in (dew_point, bubble_point)
    )
    if low is None or high is None or low.failure or high.failure or not high.liquid_stable:
        return
    if low.vapour.kind != high.vapour.kind:
        return
    assert low.pressure_kPa <= high.pressure_kPa * (1.0 + 1e-9)
    P = float(np.sqrt(low.pressure_kPa * high.pressure_kPa))
    if not 1e-3 < P < 1e5 or low.pressure_kPa > 0.999 * high.pressure_kPa:
        return
    # The need of a real vapour is judged at a pressure or at a temperature; here it is held.
    kind = high.vapour.kind
    vapour = "auto" if kind == "psrk" else kind
    middle = flash(
        draw.components,
        draw.x,
        temperature_K=draw.T,
        pressure_kPa=P,
        vapour=vapour,
        **draw.how,
    )
    assert_holds(draw, middle)
    if middle.failure is None:
        assert 0.0 < middle.vapour_fraction < 1.0
        mixed = (1.0 - middle.vapour_fraction) * middle.x + middle.vapour_fraction * middle.y
        np.testing.assert_allclose(mixed, draw.x, atol=1e-8)


@pytest.mark.parametrize("seed", range(MIXTURES))
def test_activity_coefficients_are_finite_and_told(seed):
    draw = Draw(seed)
    answer = answered(lambda: activity_coefficients(draw.components, draw.T, draw.x, **draw.how))
    if answer is not None:
        assert np.isfinite(answer.ln_gamma).all()
        assert np.isfinite(answer.excess_enthalpy_J_mol).all()
        assert_told(answer.confidence[0])


@pytest.mark.parametrize("seed", range(MIXTURES))
def test_dilute_pairs_have_a_number_or_a_reason(seed):
    draw = Draw(seed)
    molecules = [component.molecule for component in draw.components]
    pairs = [(u, v, draw.T) for u in molecules for v in molecules if u is not v]
    for answer in infinite_dilution(pairs, **draw.how):
        assert_told(answer.confidence)
        assert np.isfinite(answer.ln_gamma_inf) == (answer.confidence.grade != "none")


@pytest.mark.parametrize("seed", range(MIXTURES))
def test_diagrams_azeotropes_and_splits_hold_or_say_why_not(seed):
    draw = Draw(seed)
    if draw.n < 2:
        return
    pair = draw.components[:2]
    for kind, given in (("Txy", {"pressure_kPa": draw.P}), ("Pxy", {"temperature_K": draw.T})):
        answer = answered(lambda k=kind, g=given: diagram(k, pair, points=11, **g, **draw.how))
        if answer is not None:
            drawn = answer.diagram
            known = np.isfinite(drawn.temperature_K + drawn.pressure_kPa + drawn.y1)
            assert known.tolist() == [text is None for text in drawn.failure]
            assert_told(answer.confidence)
    found = answered(lambda: azeotropes(pair, pressure_kPa=draw.P, **draw.how))
    for one in () if found is None else found.azeotropes:
        if one.heterogeneous:
            continue
        molecules = [component.molecule for component in pair]
        model = liquid(molecules, draw.how["method"], draw.how["on_missing"]).model
        lines = [float(line.ln_kPa(one.temperature_K)) for line in found.vapour_pressures]
        ln_k = model.ln_gamma(one.temperature_K, one.mole_fractions) + lines
        if found.vapour.kind == "virial":
            real, _ = real_vapour(molecules, found.vapour_pressures)
            at = (np.array([v]) for v in (one.temperature_K, draw.P))
            ln_k = ln_k - real.ln_correction(*at, one.mole_fractions[None])[0]
        np.testing.assert_allclose(ln_k, np.log(draw.P), atol=FUGACITY)
    split = answered(lambda: liquid_splits(pair, temperature_K=draw.T, **draw.how))
    if split is not None and split.splits:
        first, second = (
            np.log(phase) + ln_gamma
            for phase, ln_gamma in zip(split.phases, split.ln_gamma, strict=True)
        )
        np.testing.assert_allclose(first, second, atol=FUGACITY)
