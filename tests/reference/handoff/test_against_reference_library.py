"""Agreement of ln gamma with the general-purpose library `thermo`, any number of components.

Parameters are drawn at random; the library's tau and Lambda have the same terms a + b/T + c ln T +
d T as the forms here.
"""

from typing import Any

import numpy as np
import pytest

from groups.handoff.correlations import correlative_model

nrtl = pytest.importorskip("thermo.nrtl", reason="the reference library is absent")
uniquac = pytest.importorskip("thermo.uniquac", reason="the reference library is absent")
wilson = pytest.importorskip("thermo.wilson", reason="the reference library is absent")

FORM = "a+b/T+c*ln(T)+d*T"
SIZES = np.array([0.6, 200.0, 0.1, 0.002])
TOLERANCE = 1e-10  # both evaluate the same closed form; rounding of a few dozen operations


def drawn(n: int, seed: int) -> tuple[np.ndarray, np.random.Generator]:
    rng = np.random.default_rng(seed)
    off = 1.0 - np.eye(n)
    return SIZES[:, None, None] * rng.normal(size=(4, n, n)) * off, rng


def states(n: int, rng: np.random.Generator) -> list[tuple[float, list[float]]]:
    return [(float(rng.uniform(280, 400)), rng.dirichlet(np.ones(n)).tolist()) for _ in range(20)]


def lists(a: np.ndarray) -> Any:
    return a.tolist()


@pytest.mark.parametrize("n", [2, 3, 6])
def test_nrtl(n):
    c, rng = drawn(n, 10 + n)
    alpha = rng.uniform(0.2, 0.47, (n, n))
    alpha = 0.5 * (alpha + alpha.T) * (1.0 - np.eye(n))
    model = correlative_model("nrtl", FORM, c, alpha=alpha)
    for T, x in states(n, rng):
        other = nrtl.NRTL(
            T=T,
            xs=x,
            tau_as=lists(c[0]),
            tau_bs=lists(c[1]),
            tau_es=lists(c[2]),
            tau_fs=lists(c[3]),
            alpha_cs=lists(alpha),
        )
        assert model.ln_gamma(T, x) == pytest.approx(other.lngammas(), abs=TOLERANCE)


@pytest.mark.parametrize("n", [2, 3, 6])
def test_uniquac(n):
    c, rng = drawn(n, 20 + n)
    r, q = rng.uniform(0.9, 6.0, n), rng.uniform(0.9, 5.0, n)
    model = correlative_model("uniquac", FORM, c, volumes=r, surfaces=q)
    for T, x in states(n, rng):
        other = uniquac.UNIQUAC(
            T=T,
            xs=x,
            rs=r.tolist(),
            qs=q.tolist(),
            tau_as=lists(c[0]),
            tau_bs=lists(c[1]),
            tau_cs=lists(c[2]),
            tau_ds=lists(c[3]),
        )
        assert model.ln_gamma(T, x) == pytest.approx(other.lngammas(), abs=TOLERANCE)


@pytest.mark.parametrize("n", [2, 3, 6])
def test_wilson(n):
    c, rng = drawn(n, 30 + n)
    model = correlative_model("wilson", FORM, c)
    for T, x in states(n, rng):
        other = wilson.Wilson(
            T=T,
            xs=x,
            lambda_as=lists(c[0]),
            lambda_bs=lists(c[1]),
            lambda_cs=lists(c[2]),
            lambda_ds=lists(c[3]),
        )
        assert model.ln_gamma(T, x) == pytest.approx(other.lngammas(), abs=TOLERANCE)
