"""Which class of property method a mixture needs, decided by computation for this very mixture."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations
from typing import Literal

import numpy as np

from groups.activity.choice import OnMissing
from groups.arrays import BoolArray, FloatArray
from groups.confidence import Confidence, graded
from groups.confidence.chemistry_rules import chemistry_reasons
from groups.confidence.labels import label
from groups.equilibrium import States, System, azeotropes, binary_split
from groups.equilibrium.subset import SubsetLiquid
from groups.errors import MixwrightError, OutOfRangeError, ShapeError
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.checks import check_components, check_pressures, check_temperatures
from groups.prediction.component import Component
from groups.prediction.ideality_costs import (
    Cost,
    SolutionJudged,
    boiling_states,
    compositions,
    judge_solution,
    judge_vapour,
    vapour_cost,
)
from groups.prediction.state_equation import EQUATION_OF_STATE, state_equation
from groups.structure.molecule import Molecule
from groups.vapour import VapourChoice, real_vapour

#: What an ideal gas or an ideal solution may cost before a flowsheet should give it up: about the
#: scatter between good sets of measurements. Common practice, no source. (The calculations here
#: take a real vapour sooner: it costs them nothing.)
TOLERATED = Cost(0.03, 0.02, 0.10)
#: A component above its critical temperature counts as a dissolved gas below this pressure, where
#: Henry's law holds. Common practice, no source.
HENRY_KPA = 1000.0
#: Heavier molecules are polymers for a property method. Common practice, no source.
LARGE_G_MOL = 500.0
MOST_COMPONENTS, MOST_AZEOTROPE_COMPONENTS = 10, 4

FlowsheetClass = Literal[
    "ideal",
    "activity coefficients, ideal vapour",
    "activity coefficients, real vapour",
    "activity coefficients, Henry's law for gases",
    "equation of state",
    "out of scope",
]


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing found out about the mixture: a stable code, and words."""

    code: str
    message: str


@dataclass(frozen=True, slots=True)
class AdviceAnswer:
    """What the mixture needs, why, and what each simplification would cost."""

    components: tuple[Molecule, ...]
    temperature_K: tuple[float, float]
    pressure_kPa: tuple[float, float]
    boils_within: bool  # some liquid boils inside both ranges
    vapour: Literal["ideal gas", "real gas"]
    liquid: Literal["ideal solution", "real solution"]
    compressibility: tuple[float, float]
    largest_ln_phi: float
    solution: SolutionJudged
    ideal_gas_cost: Cost
    ideal_solution_cost: Cost
    associating: tuple[str, ...]
    supercritical: tuple[str, ...]
    azeotropes: int | None  # None where there are too many components to look
    splits: tuple[tuple[str, str], ...]
    out_of_scope: tuple[Finding, ...]
    method: str
    vapour_model: Literal["ideal", "virial", "psrk"]
    flowsheet_class: FlowsheetClass
    findings: tuple[Finding, ...]
    confidence: Confidence


