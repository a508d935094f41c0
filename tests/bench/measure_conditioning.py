"""Does the conditioned interval hold what was measured elsewhere? One or more points of each open
set are given, the others held out.

    python -m tests.bench.measure_conditioning
"""

import numpy as np

from groups.arrays import FloatArray
from groups.confidence.calibration import SampledModels
from groups.handoff import Measurements, read_records
from groups.handoff.comparisons import observations
from groups.handoff.conditioned import updated
from groups.prediction.boiling_mixture import boiling_mixture
from groups.prediction.component import Component
from groups.structure.molecule import molecule_from_smiles
from tests.bench.open_data import VleSet, vle

GIVEN = (0, 1, 2, 4, 6)


def rows(one: VleSet, kept: FloatArray) -> Measurements:
    """The points kept, as measurements."""
    listed = []
    for k in kept.tolist():
        row = {
            "temperature": float(one.temperature_K[k]),
            "pressure": float(one.pressure_kPa[k]),
            "x1": float(one.x1[k]),
        }
        if np.isfinite(one.y1[k]):
            row["y1"] = float(one.y1[k])
        listed.append(row)
    return read_records(listed, (100.0, 100.0))


def held_out(one: VleSet, given: int) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """Inside or not, width, error of the centre before and after, of ln P at the other points."""
    components = [Component(molecule_from_smiles(s)) for s in one.smiles]
    middle = float(np.median(one.temperature_K))
    mixture = boiling_mixture(components, "auto", "estimate", temperature_K=middle)
    drawn, lines = mixture.drawn(middle), (mixture.lines[0], mixture.lines[1])
    assert drawn is not None
    inside = np.flatnonzero((one.x1 > 0.02) & (one.x1 < 0.98))
    places = np.linspace(0, len(inside) - 1, given + 2).round().astype(int)[1:-1]
    kept = inside[places]
    rest = np.setdiff1d(inside, kept)
    dilute = drawn.models.dilute
    prior = np.column_stack([dilute[:, 0, 1], dilute[:, 1, 0], drawn.shift])
    model = mixture.liquid.model
    posterior = prior
    if given:
        seen = observations(rows(one, kept), lines, model)
        posterior, _ = updated(prior, seen, model)
    found = observations(rows(one, rest), lines, model)
    matrices = np.zeros((len(posterior), 2, 2))
    matrices[:, 0, 1], matrices[:, 1, 0] = posterior[:, 0], posterior[:, 1]
    own = model.ln_gamma(found.temperature_K, found.fractions)
    added = SampledModels(model, matrices).errors(found.fractions) + posterior[:, None, 2:]
    ln_P = np.array([found.boil(own + one_draw)[0] for one_draw in added])
    noise = np.random.default_rng(1).standard_normal(ln_P.shape) * found.sigma_ln_pressure
    lower, upper = np.quantile(ln_P + noise, [0.05, 0.95], axis=0)
    held = (lower <= found.ln_pressure) & (found.ln_pressure <= upper)
    plain = np.quantile(ln_P, [0.05, 0.95], axis=0)
    error = np.abs(np.mean(ln_P, axis=0) - found.ln_pressure)
    return (
        held.astype(float),
        plain[1] - plain[0],
        error,
        np.abs(found.boil(own)[0] - found.ln_pressure),
    )


def main() -> None:
    """Print the share inside, mean width and mean error for each number of points given."""
    for given in GIVEN:
        per_set = []
        for one in vle():
            if len(one.x1) < 8:
                continue
            per_set.append([float(part.mean()) for part in held_out(one, given)])
        share, width, error, before = np.mean(per_set, axis=0)
        print(
            f"{given} points given, {len(per_set)} sets: {100 * share:.0f} % inside, mean width of "
            f"ln P {width:.3f}, mean error {error:.4f} (unconditioned {before:.4f})"
        )


if __name__ == "__main__":
    main()
