"""Which model to take, in words, and the region in which that holds."""

import numpy as np

from groups.handoff.comparisons.answers import ComparedModel, Recommendation
from groups.handoff.comparisons.deviations import REGIONS
from groups.handoff.comparisons.measurements import Measurements

#: A model within this many standard deviations of the points describes them.
#: Common practice, no source.
DESCRIBES = 3.0
#: A fitted model must beat the best prediction by this factor on points it has not seen.
GAIN = 0.8
LEAST_POINTS_FOR_FIT = 4
RESIDUALS_PER_PARAMETER = 3
#: AICc differences below this leave two models equally good: Burnham & Anderson, Model Selection
#: and Multimodel Inference (2002), section 2.6.
EQUAL_AICC = 2.0


def recommendation(models: tuple[ComparedModel, ...], points: Measurements) -> Recommendation:
    """Recommend a model.

    Parameters
    ----------
    models : tuple of ComparedModel
    points : Measurements

    Returns
    -------
    Recommendation
    """
    predicted = [m for m in models if m.kind == "predicted" and np.isfinite(m.weighted_rms)]
    fitted = [m for m in models if m.kind == "fitted" and m.fit is not None]
    regional = _by_region(predicted)
    if not predicted and not fitted:
        return Recommendation(None, None, (), "", "No model could be compared with the points.")
    best = min(predicted, key=lambda m: m.weighted_rms, default=None)
    trial = _best_fitted(fitted)
    if trial is not None and _worth_fitting(trial, best, points):
        return _fitted_words(trial, best, points, regional)
    if best is None:
        text = "No prediction covers these molecules, and the points are too few to fit."
        return Recommendation(None, None, regional, "", text)
    return _predicted_words(best, trial, points, regional)


def _by_region(predicted: list[ComparedModel]) -> tuple[tuple[str, str, float], ...]:
    found = []
    for k, region in enumerate(REGIONS[1:], start=1):
        usable = [m for m in predicted if np.isfinite(m.regions[k].weighted_rms)]
        if usable:
            best = min(usable, key=lambda m: m.regions[k].weighted_rms)
            found.append((region, best.name, best.regions[k].weighted_rms))
    return tuple(found)


def _best_fitted(fitted: list[ComparedModel]) -> ComparedModel | None:
    """Lowest AICc; among equals the fewest parameters, then the lowest cross-validated error."""
    scored = [(m, m.fit) for m in fitted if m.fit is not None and np.isfinite(m.fit.aicc)]
    if not scored:
        return None
    lowest = min(fit.aicc for _, fit in scored)
    near = [(m, fit) for m, fit in scored if fit.aicc <= lowest + EQUAL_AICC]
    return min(
        near, key=lambda pair: (len(pair[1].covariance), _cross(pair[1].cross_validated_rms))
    )[0]


def _cross(value: float) -> float:
    return value if np.isfinite(value) else float("inf")


def _worth_fitting(trial: ComparedModel, best: ComparedModel | None, points: Measurements) -> bool:
    assert trial.fit is not None
    seen_anew = trial.fit.cross_validated_rms
    if not _enough(trial, points) or not np.isfinite(seen_anew):
        return False
    return best is None or seen_anew < GAIN * best.weighted_rms


def _enough(trial: ComparedModel, points: Measurements) -> bool:
    """Whether the points can carry the parameters of a fit at all."""
    assert trial.fit is not None
    needed = RESIDUALS_PER_PARAMETER * len(trial.fit.covariance)
    return points.n_points >= LEAST_POINTS_FOR_FIT and len(trial.fit.residuals) >= needed


def _fitted_words(
    trial: ComparedModel,
    best: ComparedModel | None,
    points: Measurements,
    regional: tuple[tuple[str, str, float], ...],
) -> Recommendation:
    fit = trial.fit
    assert fit is not None
    holds = _range(trial, points)
    beside = ""
    if best is not None:
        beside = (
            f" The best prediction, {best.name}, misses the points by {best.weighted_rms:.1f}; "
            f"outside the measured range it is the safer guide.{_uneven(best)}"
        )
    text = (
        f"Take {trial.name} fitted to these points: it misses points left out of the fit by "
        f"{fit.cross_validated_rms:.1f} standard deviations (AICc {fit.aicc:.1f}). "
        f"It holds for {holds}.{_scatter(fit.cross_validated_rms)}{beside}"
    )
    return Recommendation(trial.name, "fitted", regional, holds, text)


def _scatter(rms: float) -> str:
    if rms <= DESCRIBES:
        return ""
    return " That is far more than their stated uncertainty: look at the points first."


def _predicted_words(
    best: ComparedModel,
    trial: ComparedModel | None,
    points: Measurements,
    regional: tuple[tuple[str, str, float], ...],
) -> Recommendation:
    good = [r.region for r in best.regions[1:] if r.weighted_rms <= DESCRIBES]
    why_no_fit = _why_no_fit(trial, points)
    where = _range(best, points)
    if not good:
        names = "; ".join(f"{region}: {name} ({rms:.1f})" for region, name, rms in regional)
        text = (
            f"No prediction describes these points within {DESCRIBES:.0f} standard deviations; the "
            f"nearest is {best.name} ({best.weighted_rms:.1f}). By region: {names}. "
            f"Also {why_no_fit}."
        )
        return Recommendation(None, None, regional, where, text)
    text = (
        f"Keep the prediction by {best.name}: it misses the points by {best.weighted_rms:.1f} "
        f"standard deviations, and {why_no_fit}. It holds for {where}.{_uneven(best)}"
    )
    return Recommendation(best.name, "predicted", regional, where, text)


def _why_no_fit(trial: ComparedModel | None, points: Measurements) -> str:
    if trial is None:
        return "the points are too few to fit an equation to"
    if not _enough(trial, points):
        return (
            f"{points.n_points} point{'s are' if points.n_points > 1 else ' is'} too few to trust "
            "an equation fitted to them"
        )
    return "no equation fitted to the points does clearly better on points left out of the fit"


def _uneven(model: ComparedModel) -> str:
    """A word where a model is good at one end and poor at another."""
    known = [r for r in model.regions[1:] if np.isfinite(r.weighted_rms)]
    good = [r for r in known if r.weighted_rms <= DESCRIBES]
    poor = [r for r in known if r.weighted_rms > DESCRIBES]
    if not good or not poor:
        return ""
    return (
        f" Mind that {model.name} is good only {' and '.join(r.region for r in good)}, and poor "
        f"{' and '.join(f'{r.region} ({r.weighted_rms:.1f})' for r in poor)}."
    )


def _range(model: ComparedModel, points: Measurements) -> str:
    """Compositions of the regions that the model describes, cut to what was measured."""
    T = points.temperatures_K
    known = [r for r in model.regions[1:] if np.isfinite(r.weighted_rms)]
    good = [r.region for r in known if r.weighted_rms <= DESCRIBES]
    good = good or [r.region for r in known]
    x = sorted({one.x1 for one in model.points})
    span = f"x1 from {x[0]:.3f} to {x[-1]:.3f}" if x else "the compositions measured"
    where = "all regions measured" if len(good) == len(known) else " and ".join(good)
    return f"{span} ({where}), {float(T.min()):.1f} to {float(T.max()):.1f} K"
