"""The open vapour-liquid sets: how far the prediction may be out, and why so far.

Bounds stand about a third above what published tables are known to reach on such systems; each
says its reason. What the program reaches stands in the README, made by tests/bench/measure_vle.py.
"""

from functools import cache

import numpy as np
import pytest

from tests.bench.measure_vle import (
    SetErrors,
    errors_of_set,
    mean_of,
    relative_pressure,
    starred_pressure_kPa,
    temperature_K,
    vapour_fraction,
)
from tests.bench.open_data import ABSENT, OPEN_DATA, vle

pytestmark = pytest.mark.skipif(not OPEN_DATA.exists(), reason=ABSENT)
METHODS = ("auto", "unifac", "unifac-dortmund", "unifac-nist")
POLYOL = "1,3-propanediol"


@cache
def errors(method: str) -> list[SetErrors]:
    return [errors_of_set(one, method) for one in vle()]


def without_polyols(method: str) -> list[SetErrors]:
    return [one for one in errors(method) if POLYOL not in one.measured.names]


@pytest.mark.parametrize("method", METHODS)
def test_vapour_compositions(method):
    # 0.01 to 0.02 is the usual error of y by group contribution (Fredenslund, Gmehling &
    # Rasmussen, Vapor-Liquid Equilibria Using UNIFAC, 1977); at 300 kPa an ideal vapour adds 0.005.
    assert mean_of(errors(method), vapour_fraction) < 0.025


@pytest.mark.parametrize("method", METHODS)
def test_boiling_temperatures(method):
    # Morpholine/1-decanol is half of these states: a ring amine that is an ether besides, with a
    # long-chain alcohol. 10 % in gamma is 3 K there.
    assert mean_of(errors(method), temperature_K) < 3.5
    assert mean_of(errors(method), temperature_K) < mean_of(errors("ideal"), temperature_K)


@pytest.mark.parametrize("method", METHODS)
def test_pressures_of_simple_mixtures(method):
    # Hexane/1-chloropropane: some 3 % is usual, 6 % is the bound for one set alone.
    assert mean_of(without_polyols(method), relative_pressure) < 0.06
    assert mean_of(without_polyols(method), relative_pressure) < mean_of(
        without_polyols("ideal"), relative_pressure
    )


@pytest.mark.parametrize("method", METHODS)
def test_pressures_over_a_polyol(method):
    # The tables err for polyols; 15 % is what the reason `polyol` must cover with alcohols.
    polyols = [one for one in errors(method) if POLYOL in one.measured.names]
    assert mean_of(polyols, relative_pressure) < 0.15


@pytest.mark.parametrize("method", METHODS)
def test_pressures_with_a_stated_uncertainty_count_by_their_size(method):
    # u(P) = 0.3 kPa is stated, the highest pressure is 21.5 kPa: 15 % of that. A cyclic acetal
    # with aromatic amines is far from what the tables were fitted to.
    assert mean_of(errors(method), starred_pressure_kPa) < 3.2


@pytest.mark.parametrize("method", ["auto", "unifac", "ideal"])
def test_every_state_is_reached(method):
    assert all(one.reached.all() for one in errors(method))


def test_the_pure_ends_are_those_of_the_vapour_pressures():
    # Published vapour pressures of common liquids are good to 0.5 K; 1-decanol and the stated
    # 0.3 kPa of the acetal sets are worse.
    for one in errors("ideal"):
        ends = ~one.mixed
        if one.measured.isothermal:
            assert (np.abs(one.pressure_kPa[ends]) < 0.3 + 1e-9).all()
        else:
            assert (np.abs(one.temperature_K[ends]) < 1.5).all()
