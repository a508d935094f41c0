"""What to measure to settle which of several solvents parts two components best."""

from collections.abc import Sequence

import numpy as np

from groups.activity.choice import OnMissing
from groups.confidence.calibration import dilute_answers
from groups.confidence.calibration.model import calibration
from groups.confidence.labels import label
from groups.errors import PredictionError
from groups.prediction.answers import MeasurementPlan, PlannedMeasurement
from groups.prediction.bands import N_SAMPLES, SEED
from groups.prediction.checks import check_components, check_temperatures
from groups.prediction.greedy_plan import DILUTE_NOISE, Trial, greedy_plan, linear_question
from groups.structure.molecule import Molecule

MOST_SOLVENTS = 200


def ranking_plan(
    keys: Sequence[Molecule],
    solvents: Sequence[Molecule],
    temperature_K: float,
    on_missing: OnMissing = "estimate",
) -> MeasurementPlan:
    """The few measurements that settle which solvent parts two components best.

    The question is by how much the solvent ranked first beats the one ranked second, in ln of the
    selectivity at infinite dilution, gamma of the first key over gamma of the second.

    Parameters
    ----------
    keys : sequence of two Molecule
    solvents : sequence of Molecule, two or more
    temperature_K : float
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    MeasurementPlan

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or a molecule is given twice.
    PredictionError
        If fewer than two solvents can be ranked.
    """
    check_components(keys, least=2, most=2)
    check_components(solvents, least=2, most=MOST_SOLVENTS)
    check_temperatures(temperature_K)
    pairs = [(key, solvent, temperature_K) for solvent in solvents for key in keys]
    found = dilute_answers(pairs, on_missing)
    generator = np.random.default_rng(SEED)
    scaled = calibration().scaled_quantile(generator.random((N_SAMPLES, len(pairs))))
    values = found.ln_gamma + found.scale * scaled
    selectivity = values[:, 0::2] - values[:, 1::2]
    central = found.ln_gamma[0::2] - found.ln_gamma[1::2]
    if np.isfinite(central).sum() < 2:
        raise PredictionError("Fewer than two of the solvents can be ranked by any table.")
    order = np.argsort(np.where(np.isfinite(central), -central, np.inf))
    first, second = int(order[0]), int(order[1])
    name = (
        f"lead of {label(solvents[first])} over {label(solvents[second])} "
        "in ln of the selectivity at infinite dilution"
    )
    trials = [
        Trial(
            _told(keys, solvents, (k, place), temperature_K), values[:, 2 * place + k], DILUTE_NOISE
        )
        for place in (first, second)
        for k in (0, 1)
    ]
    lead = selectivity[:, first] - selectivity[:, second]
    return greedy_plan(linear_question(name, lead), trials)


def _told(
    keys: Sequence[Molecule],
    solvents: Sequence[Molecule],
    places: tuple[int, int],
    temperature_K: float,
) -> PlannedMeasurement:
    """One key at infinite dilution in one solvent; `places` among the keys and the solvents."""
    what = (
        f"activity coefficient of {label(keys[places[0]])} at infinite dilution in "
        f"{label(solvents[places[1]])}"
    )
    return PlannedMeasurement("gamma_infinity", what, places, temperature_K, None)
