"""`auto` as one activity model: weighted tables, with the correction added."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import permutations

import numpy as np

from groups.activity import activity_model
from groups.activity.choice import OnMissing
from groups.activity.simple import WeightedModel
from groups.arrays import FloatArray
from groups.confidence.calibration.addition import AddedExcess
from groups.confidence.calibration.dilute import REFERENCE_TEMPERATURE_K
from groups.confidence.calibration.intervals import dilute_answers
from groups.confidence.calibration.mixture import TableWeight, mixture_weights
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule

# The correction is learned at infinite dilution. With this power a sixteenth of it reaches an
# equimolar binary, where tables fitted to vapour-liquid data need none.
CORRECTION_POWER = 4


@dataclass(frozen=True, slots=True)
class AutoModel:
    """The model of `auto` for one mixture and what it is made of.

    `correction[i, j]` is what is added to ln gamma of i at infinite dilution in j.
    """

    model: AddedExcess
    tables: tuple[TableWeight, ...]
    correction: FloatArray


def auto_model(
    molecules: Sequence[Molecule], on_missing: OnMissing = "estimate"
) -> AutoModel | None:
    """Build the model of `auto` for a mixture.

    Parameters
    ----------
    molecules : sequence of Molecule
        Two or more, all different.
    on_missing : {"refuse", "estimate"}
        With "refuse", tables with completed parameters take no part.

    Returns
    -------
    AutoModel or None
        None where no table describes the mixture.
    """
    return _auto_model(tuple(molecules), on_missing)


@lru_cache(maxsize=512)
def _auto_model(molecules: tuple[Molecule, ...], on_missing: OnMissing) -> AutoModel | None:
    tables = mixture_weights(molecules, on_missing)
    if not tables:
        return None
    models = tuple(
        activity_model([assign(molecule, one.method).counts for molecule in molecules], one.method)
        for one in tables
    )
    weighted = WeightedModel(models, tuple(one.weight for one in tables))
    places = list(permutations(range(len(molecules)), 2))
    pairs = [(molecules[i], molecules[j], REFERENCE_TEMPERATURE_K) for i, j in places]
    added = np.zeros((len(molecules), len(molecules)))
    added[tuple(np.array(places).T)] = np.nan_to_num(dilute_answers(pairs, on_missing).correction)
    return AutoModel(AddedExcess(weighted, added, CORRECTION_POWER), tables, added)
