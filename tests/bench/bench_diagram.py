"""Speed of a 101-point Txy diagram, as ratios in one run.

    python tests/bench/bench_diagram.py

The yardstick is what one would write over the general-purpose library `thermo`: a scalar bubble
temperature (secant method, started from the point before) at each of the 101 compositions, with the
same vapour pressures. Our diagram also looks for azeotropes, liquid stability and a three-phase
line; the time without those is given too. Not a timed test: nothing here fails.
"""

import time
from collections.abc import Callable

import numpy as np
from scipy.optimize import newton
from thermo.unifac import UNIFAC

from groups.activity import activity_model
from groups.equilibrium import System, bubble_temperature, diagram
from groups.pure import vapour_pressure
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles

PAIRS = (
    ("ethanol", "CCO", "water", "O"),
    ("acetone", "CC(C)=O", "chloroform", "ClC(Cl)Cl"),
    ("hexane", "CCCCCC", "benzene", "c1ccccc1"),
    ("benzene", "c1ccccc1", "water", "O"),
)
POINTS = 101
PRESSURE_KPA = 101.325


def main() -> None:
    """Print one row for each pair."""
    print(f"{'pair':24} {'loop ms':>9} {'curve ms':>9} {'ratio':>6} {'all ms':>8} {'ratio':>6}  max dT")
    for name1, smiles1, name2, smiles2 in PAIRS:
        molecules = [molecule_from_smiles(smiles1), molecule_from_smiles(smiles2)]
        counts = [assign(molecule, "unifac").counts for molecule in molecules]
        lines = tuple(vapour_pressure(molecule) for molecule in molecules)
        system = System(activity_model(counts, "unifac"), lines)
        x1 = np.linspace(0.0, 1.0, POINTS)
        x = np.stack([x1, 1.0 - x1], axis=-1)
        reference = UNIFAC.from_subgroups(T=350.0, xs=[0.5, 0.5], chemgroups=counts, version=0)
        loop_T = _scalar_loop(reference, lines, x)
        ours = bubble_temperature(system, PRESSURE_KPA, x)
        loop = _best(lambda: _scalar_loop(reference, lines, x), 3)
        curve = _best(lambda: bubble_temperature(system, PRESSURE_KPA, x), 20)
        whole = _best(lambda: diagram(system, "Txy", pressure_kPa=PRESSURE_KPA, points=POINTS), 20)
        print(
            f"{name1 + '/' + name2:24} {loop * 1e3:9.1f} {curve * 1e3:9.2f} {loop / curve:6.0f} "
            f"{whole * 1e3:8.2f} {loop / whole:6.0f}  {np.abs(loop_T - ours.temperature_K).max():.1e}"
        )


def _scalar_loop(reference: UNIFAC, lines: tuple, x: np.ndarray) -> np.ndarray:
    """Bubble temperatures one after the other."""
    # The yardstick is not to suffer from our vapour pressures, which are made for arrays: it gets
    # them as plain numbers, by two-point Clausius-Clapeyron around each temperature it asks for.
    tables = [_scalar_line(line) for line in lines]
    T, found = 350.0, []
    for composition in x.tolist():
        T = float(newton(_excess, T, args=(reference, tables, composition), tol=1e-9))
        found.append(T)
    return np.array(found)


def _excess(T: float, reference: UNIFAC, tables: list, x: list[float]) -> float:
    gammas = reference.to_T_xs(T, x).gammas()
    total = sum(xi * g * table(T) for xi, g, table in zip(x, gammas, tables, strict=True))
    return float(np.log(total / PRESSURE_KPA))


def _scalar_line(line: object) -> Callable[[float], float]:
    """A vapour pressure as a scalar function: cubic spline of ln P in 1/T, 0.1 % of a microkelvin."""
    from scipy.interpolate import CubicSpline

    inverse = np.linspace(1.0 / 600.0, 1.0 / 200.0, 4001)
    spline = CubicSpline(inverse, line.ln_kPa(1.0 / inverse))  # type: ignore[attr-defined]
    return lambda T: float(np.exp(spline(1.0 / T)))


def _best(run: Callable[[], object], times: int) -> float:
    """Least seconds of several runs: the one least disturbed by the machine."""
    seconds = []
    for _ in range(times):
        start = time.perf_counter()
        run()
        seconds.append(time.perf_counter() - start)
    return min(seconds)


if __name__ == "__main__":
    main()
