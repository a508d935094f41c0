"""All pairs of a mixture, one after another, and the check of the mixture made of them."""

from collections.abc import Callable
from itertools import combinations

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.equilibrium import LiquidModel
from groups.equilibrium.subset import SubsetLiquid
from groups.errors import ConvergenceError, FitRefusedError
from groups.handoff.correlations import BINARY_ONLY, CorrelativeModel, Interactions
from groups.handoff.correlations.build import equation_of, wilson_offset
from groups.handoff.correlations.temperature_forms import form_terms
from groups.handoff.fits.answers import MixtureFit, PairFit, RefusedPair, TripleCheck
from groups.handoff.fits.effects import Boiling
from groups.handoff.fits.formulation import PairConstants
from groups.handoff.fits.pair import fit_pair
from groups.handoff.fits.target import PairTarget, target_of

PairSigma = Callable[[tuple[int, int], FloatArray, FloatArray], npt.ArrayLike]
"""From a pair of indices, temperatures (t,) and x1 (m,) to what broadcasts to (t, m, 2)."""
PairLiquid = Callable[[int, int], LiquidModel]
"""The binary of two components of the mixture."""
PairBoiling = Callable[[int, int], Boiling]

#: Interior points of a triangle in steps of 1/6: ten of them.
_STEPS = 6


def fit_mixture(
    liquid: LiquidModel,
    temperature_K: FloatArray,
    x1: FloatArray,
    sigma: PairSigma,
    name: str = "nrtl",
    form: str = "a+b/T",
    *,
    alpha: float | None = 0.3,
    constants: PairConstants | None = None,
    pair_liquid: PairLiquid | None = None,
    boiling: PairBoiling | None = None,
) -> MixtureFit:
    """Fit every pair of a mixture, and compare the mixture made of them with the prediction.

    Parameters
    ----------
    liquid : LiquidModel
        The prediction, of two components or more.
    temperature_K : FloatArray of shape (t,)
    x1 : FloatArray of shape (m,)
        Grid of each pair, x1 from 0 to 1.
    sigma : callable
        Standard deviations of ln gamma, pair by pair.
    name, form, alpha
        As for `fit_pair`.
    constants : PairConstants, optional
        Of all components: arrays of shape (n_components,).
    pair_liquid : callable, optional
        The prediction for a pair alone, where that is quicker than the whole mixture.
    boiling : callable, optional
        Vapour pressures and the pressure for a pair.

    Returns
    -------
    MixtureFit
        Pairs that the equation cannot describe stand in `refused`, with the reason.

    Raises
    ------
    FitRefusedError, UnknownMethodError, ShapeError
        For a form or equation that no pair can take.
    """
    n = liquid.n_components
    fits: list[PairFit] = []
    refused: list[RefusedPair] = []
    constants = constants or PairConstants()
    for (i, j), target in _targets(liquid, temperature_K, x1, sigma):
        binary = pair_liquid(i, j) if pair_liquid else _binary(liquid, i, j)
        try:
            fits.append(
                fit_pair(
                    target,
                    binary,
                    name,
                    form,
                    alpha=alpha,
                    constants=_of_pair(constants, i, j),
                    boiling=boiling(i, j) if boiling else None,
                    pair=(i, j),
                )
            )
        except (FitRefusedError, ConvergenceError) as error:
            if n == 2 or getattr(error, "field", None) == "form":
                raise
            refused.append(RefusedPair(name, (i, j), str(error)))
    whole = None
    if not refused and (n == 2 or name not in BINARY_ONLY):
        whole = assembled(fits, n, constants)
    triples = () if whole is None else _triples(liquid, whole, temperature_K)
    return MixtureFit(tuple(fits), tuple(refused), whole, triples)


def _binary(liquid: LiquidModel, i: int, j: int) -> LiquidModel:
    return liquid if liquid.n_components == 2 else SubsetLiquid(liquid, (i, j))


