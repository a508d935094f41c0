"""Real vapours: second virial coefficients and dimers."""

from groups.vapour.ideality import Ideality, ideality
from groups.vapour.note import VapourNote
from groups.vapour.real_vapour import range_notes, real_vapour
from groups.vapour.virial_vapour import VirialVapour

__all__ = ["Ideality", "VapourNote", "VirialVapour", "ideality", "range_notes", "real_vapour"]
