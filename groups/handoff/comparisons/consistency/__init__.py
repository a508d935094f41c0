"""Can measured boiling points be believed? Published tests, each with its criterion and source."""

from groups.handoff.comparisons.consistency.all_tests import Consistency, consistency
from groups.handoff.comparisons.consistency.record import ConsistencyTest, Suspect

__all__ = ["Consistency", "ConsistencyTest", "Suspect", "consistency"]
