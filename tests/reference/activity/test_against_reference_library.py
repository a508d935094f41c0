"""Agreement with the general-purpose library `thermo`, fed with this project's own tables.

The tables are handed over as numbers, so what is compared is the equations. The library's tables
themselves differ where a correction is recorded in the TOML beside a table here.
"""

from typing import Any

import numpy as np
import pytest

from groups.activity import activity_model, excess_enthalpy, excess_heat_capacity
from groups.parameters import METHODS, MethodTable, table
from tests.reference.activity.random_mixtures import RandomMixture, random_mixture

thermo_unifac = pytest.importorskip("thermo.unifac", reason="the reference library is absent")

# The library's numbers of the variants of the family.
VERSION = {
    "unifac": 0,
    "unifac-lle": 0,
    "unifac-2.0": 0,
    "unifac-dortmund": 1,
    "unifac-nist": 1,
    "unifac-dortmund-2.0": 1,
    "psrk": 2,
    "unifac-lyngby": 4,
}
MIXTURES = 1000
TOLERANCE = 1e-9  # asked for; relative where ln gamma is above 1


def library_parameters(method: MethodTable) -> tuple[dict[int, Any], dict[int, Any]]:
    """Our table in the library's shape: subgroups, and interactions by main group."""
    mains = [int(number) for number in method.main_numbers]
    subgroups = {
        int(number): thermo_unifac.UNIFAC_subgroup(
            int(number), name, mains[main], method.main_names[main], float(R), float(Q)
        )
        for number, name, main, R, Q in zip(
            method.subgroup_numbers,
            method.subgroup_names,
            method.subgroup_main,
            method.R,
            method.Q,
            strict=True,
        )
    }
    interactions: dict[int, Any] = {main: {} for main in mains}
    for i, j in zip(*np.nonzero(~np.isnan(method.a)), strict=True):
        if i != j:
            abc = tuple(float(values[i, j]) for values in (method.a, method.b, method.c))
            constant = method.psi == "constant"
            interactions[mains[i]][mains[j]] = abc[0] if constant else abc
    return subgroups, interactions


def library_model(
    mixture: RandomMixture, method: str, parameters: tuple[dict[int, Any], dict[int, Any]]
) -> Any:
    subgroups, interactions = parameters
    return thermo_unifac.UNIFAC.from_subgroups(
        T=mixture.temperature_K,
        xs=list(mixture.mole_fractions),
        chemgroups=list(mixture.counts),
        subgroups=subgroups,
        interaction_data=interactions,
        version=VERSION[method],
    )


@pytest.mark.parametrize("method", METHODS)
def test_1000_random_mixtures_agree_with_the_reference_library(method: str) -> None:
    rng = np.random.default_rng(20)
    parameters = library_parameters(table(method))
    for _ in range(MIXTURES):
        mixture = random_mixture(table(method), rng)
        theirs = np.log(library_model(mixture, method, parameters).gammas())
        model = activity_model(mixture.counts, method)
        ours = model.ln_gamma(mixture.temperature_K, mixture.mole_fractions)
        np.testing.assert_allclose(ours, theirs, rtol=TOLERANCE, atol=TOLERANCE)


@pytest.mark.parametrize("method", METHODS)
def test_excess_enthalpy_and_heat_capacity_agree_with_the_reference_library(method: str) -> None:
    rng = np.random.default_rng(21)
    parameters = library_parameters(table(method))
    for _ in range(100):
        mixture = random_mixture(table(method), rng)
        library = library_model(mixture, method, parameters)
        model = activity_model(mixture.counts, method)
        point = (mixture.temperature_K, mixture.mole_fractions)
        # 1e-8: the library forms hE as gE + T sE, which costs it a digit or two. J/mol.
        np.testing.assert_allclose(
            excess_enthalpy(model, *point), library.HE(), rtol=1e-8, atol=1e-6
        )
        np.testing.assert_allclose(
            excess_heat_capacity(model, *point), library.CpE(), rtol=1e-8, atol=1e-8
        )
