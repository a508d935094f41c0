"""How many phases, and which: phases are added where the tangent plane finds one below.

Every feed begins as one phase, the liquid or the vapour of lower Gibbs energy. Its phases are
settled; then a vapour and trial liquids are held against their common tangent plane. The lowest one
below it is added and the amounts are settled again, each time at a lower Gibbs energy, until no
trial lies below. A phase that vanishes on the way is left out.

Source: Michelsen, Fluid Phase Equilibria 9 (1982) 1-19 and 21-40.
"""

from dataclasses import dataclass, field

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.liquid_trials import nearly_ideal
from groups.equilibrium.phase_amounts import PhaseAmounts, ln_fugacities, settled_amounts
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_trials import lowest_phases
from groups.equilibrium.stability import ZERO_DISTANCE
from groups.equilibrium.states import safe_log

#: More liquids than this do not occur; a fourth place is for the vapour.
MOST_LIQUIDS = 3
#: Rounds of settling and testing; each adds or loses one phase.
ROUNDS = 14
#: A phase this little below the plane that vanishes when it is added is not worth another round.
MARGINAL = 1e-7
SUBSTITUTIONS = 4
#: How closely the shares need to be known during them.
ROUGH_SHARE = 1e-3
#: Largest part of the feed that a new phase begins with.
FIRST_SHARE = 0.3
#: Trials of a smaller share for it.
SHRINKINGS = 8
NOT_SETTLED = "the amounts of the phases did not settle"
TOO_MANY = "more phases were found than can be held"
NO_END = "phases were still being added and lost when the search ended"


@dataclass(slots=True)
class PhaseStates:
    """Phases of m feeds.

    `amounts` is (m, MOST_LIQUIDS + 1, n_components): `liquids` liquids, then a vapour where
    `vapour` says so, then zeros. `failure` is None where the phases are settled and stable.
    """

    amounts: FloatArray
    liquids: IntArray
    vapour: BoolArray
    failure: list[str | None]
    residual: FloatArray


def find_phases(problem: PhaseProblem) -> PhaseStates:
    """The stable phases of every feed."""
    search = _PhaseSearch(problem)
    active = np.arange(len(problem.feed), dtype=np.int64)
    for _ in range(ROUNDS):
        if not len(active):
            break
        active = search.round(active)
    for row in active.tolist():
        search.states.failure[row] = search.states.failure[row] or NO_END
    return search.states


