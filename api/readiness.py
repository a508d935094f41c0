"""Whether the service can compute: one small prediction through structure, tables and activity."""

import logging
from functools import lru_cache

from api.problem_types import RequestProblemError
from groups.prediction import ALL_METHODS, Component, activity_coefficients
from groups.structure.molecule import molecule_from_smiles

_log = logging.getLogger("mixwright")


def ready_methods() -> list[str]:
    """The methods of this service, once ethanol/water can be computed; a problem (503) before."""
    try:
        _try_once()
    except Exception as error:
        _log.exception("The readiness check failed")
        raise RequestProblemError("not-ready", "A trial prediction failed.") from error
    return list(ALL_METHODS)


@lru_cache(maxsize=1)
def _try_once() -> None:
    components = [Component(molecule_from_smiles(smiles)) for smiles in ("CCO", "O")]
    activity_coefficients(components, 298.15, [[0.5, 0.5]], method="unifac")
