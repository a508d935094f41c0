"""Real vapours: second virial coefficients, dimers, and the choice between ideal and real."""

from groups.vapour.choice import VapourChoice, choose_vapour
from groups.vapour.ideality import Ideality, ideality
from groups.vapour.note import VapourNote
from groups.vapour.real_vapour import range_notes, real_vapour
from groups.vapour.virial_vapour import VirialVapour

__all__ = [
    "Ideality",
    "VapourChoice",
    "VapourNote",
    "VirialVapour",
    "choose_vapour",
    "ideality",
    "range_notes",
    "real_vapour",
]
