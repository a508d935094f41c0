"""Speed of fits and comparisons, as ratios measured in one run.

    python -m tests.bench.bench_fits

Prints the time of one pair (5 temperatures x 41 compositions), of all 45 pairs of ten components,
and of a comparison of 40 points with every method, each beside plain `scipy.optimize.least_squares`
with numerical derivatives from the same starts on the same residuals.
"""

import time
from collections.abc import Callable, Iterable

import numpy as np
from scipy.optimize import least_squares

from groups.activity import IdealModel
from groups.equilibrium import bubble_temperature
from groups.handoff import compare, read_records
from groups.handoff.comparisons import observations
from groups.handoff.comparisons.regression import _PointResiduals
from groups.handoff.comparisons.regression import _starts as point_starts
from groups.handoff.fit_door import fit
from groups.handoff.fits import fit_grid, fit_pair, pair_target
from groups.handoff.fits.effects import Boiling
from groups.handoff.fits.formulation import formulation
from groups.handoff.fits.pair import _Residuals, _starts
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.component import Component
from groups.structure.molecule import molecule_from_smiles

TEN = ("CCO", "O", "CC(C)=O", "CO", "CCCCCC", "c1ccccc1", "CCOC(C)=O", "CC#N", "C1CCCCC1", "CCCO")
EQUATIONS = ("nrtl", "wilson", "van-laar", "margules-3")


def seconds(run: Callable[[], object], repeats: int) -> float:
    """The shortest of several runs."""
    best = float("inf")
    for _ in range(repeats):
        start = time.perf_counter()
        run()
        best = min(best, time.perf_counter() - start)
    return best


def plain(function: Callable[[np.ndarray], np.ndarray], starts: Iterable[np.ndarray]) -> None:
    """What anyone would write: numerical derivatives, the same starts."""
    for start in starts:
        least_squares(function, start, xtol=1e-10, ftol=1e-10, gtol=1e-10)


def components(smiles: Iterable[str]) -> list[Component]:
    return [Component(molecule_from_smiles(one)) for one in smiles]


def pair() -> None:
    mixture = boiling_mixture(
        components(("CCO", "O")), "unifac-dortmund", "estimate", pressure_kPa=101.325
    )
    model = mixture.liquid.model
    target = pair_target(model, *fit_grid((330.0, 370.0)))
    boiling = Boiling((mixture.lines[0], mixture.lines[1]), 101.325)
    print("ethanol / water, 5 temperatures x 41 compositions")
    for name in EQUATIONS:
        how = formulation(name, "a+b/T", target.temperature_K)
        residuals, starts = _Residuals(how, target), _starts(how, target)
        ours = seconds(lambda n=name: fit_pair(target, model, n, boiling=boiling), 15)
        fit_only = seconds(lambda n=name: fit_pair(target, model, n), 15)
        theirs = seconds(lambda r=residuals, s=starts: plain(lambda p: r(p)[0], s), 5)
        print(
            f"  {name:<11}{1e3 * ours:7.1f} ms with azeotropes (asked: below 50), "
            f"{1e3 * fit_only:6.1f} ms without; plain least squares alone {1e3 * theirs:7.1f} ms, "
            f"{theirs / fit_only:5.1f} times as long"
        )


def ten() -> None:
    ours = seconds(
        lambda: fit(
            components(TEN),
            temperature_range_K=(310.0, 350.0),
            pressure_kPa=101.325,
            method="unifac-dortmund",
        ),
        3,
    )
    print(f"45 pairs of ten components, NRTL: {ours:.2f} s (asked: below 2)")


def comparison() -> None:
    two = components(("CC(C)=O", "CO"))
    mixture = boiling_mixture(two, "unifac-dortmund", "estimate", pressure_kPa=101.325)
    x1 = np.linspace(0.01, 0.99, 40)
    states = bubble_temperature(mixture.system, 101.325, np.stack([x1, 1.0 - x1], axis=-1))
    rng = np.random.default_rng(1)
    rows = [
        {
            "temperature": float(T) + 0.05 * rng.normal(),
            "pressure": 101.325,
            "x1": float(a),
            "y1": float(b) + 0.004 * rng.normal(),
        }
        for T, a, b in zip(states.temperature_K, x1, states.vapour[:, 0], strict=True)
    ]
    points = read_records(rows, (58.08, 32.04))
    ours = seconds(lambda: compare(two, points), 4)
    seen = observations(points, (mixture.lines[0], mixture.lines[1]), IdealModel(2))
    jobs = []
    for name in EQUATIONS:
        how = formulation(name, "b/T", points.temperatures_K)
        rows_of = np.arange(seen.n_residuals)
        jobs.append((_PointResiduals(how, seen, rows_of), point_starts(how, points, seen)))

    def numerical() -> None:
        for residuals, starts in jobs:
            plain(lambda p, r=residuals: r(p)[0], starts)

    theirs = seconds(numerical, 3)
    print(
        f"40 points against all methods and six fitted equations with cross-validation: "
        f"{ours:.2f} s (asked: below 1); plain least squares of four equations alone, without "
        f"cross-validation, tests or predictions: {theirs:.2f} s"
    )


if __name__ == "__main__":
    pair()
    ten()
    comparison()
