"""Speed of a 101-point Txy diagram, as ratios in one run.

    python tests/bench/bench_diagram.py

The yardsticks are what one would write over the general-purpose library `thermo`: a scalar bubble
temperature at each of the 101 compositions, by the secant method from the point before, and by a
bracketing method, both with the same vapour pressures as scalar functions. `curve` is our bubble
temperatures of all points, `diagram` adds azeotropes, liquid stability and the three-phase line.
CPU time of the thread, least of several runs, so that a busy machine disturbs little. Not a timed
test: nothing here fails.
"""

import time
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from scipy.interpolate import CubicSpline
from scipy.optimize import brentq, newton
from thermo.unifac import UNIFAC

from groups.activity import activity_model
from groups.equilibrium import SaturationLine, System, bubble_temperature, diagram
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
BRACKET_K = (220.0, 420.0)


@dataclass(frozen=True)
class Yardstick:
    """Scalar bubble temperatures over the reference library's model."""

    model: UNIFAC
    lines: tuple[Callable[[float], float], Callable[[float], float]]

    def excess(self, T: float, x: list[float]) -> float:
        """ln of the bubble pressure over the pressure wanted."""
        gammas = self.model.to_T_xs(T, x).gammas()
        total = sum(a * g * line(T) for a, g, line in zip(x, gammas, self.lines, strict=True))
        return float(np.log(total / PRESSURE_KPA))

    def secant(self, x: list[list[float]]) -> list[float]:
        """One after the other, each from the temperature of the one before."""
        found, T = [], 350.0
        for each in x:
            T = float(newton(self.excess, T, args=(each,), tol=1e-9))
            found.append(T)
        return found

    def bracketed(self, x: list[list[float]]) -> list[float]:
        """One after the other, each between the same bounds."""
        return [brentq(self.excess, *BRACKET_K, args=(each,), xtol=1e-9) for each in x]


def main() -> None:
    """Print one row for each pair."""
    print(f"{'':20} {'milliseconds':^37} {'curve faster than':^19} {'diagram faster':^19}")
    heads = (
        "pair",
        "secant",
        "bracket",
        "curve",
        "diagram",
        *("secant", "bracket") * 2,
        "max dT/K",
    )
    print(f"{heads[0]:20}" + "".join(f" {head:>9}" for head in heads[1:]))
    for name1, smiles1, name2, smiles2 in PAIRS:
        print(f"{name1 + '/' + name2:20}" + row(smiles1, smiles2))


def row(smiles1: str, smiles2: str) -> str:
    """Measure one pair."""
    molecules = [molecule_from_smiles(smiles1), molecule_from_smiles(smiles2)]
    counts = [assign(molecule, "unifac").counts for molecule in molecules]
    lines = tuple(vapour_pressure(molecule) for molecule in molecules)
    system = System(activity_model(counts, "unifac"), lines)
    model = UNIFAC.from_subgroups(T=350.0, xs=[0.5, 0.5], chemgroups=counts, version=0)
    yardstick = Yardstick(model, (scalar_line(lines[0]), scalar_line(lines[1])))
    x1 = np.linspace(0.0, 1.0, POINTS)
    x = np.stack([x1, 1.0 - x1], axis=-1)
    listed = x.tolist()
    secant = best(lambda: yardstick.secant(listed), 7)
    bracket = best(lambda: yardstick.bracketed(listed), 5)
    curve = best(lambda: bubble_temperature(system, PRESSURE_KPA, x), 40)
    whole = best(lambda: diagram(system, "Txy", pressure_kPa=PRESSURE_KPA, points=POINTS), 20)
    ours = bubble_temperature(system, PRESSURE_KPA, x).temperature_K
    apart = np.abs(np.array(yardstick.secant(listed)) - ours).max()
    times = "".join(f" {seconds * 1e3:9.2f}" for seconds in (secant, bracket, curve, whole))
    ratios = (secant / curve, bracket / curve, secant / whole, bracket / whole)
    return times + "".join(f" {ratio:9.1f}" for ratio in ratios) + f" {apart:9.0e}"


def scalar_line(line: SaturationLine) -> Callable[[float], float]:
    """A vapour pressure in kPa as a scalar function: a fine spline of ln P in 1/T.

    Our vapour pressures are made for arrays; the yardstick is not to suffer from that.
    """
    inverse = np.linspace(1.0 / 600.0, 1.0 / 200.0, 4001)
    spline = CubicSpline(inverse, line.ln_kPa(1.0 / inverse))
    return lambda T: float(np.exp(spline(1.0 / T)))


def best(run: Callable[[], object], times: int) -> float:
    """Least seconds of CPU of several runs."""
    seconds = []
    for _ in range(times):
        start = time.thread_time()
        run()
        seconds.append(time.thread_time() - start)
    return min(seconds)


if __name__ == "__main__":
    main()