@dataclass(slots=True)
class _PhaseSearch:
    problem: PhaseProblem
    states: PhaseStates = field(init=False)
    added: FloatArray = field(init=False)  # tangent-plane distance of the phase added last
    shrunk: BoolArray = field(init=False)  # a phase vanished since
    ideal: BoolArray = field(init=False)  # no liquid can split

    def __post_init__(self) -> None:
        z = self.problem.feed
        m, n = z.shape
        amounts = np.zeros((m, MOST_LIQUIDS + 1, n))
        amounts[:, 0] = z
        vapour = np.zeros(m, dtype=bool)
        if self.problem.vapour is not None and m:
            feed = z[:, None]
            as_liquid = (z * ln_fugacities(self.problem, feed, 1)[:, 0]).sum(axis=1)
            as_vapour = (z * ln_fugacities(self.problem, feed, 0)[:, 0]).sum(axis=1)
            vapour = as_vapour < as_liquid
        liquids = np.where(vapour, 0, 1).astype(np.int64)
        self.states = PhaseStates(amounts, liquids, vapour, [None] * m, np.full(m, np.inf))
        self.added, self.shrunk = np.full(m, -np.inf), np.zeros(m, dtype=bool)
        self.ideal = nearly_ideal(self.problem.activity, self.problem.temperature_K)

    def round(self, active: IntArray) -> IntArray:
        """Settle and test every active feed once; returns those still to do."""
        again: list[int] = []
        codes = 2 * self.states.liquids[active] + self.states.vapour[active]
        for code in np.unique(codes).tolist():
            rows = active[codes == code]
            n_liquids, phases = code // 2, code // 2 + code % 2
            found = self._settle(rows, n_liquids, phases)
            for k in np.flatnonzero(found.lost >= 0).tolist():
                self._drop(int(rows[k]), int(found.lost[k]), n_liquids)
                again.append(int(rows[k]))
            failed = ~found.settled & (found.lost < 0)
            for row in rows[failed].tolist():
                self.states.failure[row] = NOT_SETTLED
            good = np.flatnonzero(found.settled)
            if len(good):
                again.extend(self._test(rows[good], found, good, n_liquids))
        return np.array(sorted(again), dtype=np.int64)

    def _settle(self, rows: IntArray, n_liquids: int, phases: int) -> PhaseAmounts:
        part, start = self.problem.rows(rows), self.states.amounts[rows][:, :phases]
        if phases == 1:
            ln_f = ln_fugacities(part, start, n_liquids)
            zero = np.zeros(len(rows))
            nothing = np.full(len(rows), -1, dtype=np.int64)
            done = np.ones(len(rows), dtype=bool)
            found = PhaseAmounts(start, ln_f, zero, done, nothing, zero)
        else:
            if phases == 2:
                start = _substituted(part, start, n_liquids)
            found = settled_amounts(part, start, n_liquids)
        self.states.amounts[rows[:, None], np.arange(phases)] = found.amounts
        self.states.residual[rows] = found.residual
        return found

    def _drop(self, row: int, lost: int, n_liquids: int) -> None:
        amounts, z = self.states.amounts[row], self.problem.feed[row]
        amounts[lost:-1] = amounts[lost + 1 :].copy()
        amounts[-1] = 0.0
        total = amounts.sum(axis=0)
        amounts *= np.where(total > 0.0, z / np.where(total > 0.0, total, 1.0), 0.0)
        self.shrunk[row] = True
        if lost < n_liquids:
            self.states.liquids[row] -= 1
        else:
            self.states.vapour[row] = False

    def _test(
        self, rows: IntArray, found: PhaseAmounts, good: IntArray, n_liquids: int
    ) -> list[int]:
        """Hold trial phases against the settled ones; add the lowest; rows still to do."""
        n, part = found.amounts[good], self.problem.rows(rows)
        probe = lowest_phases(part, n, found.ln_fugacity[good], n_liquids, self.ideal[rows])
        lowest, trial, vapour_new = probe.distance, probe.trial, probe.vapour
        marginal = self.shrunk[rows] & (lowest > -MARGINAL) & (self.added[rows] > -MARGINAL)
        more = np.flatnonzero((lowest < -ZERO_DISTANCE) & ~marginal)
        self.added[rows[more]], self.shrunk[rows[more]] = lowest[more], False
        for vapour in (False, True):
            new = more[vapour_new[more] == vapour]
            if len(new):
                self._add(rows[new], n[new], trial[new], n_liquids, vapour=vapour)
        return [row for row in rows[more].tolist() if self.states.failure[row] is None]

    def _add(
        self, rows: IntArray, n: FloatArray, trial: FloatArray, n_liquids: int, *, vapour: bool
    ) -> None:
        """Begin a new phase with a share small enough to lower the Gibbs energy."""
        if not vapour and n_liquids == MOST_LIQUIDS:
            for row in rows.tolist():
                self.states.failure[row] = TOO_MANY
            return
        part = self.problem.rows(rows)
        z = part.feed
        phases = n.shape[1] + 1
        order = np.insert(np.arange(phases - 1), n_liquids, phases - 1)
        before = (n * ln_fugacities(part, n, n_liquids)).sum(axis=(1, 2))
        liquids_then = n_liquids + (not vapour)
        present = (z > 0.0) & (trial > 0.0)
        room = np.where(present, z / np.where(present, trial, 1.0), np.inf).min(axis=1)
        share = np.minimum(FIRST_SHARE, 0.5 * room)
        for _ in range(SHRINKINGS):
            new = share[:, None] * trial
            rest = n * np.where(z > 0.0, 1.0 - new / np.where(z > 0.0, z, 1.0), 0.0)[:, None]
            grown = np.concatenate([rest, new[:, None]], axis=1)[:, order]
            after = (grown * ln_fugacities(part, grown, liquids_then)).sum(axis=(1, 2))
            higher = after >= before
            if not higher.any():
                break
            share = np.where(higher, 0.2 * share, share)
        self.states.amounts[rows[:, None], np.arange(phases)] = grown
        self.states.liquids[rows] = liquids_then
        self.states.vapour[rows] |= vapour


def _substituted(part: PhaseProblem, start: FloatArray, n_liquids: int) -> FloatArray:
    """A better start for two phases, by substitution of the distribution coefficients."""
    n = start
    for _ in range(SUBSTITUTIONS):
        x = n / n.sum(axis=2, keepdims=True)
        c = part.coefficients(x, n_liquids)
        ln_k = np.clip(c[:, 0] - c[:, 1], -300.0, 300.0)  # second phase over the first
        share, inside = phase_fraction(part.feed, ln_k, ROUGH_SHARE)
        share = np.clip(share, 1e-3, 1.0 - 1e-3)[:, None]
        ratio = np.exp(ln_k)
        whole = 1.0 - share + share * ratio
        n = np.stack([part.feed * (1.0 - share) / whole, part.feed * share * ratio / whole], axis=1)
    # Only where both phases live on and the energy has fallen: the first start can be relied on.
    before = (start * ln_fugacities(part, start, n_liquids)).sum(axis=(1, 2))
    after = (n * ln_fugacities(part, n, n_liquids)).sum(axis=(1, 2))
    ratio = safe_log(n[:, 0] + 1e-300) - safe_log(n[:, 1] + 1e-300)
    first = np.argmax(part.feed, axis=1)[:, None]
    ratio = np.where(part.feed > 0.0, ratio, np.take_along_axis(ratio, first, axis=1))
    better = inside & (after < before) & (np.ptp(ratio, axis=1) > 1e-6)
    return np.where(better[:, None, None], n, start)
