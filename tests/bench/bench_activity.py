"""Speed of the activity coefficients, as ratios measured in one run.

    python tests/bench/bench_activity.py

Prints, for a grid of 1,000 temperatures by 101 compositions of a binary, the rate per point
against the reference library `thermo` and against the bare numpy matrix products of the grid, and
the rate of `ln_gamma_infinite_pairs` in binaries a second.
"""

import time
from collections.abc import Callable

import numpy as np
from thermo.unifac import DOUFIP2016, DOUFSG, UFIP, UFSG, UNIFAC

from groups.activity import activity_model, kernel, ln_gamma_infinite, ln_gamma_infinite_pairs

# Ethanol and butanone, counts written out; both tables number these subgroups alike.
ETHANOL, BUTANONE = {1: 1, 2: 1, 14: 1}, {1: 1, 2: 1, 18: 1}
LIBRARY = {"unifac": (UFSG, UFIP, 0), "unifac-dortmund": (DOUFSG, DOUFIP2016, 1)}


def best_seconds(*runs: Callable[[], object], repeats: int = 30) -> list[float]:
    """The shortest of several runs of each, taken in turn so that a busy moment hits all alike."""
    best = [float("inf")] * len(runs)
    for _ in range(repeats):
        for k, run in enumerate(runs):
            start = time.perf_counter()
            run()
            best[k] = min(best[k], time.perf_counter() - start)
    return best


def library_seconds_per_point(method: str, T: np.ndarray, x: np.ndarray) -> float:
    """The library's own quickest way: one object moved from state to state."""
    subgroups, interactions, version = LIBRARY[method]
    model = UNIFAC.from_subgroups(
        T=300.0,
        xs=[0.4, 0.6],
        chemgroups=[ETHANOL, BUTANONE],
        subgroups=subgroups,
        interaction_data=interactions,
        version=version,
    )
    inner = x[1:-1].tolist()  # the library cannot take x = 0
    states = [(float(t), row) for t in T[::100] for row in inner]
    (seconds,) = best_seconds(
        lambda: [model.to_T_xs(t, row).gammas() for t, row in states], repeats=5
    )
    return seconds / len(states)


def grid(method: str) -> None:
    T, x1 = np.linspace(280.0, 400.0, 1000), np.linspace(0.0, 1.0, 101)
    x = np.column_stack([x1, 1.0 - x1])
    model = activity_model([ETHANOL, BUTANONE], method)
    points = T.size * x1.size
    groups = model.groups
    (B,) = kernel.group_fields(groups, T)
    Z_T, B_T = groups.surface.T, B.swapaxes(1, 2)
    D = x @ B

    def bare_products() -> None:
        # The three products that no rearrangement can spare: the group sums, and two back to
        # the components.
        x @ B
        D @ Z_T
        D @ B_T

    ours, slope, bare = best_seconds(
        lambda: model.ln_gamma(T[:, None], x),
        lambda: model.ln_gamma_slope(T[:, None], x),
        bare_products,
    )
    library = library_seconds_per_point(method, T, x)
    print(f"{method}, {T.size} x {x1.size} grid of a binary")
    print(f"  ln gamma                    {ours / points * 1e9:8.1f} ns a point")
    print(f"  d ln gamma / dT             {slope / points * 1e9:8.1f} ns a point")
    print(f"  reference library           {library * 1e9:8.0f} ns a point")
    print(f"  rate over the library's     {library * points / ours:8.0f}  (asked: at least 50)")
    print(f"  time over bare products     {ours / bare:8.2f}  (asked: at most 3)")


def pairs(method: str) -> None:
    rng = np.random.default_rng(0)
    numbers = [1, 2, 3, 9, 14, 18]  # CH3, CH2, CH, ACH, OH, CH3CO: all parameters published

    def molecule() -> dict[int, int]:
        return {int(k): int(rng.integers(1, 6)) for k in rng.choice(numbers, 3, replace=False)}

    n = 20_000
    solutes, solvents = [molecule() for _ in range(n)], [molecule() for _ in range(n)]
    T = rng.uniform(280.0, 400.0, n)

    def one_by_one() -> None:
        for k in range(500):
            ln_gamma_infinite(activity_model([solutes[k], solvents[k]], method), T[k])

    batch, single = best_seconds(
        lambda: ln_gamma_infinite_pairs(method, solutes, solvents, T), one_by_one, repeats=5
    )
    single /= 500
    print(f"{method}, {n} different binaries at infinite dilution")
    print(f"  pairs a second              {n / batch:8.0f}  (asked: at least 20000)")
    print(f"  rate over model by model    {single * n / batch:8.0f}")


if __name__ == "__main__":
    for name in LIBRARY:
        grid(name)
        pairs(name)