def advice(
    components: Sequence[Component],
    *,
    temperature_K: tuple[float, float],
    pressure_kPa: tuple[float, float],
    mole_fractions: Sequence[Sequence[float]] | None = None,
    on_missing: OnMissing = "estimate",
) -> AdviceAnswer:
    """Which class of property method a mixture needs, and what simpler ones would cost.

    Parameters
    ----------
    components : sequence of Component, 2 to 10
    temperature_K, pressure_kPa : tuple of float
        Lowest and highest.
    mole_fractions : sequence of pairs of float, optional
        Lowest and highest mole fraction of each component in the liquid; 0 to 1 where left out.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    AdviceAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    `groups.prediction.ideality_costs`; limits are common practice, no source.
    """
    molecules = tuple(component.molecule for component in components)
    check_components(molecules, least=2, most=MOST_COMPONENTS)
    T, P = _range("temperature_K", temperature_K), _range("pressure_kPa", pressure_kPa)
    liquids = compositions(*_bounds(mole_fractions, len(molecules)))
    if not len(liquids):
        raise ShapeError(
            "The ranges of 'mole_fractions' leave no composition: they must hold one that sums "
            "to 1.",
            cure="Widen the ranges.",
            field="mole_fractions",
        )
    middle = float(np.sqrt(P[0] * P[1]))
    mixture = boiling_mixture(components, "auto", on_missing, pressure_kPa=middle)
    states, within = boiling_states(mixture.system, liquids, T, P)
    # Without a boiling state inside, the vapours that may stand at these temperatures are judged.
    near = (states.temperature_K >= T[0] - 1e-6) & (states.temperature_K <= T[1] + 1e-6)
    rows = within if within.any() else near
    if not rows.any():
        raise ShapeError(
            "No liquid of these components boils anywhere near these ranges.",
            cure="Widen the ranges of temperature and pressure.",
            field="temperature_K",
        )
    real, _ = real_vapour(molecules, mixture.lines)
    choice, ln_phi = judge_vapour(real, states, rows)
    solution = judge_solution(mixture.liquid.model, mixture.system, states, rows)
    system = System(mixture.liquid.model, mixture.lines, vapour=real)
    judged = _Judged(mixture, system, choice, solution, states, rows, T, P)
    return _answer(judged, bool(within.any()), real.associating, ln_phi, middle)


@dataclass(frozen=True, slots=True)
class _Judged:
    """What was computed, for the verdict."""

    mixture: BoilingMixture
    real: System
    choice: VapourChoice
    solution: SolutionJudged
    states: States
    rows: BoolArray
    T: tuple[float, float]
    P: tuple[float, float]

    @property
    def names(self) -> list[str]:
        return [label(molecule) for molecule in self.mixture.liquid.molecules]

    @property
    def ideal_solution(self) -> bool:
        return self.solution.cost.within(TOLERATED)

    @property
    def ideal_gas(self) -> bool:
        return self.choice.kind != "psrk" and vapour_cost(self.choice).within(TOLERATED)


def _answer(
    judged: _Judged, within: bool, associating: BoolArray, ln_phi: float, middle_kPa: float
) -> AdviceAnswer:
    molecules = judged.mixture.liquid.molecules
    names = judged.names
    dimers = tuple(n for n, forms in zip(names, associating, strict=True) if forms)
    gases = _supercritical(judged)
    scope = _out_of_scope(molecules)
    found = _azeotropes(judged, middle_kPa)
    splits = _splits(judged)
    method, vapour, flowsheet, why = _verdict(judged, dimers, gases, scope, bool(splits))
    findings = [
        *([] if within else [_NOTHING_BOILS]),
        *_vapour_findings(judged, dimers, gases, ln_phi),
        *_liquid_findings(judged, found, splits),
        *scope,
        why,
    ]
    states, rows = judged.states, judged.rows
    reasons = judged.mixture.liquid.reasons(states.temperature_K[rows], states.liquid[rows])
    return AdviceAnswer(
        molecules,
        judged.T,
        judged.P,
        within,
        "ideal gas" if judged.ideal_gas else "real gas",
        "ideal solution" if judged.ideal_solution else "real solution",
        judged.choice.compressibility_range,
        ln_phi,
        judged.solution,
        vapour_cost(judged.choice),
        judged.solution.cost,
        dimers,
        gases,
        found,
        splits,
        scope,
        method,
        vapour,
        flowsheet,
        tuple(findings),
        graded(reasons, judged.mixture.liquid.evidence),
    )


