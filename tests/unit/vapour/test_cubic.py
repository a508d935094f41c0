"""Roots of the cubic equation."""

import numpy as np

from groups.vapour.psrk.cubic import (
    CRITICAL_B,
    CRITICAL_Q,
    CRITICAL_VOLUME,
    compressibility_roots,
    pure_ln_phi,
)
from groups.vapour.psrk.saturation_line import attraction_at_saturation, saturation_line


def test_the_roots_are_those_of_the_polynomial():
    rng = np.random.default_rng(8)
    q, B = rng.uniform(0.5, 20.0, 3000), np.exp(rng.uniform(-25.0, 1.5, 3000))
    smallest, largest = compressibility_roots(q, B)
    for k in range(0, 3000, 7):
        c = (q[k] - 1.0 - B[k]) * B[k]
        roots = np.roots([1.0, -1.0, c, -q[k] * B[k] ** 2])
        # An eigenvalue solver sees double roots to half the digits only.
        real = np.sort(roots[np.abs(roots.imag) < 1e-7].real)
        real = real[real > B[k]]
        np.testing.assert_allclose(largest[k], real[-1], rtol=1e-6)
        if B[k] > 1e-5:
            np.testing.assert_allclose(smallest[k], real[0], rtol=1e-6)


def test_a_cold_liquid_keeps_its_digits():
    # At vanishing pressure u^2 + (1 - q) u + q = 0, solved by the school formula.
    q = np.array([7.2, 10.0, 15.0])
    u = 0.5 * (q - 1.0) - np.sqrt(0.25 * (q - 1.0) ** 2 - q)
    smallest, _ = compressibility_roots(q, np.full(3, 1e-14))
    np.testing.assert_allclose(smallest / 1e-14, u, rtol=1e-10)


def test_all_roots_coincide_at_the_critical_point():
    smallest, largest = compressibility_roots(np.array([CRITICAL_Q]), np.array([CRITICAL_B]))
    # A triple root is known to the cube root of the rounding: 1e-5.
    np.testing.assert_allclose([smallest[0], largest[0]], 1.0 / 3.0, atol=5e-5)
    np.testing.assert_allclose(CRITICAL_VOLUME, 3.8473, atol=1e-4)  # Vc / b of SRK, textbooks


def test_fugacities_agree_along_the_saturation_line():
    q, ln_B = saturation_line()
    B = np.exp(ln_B[1:])
    liquid, vapour = compressibility_roots(q[1:], B)
    gap = pure_ln_phi(q[1:], B, liquid) - pure_ln_phi(q[1:], B, vapour)
    np.testing.assert_allclose(gap, 0.0, atol=1e-11)
    assert (np.diff(ln_B) < 0.0).all()


def test_the_line_is_read_backwards():
    q, ln_B = saturation_line()
    np.testing.assert_allclose(attraction_at_saturation(ln_B), q, rtol=1e-12)
    assert np.isnan(attraction_at_saturation(np.array([ln_B[-1] - 1.0]))).all()
