"""Laws that every correlative model must obey, whatever its parameters."""

import numpy as np
import pytest

from groups.activity import excess_gibbs, ln_gamma_infinite
from groups.handoff.correlations import (
    BINARY_ONLY,
    CORRELATIONS,
    FORMS,
    CorrelativeModel,
    correlative_model,
)

T = np.array([290.0, 330.0, 371.0])
# Sizes of the coefficients that make u of order one at room temperature, term by term.
SIZES = {"a": 0.6, "b": 200.0, "c": 0.1, "d": 0.002}


def random_model(name: str, n: int, form: str, seed: int) -> CorrelativeModel:
    rng = np.random.default_rng(seed)
    coefficients = np.stack(
        [SIZES[term.letter] * rng.normal(size=(n, n)) * (1 - np.eye(n)) for term in FORMS[form]]
    )
    if name == "van-laar":  # both constants must have one sign
        coefficients = np.abs(coefficients)
    if name == "margules-2":
        coefficients = coefficients + coefficients.swapaxes(1, 2)
    alpha = rng.uniform(0.2, 0.47, (n, n))
    return correlative_model(
        name,
        form,
        coefficients,
        alpha=0.5 * (alpha + alpha.T),
        volumes=rng.uniform(0.9, 6.0, n),
        surfaces=rng.uniform(0.9, 5.0, n),
        molar_volumes_cm3_mol=rng.uniform(18.0, 180.0, n) if name == "wilson" else None,
    )


CASES = [
    pytest.param(name, n, form, id=f"{name}-{n}-{form}")
    for name in CORRELATIONS
    for n in ((2,) if name in BINARY_ONLY else (2, 3, 5))
    for form in FORMS
]


def compositions(n: int, seed: int = 3) -> np.ndarray:
    x = np.random.default_rng(seed).dirichlet(np.ones(n), 7)
    edge = x[:2].copy()
    edge[:, 0] = 0.0
    return np.concatenate([x, edge / edge.sum(axis=1, keepdims=True)])


@pytest.mark.parametrize(("name", "n", "form"), CASES)
def test_pure_components_have_no_activity_coefficient(name, n, form):
    model = random_model(name, n, form, 1)
    infinite = ln_gamma_infinite(model, T)
    assert np.abs(np.diagonal(infinite, axis1=1, axis2=2)).max() < 1e-13  # rounding


@pytest.mark.parametrize(("name", "n", "form"), CASES)
def test_ln_gamma_is_the_mole_derivative_of_the_excess_gibbs_energy(name, n, form):
    model = random_model(name, n, form, 2)
    for x in compositions(n)[:7]:
        for i in range(n):
            h = 1e-5  # central difference: error of order h^2 times the third derivative
            up, down = x.copy(), x.copy()
            up[i] += h
            down[i] -= h
            total = [m.sum() * excess_gibbs(model, 320.0, m / m.sum()) for m in (up, down)]
            slope = (total[0] - total[1]) / (2 * h)
            assert slope == pytest.approx(model.ln_gamma(320.0, x)[i], abs=2e-7)


@pytest.mark.parametrize(("name", "n", "form"), CASES)
def test_mole_derivatives_are_symmetric_differentials_and_obey_gibbs_duhem(name, n, form):
    model = random_model(name, n, form, 3)
    x = compositions(n)
    H = model.ln_gamma_mole_derivatives(T[:, None], x)
    scale = 1.0 + np.abs(H).max()
    assert np.abs(H - H.swapaxes(-1, -2)).max() < 1e-12 * scale
    assert np.abs(np.einsum("tmij,mj->tmi", H, x)).max() < 1e-12 * scale
    step = np.zeros(n)
    step[:2] = 1e-6, -1e-6
    inner = x[:7]
    up, down = (model.ln_gamma(T[:, None], inner + s * step) for s in (1, -1))
    assert (up - down) / 2 == pytest.approx(H[:, :7] @ step, abs=1e-12 * scale)


@pytest.mark.parametrize(("name", "n", "form"), CASES)
def test_temperature_slope_and_curvature_are_those_of_ln_gamma(name, n, form):
    model = random_model(name, n, form, 4)
    x = compositions(n)
    h = 0.01
    up, down = (model.ln_gamma(T[:, None] + s * h, x) for s in (1, -1))
    slope = model.ln_gamma_slope(T[:, None], x)
    # Central difference: h^2 times a third derivative of about 1e-6, plus 1e-14/h of rounding.
    assert slope == pytest.approx((up - down) / (2 * h), abs=1e-9)
    up, down = (model.ln_gamma_slope(T[:, None] + s * h, x) for s in (1, -1))
    curvature = model.ln_gamma_curvature(T[:, None], x)
    assert curvature == pytest.approx((up - down) / (2 * h), abs=1e-10)


@pytest.mark.parametrize(("name", "n", "form"), CASES)
def test_interaction_jacobian_is_that_of_ln_gamma(name, n, form):
    model = random_model(name, n, form, 5)
    x = compositions(n)
    J = model.interaction_jacobian(T[:, None], x)
    h = 1e-6
    for j in range(n):
        for k in range(n):
            if j == k:
                continue
            moved = []
            for sign in (1, -1):
                u = model.interactions.values(T)
                u[:, j, k] += sign * h
                moved.append(model.equation.ln_gamma(u, x[None]))
            numerical = (moved[0] - moved[1]) / (2 * h)
            assert J[..., j, k] == pytest.approx(numerical, abs=1e-8 * (1 + np.abs(J).max()))


@pytest.mark.parametrize("n", [2, 4])
def test_non_randomness_jacobian_of_nrtl(n):
    model = random_model("nrtl", n, "a", 6)
    equation, x = model.equation, compositions(n)[None]
    u = model.interactions.values(T)
    J = equation.alpha_jacobian(u, x)  # type: ignore[attr-defined]
    h = 1e-6
    for j in range(n):
        for k in range(n):
            if j == k:
                continue
            moved = []
            for sign in (1, -1):
                alpha = equation.alpha.copy()  # type: ignore[attr-defined]
                alpha[j, k] += sign * h
                moved.append(type(equation)(alpha).ln_gamma(u, x))
            assert J[..., j, k] == pytest.approx((moved[0] - moved[1]) / (2 * h), abs=1e-8)


@pytest.mark.parametrize("name", ["nrtl", "uniquac", "wilson"])
def test_order_of_components_does_not_matter(name):
    model = random_model(name, 4, "a+b/T", 7)
    order = [2, 0, 3, 1]
    grid = np.ix_(range(2), order, order)
    options = {}
    if name == "nrtl":
        options["alpha"] = model.equation.alpha[np.ix_(order, order)]
    if name == "uniquac":
        options = {"volumes": model.equation.r[order], "surfaces": model.equation.q[order]}
    moved = correlative_model(name, "a+b/T", model.interactions.coefficients[grid], **options)
    if name == "wilson":
        model = correlative_model(name, "a+b/T", model.interactions.coefficients)
    x = compositions(4)
    assert moved.ln_gamma(300.0, x[:, order]) == pytest.approx(
        model.ln_gamma(300.0, x)[:, order], abs=1e-12
    )