def _verdict(
    judged: _Judged,
    dimers: tuple[str, ...],
    gases: tuple[str, ...],
    scope: Sequence[Finding],
    splits: bool,
) -> tuple[str, Literal["ideal", "virial", "psrk"], FlowsheetClass, Finding]:
    """Method and vapour here, class for a flowsheet, and why."""
    kind = judged.choice.kind
    dense = kind == "psrk" or (bool(gases) and judged.P[1] > HENRY_KPA)
    if scope:
        vapour: Literal["ideal", "virial"] = "ideal" if judged.ideal_gas else "virial"
        text = (
            "No method here holds what these components do to each other. Use an electrolyte or "
            "polymer model fitted to measurements; numbers from here are no guide."
        )
        return "auto", vapour, "out of scope", Finding("recommended", text)
    if dense and not dimers and _by_state_equation(judged):
        text = (
            "Take an equation of state with a mixing rule of excess-energy type (here: psrk): the "
            "vapour is too dense for a virial equation, or a component is a gas under pressure."
        )
        return EQUATION_OF_STATE, "psrk", "equation of state", Finding("recommended", text)
    if gases:
        text = (
            f"Take activity coefficients for the solvents and Henry's constants for "
            f"{', '.join(gases)} (here: psrk gives both, POST /v1/gas-solubility the constants)."
        )
        able = _by_state_equation(judged)
        method, model = (EQUATION_OF_STATE, "psrk") if able else ("auto", "virial")
        flowsheet: FlowsheetClass = "activity coefficients, Henry's law for gases"
        return method, "psrk" if model == "psrk" else "virial", flowsheet, _recommended(text)
    if not judged.ideal_gas:
        text = (
            "Take an activity-coefficient model with a real vapour: a virial equation"
            + (
                " with chemical association (Hayden-O'Connell type, or dimers as here), without "
                "which the acid's volatility is wrong."
                if dimers
                else " (Hayden-O'Connell type, or as here), which the pressure calls for."
            )
            + (
                " The pressure goes beyond the range of the virial equation; no equation of state "
                "here holds dimers."
                if kind == "psrk"
                else ""
            )
        )
        return "auto", "virial", "activity coefficients, real vapour", _recommended(text)
    if judged.ideal_solution:
        text = "Raoult's law will do: neither phase departs from ideality by what would be seen."
        return "ideal", "ideal", "ideal", _recommended(text)
    models = "NRTL or UNIQUAC" if splits else "NRTL, UNIQUAC or Wilson"
    text = (
        f"Take an activity-coefficient model ({models} fitted to measurements, or to these "
        "predictions by POST /v1/fits) with an ideal vapour."
    )
    return "auto", "ideal", "activity coefficients, ideal vapour", _recommended(text)


def _recommended(text: str) -> Finding:
    return Finding("recommended", text)


def _by_state_equation(judged: _Judged) -> bool:
    try:
        state_equation(judged.mixture.liquid.molecules)
    except MixwrightError:
        return False
    return True


def _supercritical(judged: _Judged) -> tuple[str, ...]:
    """Components above their critical temperature somewhere in the range."""
    critical = [line.critical_temperature_K for line in judged.mixture.lines]
    return tuple(
        name
        for name, Tc in zip(judged.names, critical, strict=True)
        if Tc is not None and judged.T[1] > Tc
    )


def _out_of_scope(molecules: Sequence[Molecule]) -> tuple[Finding, ...]:
    found = [
        Finding("electrolytes", reason.message)
        for reason in chemistry_reasons(molecules)
        if reason.code in ("acid_with_base", "ionises")
    ]
    found += [
        Finding(
            "polymer_like",
            f"{label(m)} ({m.molar_mass_g_mol:.0f} g/mol) is larger than what the tables were "
            "fitted to; a polymer model treats the free volume that they leave out.",
        )
        for m in molecules
        if m.molar_mass_g_mol > LARGE_G_MOL
    ]
    return tuple(found)


def _azeotropes(judged: _Judged, pressure_kPa: float) -> int | None:
    if judged.real.n_components > MOST_AZEOTROPE_COMPONENTS:
        return None
    system = judged.mixture.system if judged.ideal_gas else judged.real
    return len(azeotropes(system, pressure_kPa=pressure_kPa))


def _splits(judged: _Judged) -> tuple[tuple[str, str], ...]:
    """Pairs that split at either end of the temperature range."""
    names, model = judged.names, judged.mixture.liquid.model
    found = []
    for i, j in combinations(range(len(names)), 2):
        pair = SubsetLiquid(model, (i, j))
        if any(binary_split(pair, T) is not None for T in judged.T):
            found.append((names[i], names[j]))
    return tuple(found)


