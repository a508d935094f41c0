"""Components and doors that several tests of the prediction share."""

from collections.abc import Callable, Sequence

import numpy as np

from groups.prediction import (
    Component,
    activity_coefficients,
    azeotropes,
    bubble_point,
    dew_point,
    diagram,
    flash,
    liquid_splits,
)
from groups.structure.molecule import molecule_from_smiles

ETHANOL_WATER = ("CCO", "O")
ONE_ATM = 101.325
# No fitted or completed gap: what each kind of number needs is at hand.
FOUR = ("CC(C)=O", "CO", "c1ccccc1", "CCCCCC")
# 1-hexene with iodoethane: `unifac` publishes no C=C / I parameter.
WITH_GAP = ("CCCCC=C", "CCI")


def mixture(*smiles: str) -> list[Component]:
    """One component a SMILES, without vapour pressures of the caller's own."""
    return [Component(molecule_from_smiles(one)) for one in smiles]


def equal(n: int) -> np.ndarray:
    """Equal mole fractions."""
    return np.full(n, 1.0 / n)


# Every door that takes any number of components, at conditions that suit a liquid near boiling.
DOORS: dict[str, Callable[..., object]] = {
    "activity_coefficients": lambda c, x, **more: activity_coefficients(c, 320.0, x, **more),
    "bubble_point at T": lambda c, x, **more: bubble_point(c, x, temperature_K=320.0, **more),
    "bubble_point at P": lambda c, x, **more: bubble_point(c, x, pressure_kPa=ONE_ATM, **more),
    "dew_point at T": lambda c, x, **more: dew_point(c, x, temperature_K=320.0, **more),
    "dew_point at P": lambda c, x, **more: dew_point(c, x, pressure_kPa=ONE_ATM, **more),
    "flash": lambda c, x, **more: flash(c, x, temperature_K=335.0, pressure_kPa=ONE_ATM, **more),
}
# Doors that take two or more components and no composition, or may go without.
WITHOUT_COMPOSITION: dict[str, Callable[..., object]] = {
    "azeotropes": lambda c, **more: azeotropes(c, pressure_kPa=ONE_ATM, **more),
    "liquid_splits": lambda c, **more: liquid_splits(c, temperature_K=320.0, **more),
    "Txy": lambda c, **more: diagram("Txy", c, pressure_kPa=ONE_ATM, points=11, **more),
    "Pxy": lambda c, **more: diagram("Pxy", c, temperature_K=320.0, points=11, **more),
}


def call(door: str, components: Sequence[Component], **more) -> object:
    """Any door by name, at equal fractions where it takes a composition."""
    if door in DOORS:
        return DOORS[door](components, equal(len(components)), **more)
    return WITHOUT_COMPOSITION[door](components, **more)
