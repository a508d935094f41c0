"""From fits to a parameter set: equation texts, units, and the pure components beside them."""

from collections.abc import Sequence

import numpy as np

from groups.handoff.comparisons.regression import PointFit
from groups.handoff.correlations import margules, nrtl, uniquac, van_laar, wilson
from groups.handoff.correlations.temperature_forms import form_terms
from groups.handoff.fits.answers import FittedParameter, PairFit
from groups.handoff.fits.component_constants import MolarVolumes, SizeParameters
from groups.handoff.sheets.parameter_set import (
    ComponentSheet,
    ConstantSheet,
    Number,
    PairSheet,
    ParameterSet,
)
from groups.handoff.sheets.vapour_pressure_text import vapour_pressure_text
from groups.pure import Constant, VapourPressure, constants
from groups.structure.molecule import Molecule

_EQUATIONS = {
    "nrtl": nrtl.TEXT,
    "uniquac": uniquac.TEXT,
    "wilson": wilson.TEXT,
    "van-laar": van_laar.TEXT,
    **margules.TEXT,
}
_LEFT = {
    "nrtl": "tau_ij = {}",
    "uniquac": "tau_ij = exp({})",
    "wilson": "Lambda_ij = exp({})",
    "van-laar": "A_ij = {}",
    "margules-2": "A = {}",
    "margules-3": "A_ij = {}",
}
_CAUTIONS = (
    "T is in kelvin in every term: b is in K, c has no unit with T in K inside the logarithm, d is "
    "in 1/K. Mind the order of the indices: 12 is not 21.",
    "Programs differ in the sign and the order of indices of these terms: compare the equation "
    "above with theirs before typing a number, and check ln gamma at infinite dilution.",
)


def interactions_text(name: str, form: str, *, with_volumes: bool = False) -> str:
    """How the interactions follow from the coefficients, for instance "tau_ij = a_ij + b_ij/T".

    Parameters
    ----------
    name, form : str
        Identifiers of the equation and the temperature form.
    with_volumes : bool
        True for Wilson's equation with molar volumes.

    Returns
    -------
    str

    Raises
    ------
    InvalidInputError
        If there is no such form.
    """
    index = "" if name == "margules-2" else "_ij"
    terms = [t.text.replace(t.letter, t.letter + index, 1) for t in form_terms(form)]
    text = _LEFT[name].format(" + ".join(terms))
    if with_volumes:
        text = text.replace("Lambda_ij = ", "Lambda_ij = (V_j/V_i) ")
    return f"{text}; T in K"


def parameter_set(
    fits: Sequence[PairFit],
    molecules: Sequence[Molecule],
    lines: Sequence[VapourPressure] | None,
    temperature_range_K: tuple[float, float],
    origin: str,
    *,
    predicted: bool,
    sizes: SizeParameters | None = None,
    volumes: MolarVolumes | None = None,
) -> ParameterSet:
    """Collect fits and pure components into one sheet.

    Parameters
    ----------
    fits : sequence of PairFit
        At least one, all of one equation and form.
    molecules : sequence of Molecule
    lines : sequence of VapourPressure or None
        One for each molecule, where known.
    temperature_range_K : tuple of float
        Fitted range, K.
    origin : str
        What was fitted, in words.
    predicted : bool
    sizes : SizeParameters, optional
        r and q of UNIQUAC.
    volumes : MolarVolumes, optional
        Of Wilson's equation.

    Returns
    -------
    ParameterSet
    """
    name, form = fits[0].name, fits[0].form
    extra = _extra(len(molecules), sizes, volumes)
    return ParameterSet(
        name,
        form,
        _EQUATIONS[name],
        interactions_text(name, form, with_volumes=volumes is not None),
        "K",
        temperature_range_K,
        origin,
        predicted,
        tuple(
            _component(k, molecule, None if lines is None else lines[k], extra[k])
            for k, molecule in enumerate(molecules)
        ),
        tuple(_pair(fit) for fit in fits),
        _CAUTIONS,
    )


def _pair(fit: PairFit) -> PairSheet:
    i, j = fit.pair[0] + 1, fit.pair[1] + 1
    where = fit.residual
    words = (
        f"rms {where.rms:.4f} in ln gamma, largest {where.largest:+.4f} at "
        f"{where.temperature_K:.2f} K, x_{i} = {where.x1:.3f}, "
        f"component {fit.pair[where.component] + 1}"
    )
    return PairSheet(
        i,
        j,
        tuple(_number(one, i, j, fit.name) for one in fit.parameters),
        fit.accepted,
        words,
        where.rms,
        where.largest,
        tuple(note.message for note in fit.notes),
    )


