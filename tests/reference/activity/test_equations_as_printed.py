"""The rearranged array equations give what the printed ones give."""

import numpy as np
import pytest

from groups.activity import activity_model
from groups.parameters import METHODS, table
from tests.reference.activity import paper_equations
from tests.reference.activity.random_mixtures import random_mixture

# Both are exact algebra; what differs is rounding in sums of up to about a hundred terms.
TOLERANCE = 1e-11


@pytest.mark.parametrize("method", METHODS)
def test_100_random_mixtures_agree_with_the_printed_equations(method: str) -> None:
    rng = np.random.default_rng(1975)
    for _ in range(100):
        mixture = random_mixture(table(method), rng)
        T, x = mixture.temperature_K, mixture.mole_fractions
        printed = paper_equations.ln_gamma(table(method), mixture.counts, T, x)
        ours = activity_model(mixture.counts, method).ln_gamma(T, x)
        np.testing.assert_allclose(ours, printed, rtol=TOLERANCE, atol=TOLERANCE)
