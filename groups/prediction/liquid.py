"""One liquid mixture with its activity model, and the reasons to doubt what it says."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from groups.activity import ActivityModel, IdealModel, activity_model
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Evidence, Reason
from groups.confidence.agreement_rules import agreement_reasons, correction_reasons
from groups.confidence.calibration import TableWeight, auto_model
from groups.confidence.parameter_rules import temperature_reasons
from groups.errors import UnknownMethodError
from groups.parameters import table
from groups.prediction.choosing import ALL_METHODS, choose
from groups.prediction.mixture_reasons import choice_evidence, mixture_reasons
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class Liquid:
    """A mixture and the model taken for it.

    `heaviest` is the table taken, or the one of the largest weight; `others` holds the published
    tables that describe the same mixture, for comparison; `fixed_reasons` depend on neither
    temperature nor composition.
    """

    molecules: tuple[Molecule, ...]
    method: str
    model: ActivityModel
    methods_used: tuple[TableWeight, ...]
    heaviest: str
    others: Mapping[str, ActivityModel]
    fixed_reasons: tuple[Reason, ...]
    evidence: tuple[Evidence, ...]

    def reasons(self, temperature_K: FloatArray, mole_fractions: FloatArray) -> list[Reason]:
        """Reasons to doubt the activity coefficients, over all the points together.

        Parameters
        ----------
        temperature_K : array of shape (n_points,)
        mole_fractions : array of shape (n_points, n_components)

        Returns
        -------
        list of Reason
        """
        if not self.compared:
            return list(self.fixed_reasons)
        spreads = self.spreads(temperature_K, mole_fractions)
        largest = {method: float(np.max(spread)) for method, spread in spreads.items()}
        lowest, highest = float(np.min(temperature_K)), float(np.max(temperature_K))
        return self._at(lowest, highest, largest)

    def reasons_by_point(
        self, temperature_K: FloatArray, mole_fractions: FloatArray
    ) -> list[list[Reason]]:
        """Reasons to doubt the activity coefficients, for each point on its own.

        Parameters
        ----------
        temperature_K : array of shape (n_points,)
        mole_fractions : array of shape (n_points, n_components)

        Returns
        -------
        list of list of Reason, length n_points
        """
        if not self.compared:
            return [list(self.fixed_reasons) for _ in temperature_K]
        spreads = self.spreads(temperature_K, mole_fractions)
        return [
            self._at(float(T), float(T), {m: float(spread[k]) for m, spread in spreads.items()})
            for k, T in enumerate(temperature_K)
        ]

    @property
    def compared(self) -> bool:
        """Whether table and temperature reasons apply: not to one component, not to "ideal"."""
        return self.method != "ideal" and len(self.molecules) > 1

    def _at(self, lowest_K: float, highest_K: float, spreads: dict[str, float]) -> list[Reason]:
        return [
            *self.fixed_reasons,
            *temperature_reasons(table(self.heaviest), lowest_K, highest_K),
            *agreement_reasons(self.method, spreads),
        ]

    def spreads(
        self, temperature_K: FloatArray, mole_fractions: FloatArray
    ) -> dict[str, FloatArray]:
        """Largest |difference in ln gamma| of each other table, point by point.

        A dilute component counts as much as the solvent: its K-value is what a separation
        turns on.
        """
        own = self.model.ln_gamma(temperature_K, mole_fractions)
        return {
            method: np.max(np.abs(model.ln_gamma(temperature_K, mole_fractions) - own), axis=-1)
            for method, model in self.others.items()
        }


def liquid(molecules: Sequence[Molecule], method: str, on_missing: OnMissing) -> Liquid:
    """Choose the table for a mixture and build its activity model.

    Parameters
    ----------
    molecules : sequence of Molecule
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}
        What to do where the table asked for lacks a parameter.

    Returns
    -------
    Liquid

    Raises
    ------
    UnknownMethodError, IncompleteAssignmentError, MissingParameterError
        As `groups.prediction.choosing.choose` says.
    """
    if method not in ALL_METHODS:
        raise UnknownMethodError(method, ALL_METHODS)
    return _liquid(tuple(molecules), method, on_missing)


@lru_cache(maxsize=512)
def _liquid(molecules: tuple[Molecule, ...], method: str, on_missing: OnMissing) -> Liquid:
    if method == "ideal" or len(molecules) == 1:
        return _ideal(molecules, method)
    choice = choose(molecules, method, on_missing)
    models = {m: activity_model(choice.counts(m), m) for m in choice.tables}
    extra: list[Reason] = []
    taken: ActivityModel = models[choice.heaviest.method]
    if method == "auto":
        automatic = auto_model(molecules, on_missing)
        assert automatic is not None  # or there would be no choice
        taken = automatic.model
        extra = correction_reasons(float(np.max(np.abs(automatic.correction))))
    return Liquid(
        molecules,
        choice.method,
        taken,
        choice.weights,
        choice.heaviest.method,
        {m: models[m] for m in choice.compared},
        (*mixture_reasons(molecules, choice), *extra),
        choice_evidence(choice),
    )


def _ideal(molecules: tuple[Molecule, ...], method: str) -> Liquid:
    model = IdealModel(len(molecules))
    if len(molecules) == 1:
        use = TableWeight("ideal", 1.0, "a single component has no activity coefficient but one")
        return Liquid(molecules, "ideal", model, (use,), "ideal", {}, (), ())
    use = TableWeight("ideal", 1.0, "asked for: every activity coefficient is one (Raoult's law)")
    reason = Reason(
        "ideal_solution_assumed",
        "An ideal solution was asked for. It is the yardstick, not a prediction: it holds for "
        "neighbours in a homologous series and little else.",
        "all components",
        "low",
    )
    return Liquid(molecules, method, model, (use,), "ideal", {}, (reason,), ())