def points_parameter_set(
    fit: PointFit,
    molecules: tuple[Molecule, Molecule],
    lines: tuple[VapourPressure, VapourPressure] | None,
    temperature_range_K: tuple[float, float],
    n_points: int,
    *,
    sizes: SizeParameters | None = None,
) -> ParameterSet:
    """The sheet of an equation that was fitted to measured points.

    Parameters
    ----------
    fit : PointFit
    molecules : tuple of Molecule
    lines : tuple of VapourPressure or None
    temperature_range_K : tuple of float
        Of the points, K.
    n_points : int
    sizes : SizeParameters, optional
        r and q of UNIQUAC.

    Returns
    -------
    ParameterSet
        With `predicted` False.
    """
    words = f"{fit.weighted_rms:.2f} standard deviations of the measurements (rms)"
    if fit.folds:
        words += f"; {fit.cross_validated_rms:.2f} for points left out of the fit"
    numbers = tuple(_number(one, 1, 2, fit.name) for one in fit.parameters)
    pair = PairSheet(1, 2, numbers, True, words, None, None, ())
    extra = _extra(2, sizes, None)
    return ParameterSet(
        fit.name,
        fit.form,
        _EQUATIONS[fit.name],
        interactions_text(fit.name, fit.form),
        "K",
        temperature_range_K,
        f"{n_points} measured points",
        False,
        tuple(
            _component(k, molecule, None if lines is None else lines[k], extra[k])
            for k, molecule in enumerate(molecules)
        ),
        (pair,),
        _CAUTIONS,
    )


def _extra(
    n: int, sizes: SizeParameters | None, volumes: MolarVolumes | None
) -> list[tuple[ConstantSheet, ...]]:
    """What the equation needs of each component besides the interactions."""
    found: list[list[ConstantSheet]] = [[] for _ in range(n)]
    for k, listed in enumerate(found):
        if sizes is not None:
            for symbol, values in (("r", sizes.volumes), ("q", sizes.surfaces)):
                title = f"{symbol} (UNIQUAC)"
                listed.append(ConstantSheet(title, float(values[k]), "1", sizes.source, False))
        if volumes is not None:
            value, source = float(volumes.cm3_mol[k]), volumes.sources[k]
            listed.append(ConstantSheet("V (Wilson, 298.15 K)", value, "cm3/mol", source, False))
    return [tuple(listed) for listed in found]


def _number(one: FittedParameter, i: int, j: int, model: str) -> Number:
    """The parameter under the indices of the mixture, with what it stands for."""
    letter, _, pair = one.name.partition("_")
    first, second = (i, j) if pair == "12" else (j, i)
    error = one.standard_error
    if error is not None and not np.isfinite(error):
        error = None
    if letter == "alpha":
        meaning = "non-randomness, the same for ij and ji"
    else:
        inner = {"nrtl": "tau", "uniquac": "ln tau", "wilson": "ln Lambda"}.get(model, "A")
        meaning = f"term '{letter}' of {inner}_{first},{second}"
    return Number(f"{letter}_{first},{second}", one.value, one.unit, error, meaning)


def _component(
    k: int, molecule: Molecule, line: VapourPressure | None, extra: tuple[ConstantSheet, ...]
) -> ComponentSheet:
    known = constants(molecule)
    written = None if line is None else vapour_pressure_text(line)
    listed = [
        _constant("normal boiling temperature", known.normal_boiling_K, "K"),
        _constant("critical temperature", known.critical_temperature_K, "K"),
        _constant("critical pressure", known.critical_pressure_kPa, "kPa"),
        _constant("acentric factor", known.acentric_factor, "1"),
    ]
    return ComponentSheet(
        k + 1,
        molecule.name,
        molecule.cas,
        molecule.canonical_smiles,
        molecule.formula,
        molecule.molar_mass_g_mol,
        None if written is None else written.equation,
        () if written is None else written.numbers,
        None if line is None else line.range_K,
        None if line is None else f"{line.equation}: {line.citation}",
        (written.note or None) if written is not None else None,
        (*(one for one in listed if one is not None), *extra),
    )


def _constant(name: str, known: Constant | None, unit: str) -> ConstantSheet | None:
    if known is None:
        return None
    return ConstantSheet(name, known.value, unit, known.source, known.estimated)