def _targets(
    liquid: LiquidModel, T: FloatArray, x1: FloatArray, sigma: PairSigma
) -> list[tuple[tuple[int, int], PairTarget]]:
    """The grids of all pairs out of one evaluation of the mixture."""
    n, m = liquid.n_components, len(x1)
    pairs = list(combinations(range(n), 2))
    x = np.zeros((len(pairs), m, n))
    for k, (i, j) in enumerate(pairs):
        x[k, :, i], x[k, :, j] = x1, 1.0 - x1
    ln_gamma = liquid.ln_gamma(T[:, None], x.reshape(-1, n)).reshape(len(T), len(pairs), m, n)
    return [
        (pair, target_of(T, x1, ln_gamma[:, k][..., list(pair)], sigma(pair, T, x1)))
        for k, pair in enumerate(pairs)
    ]


def _of_pair(constants: PairConstants, i: int, j: int) -> PairConstants:
    parts = (constants.volumes, constants.surfaces, constants.molar_volumes_cm3_mol)
    return PairConstants(*(None if part is None else part[[i, j]] for part in parts))


def assembled(fits: list[PairFit], n: int, constants: PairConstants) -> CorrelativeModel:
    """The mixture made of all its pairs.

    Parameters
    ----------
    fits : list of PairFit
        One for each pair of `n` components.
    n : int
    constants : PairConstants
        Of all components.

    Returns
    -------
    CorrelativeModel
    """
    name, form = fits[0].name, fits[0].form
    coefficients = np.zeros((len(form_terms(form)), n, n))
    alpha = np.zeros((n, n))
    for fit in fits:
        i, j = fit.pair
        part = fit.model.interactions.coefficients
        coefficients[:, i, j], coefficients[:, j, i] = part[:, 0, 1], part[:, 1, 0]
        if name == "nrtl":
            alpha[i, j] = alpha[j, i] = fit.model.equation.alpha[0, 1]  # type: ignore[attr-defined]
    offset = np.zeros((n, n))
    if name == "wilson" and constants.molar_volumes_cm3_mol is not None:
        offset = wilson_offset(constants.molar_volumes_cm3_mol)
    equation = equation_of(
        name, n, alpha=alpha, volumes=constants.volumes, surfaces=constants.surfaces
    )
    return CorrelativeModel(equation, Interactions(form, coefficients, offset))


def _triples(
    predicted: LiquidModel, fitted: CorrelativeModel, T: FloatArray
) -> tuple[TripleCheck, ...]:
    """ln gamma of both inside every face of three components, over the same temperatures."""
    n = predicted.n_components
    faces = list(combinations(range(n), 3))
    if not faces:
        return ()
    inner = np.array(
        [(i, j, _STEPS - i - j) for i in range(1, _STEPS) for j in range(1, _STEPS - i)]
    )
    x = np.zeros((len(faces), len(inner), n))
    for k, face in enumerate(faces):
        x[k][:, list(face)] = inner / _STEPS
    some = T[np.unique([0, len(T) // 2, len(T) - 1])]
    flat = x.reshape(-1, n)
    change = fitted.ln_gamma(some[:, None], flat) - predicted.ln_gamma(some[:, None], flat)
    change = change.reshape(len(some), len(faces), len(inner), n)
    return tuple(
        _triple(face, change[:, k][..., list(face)], some, inner / _STEPS)
        for k, face in enumerate(faces)
    )


def _triple(face: tuple[int, ...], change: FloatArray, T: FloatArray, x: FloatArray) -> TripleCheck:
    row, column, component = np.unravel_index(int(np.argmax(np.abs(change))), change.shape)
    first, second, third = (float(value) for value in x[column])
    return TripleCheck(
        (face[0], face[1], face[2]),
        float(np.sqrt((change**2).mean())),
        float(change[row, column, component]),
        float(T[row]),
        (first, second, third),
        face[int(component)],
    )