def _vapour_findings(
    judged: _Judged, dimers: tuple[str, ...], gases: tuple[str, ...], ln_phi: float
) -> list[Finding]:
    choice = judged.choice
    low, high = choice.compressibility_range
    text = f"The largest |ln phi| is {ln_phi:.3f}, Z runs from {low:.3f} to {high:.3f}. "
    found = [Finding("vapour", text + choice.reason)]
    if dimers:
        text = f"{', '.join(dimers)}: molecules pair up in the vapour even far below 1 atm."
        found.append(Finding("association", text))
    if gases:
        text = (
            f"{', '.join(gases)}: above the critical temperature somewhere in the range, so there "
            "is no pure liquid and no vapour pressure to start from."
        )
        found.append(Finding("supercritical", text))
    return found


def _liquid_findings(
    judged: _Judged, azeotropes_found: int | None, splits: tuple[tuple[str, str], ...]
) -> list[Finding]:
    solution, cost = judged.solution, judged.solution.cost
    found = [
        Finding(
            "liquid",
            f"The largest |ln gamma| is {solution.largest_ln_gamma:.2f} "
            f"({judged.names[solution.component]}), |gE/RT| reaches "
            f"{solution.largest_excess_gibbs_RT:.3f}, and a relative volatility changes by a "
            f"factor of {solution.volatility_ratio:.3g} over the range. An ideal solution would "
            f"miss the pressure by up to {cost.pressure:.1%}, the vapour composition by up to "
            f"{cost.vapour:.3f} and a relative volatility by up to "
            f"{cost.relative_volatility:.0%}.",
        )
    ]
    if azeotropes_found:
        text = f"{azeotropes_found} azeotrope{'s' if azeotropes_found > 1 else ''} at the middle "
        found.append(Finding("azeotropes", text + "pressure: no ideal solution forms one."))
    if splits:
        pairs = ", ".join(f"{one}/{other}" for one, other in splits)
        text = (
            f"Two liquids form from {pairs}: take a model that can split (not Wilson), and flash "
            "with three phases."
        )
        found.append(Finding("liquid_splits", text))
    return found


_NOTHING_BOILS = Finding(
    "nothing_boils_within",
    "No liquid of this mixture boils inside both ranges; the vapours over boiling liquids at these "
    "temperatures were judged.",
)


def _range(name: str, given: tuple[float, float]) -> tuple[float, float]:
    """Lowest and highest of a temperature or pressure."""
    if len(given) != 2:
        raise ShapeError(
            f"The '{name}' must be two numbers, the lowest and the highest.",
            cure="Give the same number twice for a single condition.",
            field=name,
        )
    check = check_temperatures if name == "temperature_K" else check_pressures
    low, high = (float(value) for value in check(given))
    if low > high:
        raise OutOfRangeError(name, high, low, np.inf, field=f"{name}[1]")
    return low, high


def _bounds(given: Sequence[Sequence[float]] | None, n: int) -> tuple[FloatArray, FloatArray]:
    """Lowest and highest mole fractions of each component."""
    if given is None:
        return np.zeros(n), np.ones(n)
    if len(given) != n or any(len(pair) != 2 for pair in given):
        raise ShapeError(
            f"The 'mole_fractions' must be {n} pairs, lowest and highest of each component.",
            cure="Give one pair a component, in the order of 'components'.",
            field="mole_fractions",
        )
    bounds = np.asarray(given, dtype=float)
    for k, (low, high) in enumerate(bounds.tolist()):
        for value in (low, high):
            if not 0.0 <= value <= 1.0:
                raise OutOfRangeError(
                    "mole_fractions", value, 0.0, 1.0, field=f"mole_fractions[{k}]"
                )
        if low > high:
            raise OutOfRangeError("mole_fractions", high, low, 1.0, field=f"mole_fractions[{k}][1]")
    return bounds[:, 0], bounds[:, 1]
