"""Speed of flashes with stability, of ternary binodals and maps, as ratios in one run.

    python tests/bench/bench_flash.py

The yardstick is the flash of the general-purpose library `thermo` (FlashVL, and FlashVLN for two
liquids) over its own UNIFAC liquid (GibbsExcessLiquid) and an ideal gas, with our vapour pressures
handed to it as tables, at the same feeds. Its answers are counted too: where it does not agree with
ours in the number of phases, that is said. CPU time of the thread. Not a timed test.
"""

import time
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from groups.activity import activity_model
from groups.arrays import FloatArray
from groups.equilibrium import (
    System,
    flash,
    flash_at_pressure,
    residue_curves,
    ternary_binodal,
)
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.identify import name_and_cas
from groups.structure.molecule import molecule_from_smiles

PRESSURE_KPA = 101.325
FIVE = ("CCO", "O", "c1ccccc1", "CC(C)=O", "CCCCCC")
ALIKE = ("CCO", "CO", "CC(C)=O", "CCOC(C)=O", "CC(C)O")
TEN = (*FIVE, "CO", "CCOC(C)=O", "CC(C)O", "Cc1ccccc1", "CCC(C)=O")


@dataclass(frozen=True)
class Mixture:
    """A system and what the yardstick needs of it."""

    smiles: tuple[str, ...]
    system: System
    counts: list[dict[int, int]]


def mixture(smiles: tuple[str, ...], method: str = "unifac") -> Mixture:
    """Build a mixture of our own parts."""
    molecules = [molecule_from_smiles(each) for each in smiles]
    counts = [assign(each, method).counts for each in molecules]
    lines = tuple(vapour_pressure(each) for each in molecules)
    return Mixture(smiles, System(activity_model(counts, method), lines), counts)


def seconds(run: Callable[[], object], times: int) -> float:
    """Least seconds of CPU of several runs."""
    best = np.inf
    for _ in range(times):
        start = time.thread_time()
        run()
        best = min(best, time.thread_time() - start)
    return best


def flashes(name: str, mixed: Mixture, count: int = 60) -> None:
    """Single flashes, a batch of them, and the yardstick's."""
    random = np.random.default_rng(7)
    z = random.dirichlet(np.ones(len(mixed.smiles)), count)
    T = random.uniform(325.0, 355.0, count)

    def single() -> list[str]:
        return [flash(mixed.system, T[k], PRESSURE_KPA, z[k]).phase[0] for k in range(count)]

    one = seconds(single, 3) / count
    batch = seconds(lambda: flash(mixed.system, T, PRESSURE_KPA, z), 3) / count
    share = seconds(lambda: flash_at_pressure(mixed.system, PRESSURE_KPA, 0.4, z[:12]), 1) / 12
    phases = single()
    text = f"{name:28} {1.0 / one:8.0f} {1.0 / batch:8.0f} {1.0 / share:8.0f}"
    reference = yardstick(mixed, T, z)
    if reference is None:
        print(text)
        return
    theirs, counts = reference
    ours = [{"liquid": 1, "vapour": 1, "two-phase": 2, "two liquids": 2}.get(p, 3) for p in phases]
    same = sum(a == b for a, b in zip(ours, counts, strict=True))
    print(f"{text} {1.0 / theirs:8.1f} {theirs / one:9.1f} {theirs / batch:9.1f} {same:5}/{count}")


def yardstick(mixed: Mixture, T: FloatArray, z: FloatArray) -> tuple[float, list[int]] | None:
    """Seconds a flash of the reference library, and how many phases it finds (0: it failed)."""
    try:
        flasher = reference_flasher(mixed)
    except Exception as error:  # a library that cannot do the case is reported, not fatal
        print(f"  the reference library cannot: {type(error).__name__}: {error}")
        return None
    counts = []
    start = time.thread_time()
    for temperature, feed in zip(T, z, strict=True):
        try:
            state = flasher.flash(T=float(temperature), P=PRESSURE_KPA * 1e3, zs=feed.tolist())
            counts.append(int(state.phase_count))
        except Exception:
            counts.append(0)
    return (time.thread_time() - start) / len(T), counts


def reference_flasher(mixed: Mixture):  # type: ignore[no-untyped-def]
    """FlashVLN over an ideal gas and two liquids by the library's UNIFAC."""
    from thermo import (
        ChemicalConstantsPackage,
        FlashVLN,
        GibbsExcessLiquid,
        HeatCapacityGas,
        IdealGas,
        VaporPressure,
        VolumeLiquid,
    )
    from thermo.unifac import UNIFAC

    n = len(mixed.smiles)
    names = [str(name_and_cas(molecule_from_smiles(s).canonical_smiles)[1]) for s in mixed.smiles]
    constants, properties = ChemicalConstantsPackage.from_IDs(names)
    grid = np.linspace(250.0, 450.0, 201)
    pressures = []
    for line in mixed.system.vapour_pressures:
        table = VaporPressure(extrapolation="DIPPR101_ABC|DIPPR101_ABC")
        table.add_tabular_data(grid.tolist(), (np.exp(line.ln_kPa(grid)) * 1e3).tolist())
        pressures.append(table)
    model = UNIFAC.from_subgroups(T=340.0, xs=[1.0 / n] * n, chemgroups=mixed.counts, version=0)
    heat: list[HeatCapacityGas] = properties.HeatCapacityGases
    volumes: list[VolumeLiquid] = properties.VolumeLiquids
    liquid = GibbsExcessLiquid(
        VaporPressures=pressures,
        VolumeLiquids=volumes,
        HeatCapacityGases=heat,
        GibbsExcessModel=model,
        equilibrium_basis="Psat",
        caloric_basis="Psat",
        T=340.0,
        P=101325.0,
        zs=[1.0 / n] * n,
    )
    gas = IdealGas(T=340.0, P=101325.0, zs=[1.0 / n] * n, HeatCapacityGases=heat)
    return FlashVLN(constants, properties, liquids=[liquid, liquid], gas=gas)


def main() -> None:
    """Print one row for each case."""
    print("flashes a second, T and P given (single, batch) and P and vapour fraction (batch)")
    heads = ("single", "batch", "P,vf", "ref.", "single/r", "batch/r", "same phases")
    print(f"{'':28}" + "".join(f" {head:>8}" for head in heads))
    flashes("5 components, splitting", mixture(FIVE))
    flashes("5 components, alike", mixture(ALIKE))
    flashes("10 components", mixture(TEN))
    for smiles in (
        ("O", "CCO", "c1ccccc1"),
        ("O", "CCCCO", "CCOC(C)=O"),
        ("O", "CC(C)=O", "Cc1ccccc1"),
    ):
        liquid = mixture(smiles).system.activity
        took = seconds(lambda liquid=liquid: ternary_binodal(liquid, 298.15, 30), 3)
        print(f"binodal with 30 tie lines, {'/'.join(smiles)}: {took:.2f} s")
    for smiles in (("CC(C)=O", "ClC(Cl)Cl", "CO"), ("CCO", "O", "c1ccccc1")):
        system = mixture(smiles).system
        took = seconds(lambda system=system: residue_curves(system, PRESSURE_KPA), 1)
        print(f"map of residue curves, {'/'.join(smiles)}: {took:.2f} s")


if __name__ == "__main__":
    main()
