"""A comparison as CSV: every measured number beside every model's."""

import csv
import io
from collections.abc import Sequence

from groups.handoff.comparisons.answers import ComparisonAnswer

POINT_COLUMNS = (
    "model",
    "kind",
    "point",
    "quantity",
    "unit",
    "temperature_K",
    "x1",
    "measured",
    "calculated",
    "difference",
)
REGION_COLUMNS = (
    "model",
    "kind",
    "region",
    "points",
    "weighted_rms",
    "quantity",
    "unit",
    "mean_absolute",
    "bias",
    "largest",
    "largest_point",
)
_DIGITS = ".8g"


def points_to_csv(answer: ComparisonAnswer) -> str:
    """Every measured number beside the calculated ones, one a line.

    Parameters
    ----------
    answer : ComparisonAnswer

    Returns
    -------
    str
        Columns as in `POINT_COLUMNS`; `difference` is calculated less measured.
    """
    rows = [
        (
            model.name,
            model.kind,
            str(one.point),
            one.quantity,
            one.unit,
            *(
                f"{value:{_DIGITS}}"
                for value in (
                    one.temperature_K,
                    one.x1,
                    one.measured,
                    one.calculated,
                    one.calculated - one.measured,
                )
            ),
        )
        for model in answer.models
        for one in model.points
    ]
    return _csv(POINT_COLUMNS, rows)


def regions_to_csv(answer: ComparisonAnswer) -> str:
    """Deviations of every model over all points and by region, one quantity a line.

    Parameters
    ----------
    answer : ComparisonAnswer

    Returns
    -------
    str
        Columns as in `REGION_COLUMNS`.
    """
    rows = [
        (
            model.name,
            model.kind,
            region.region,
            str(one.points),
            f"{region.weighted_rms:{_DIGITS}}" if region.weighted_rms >= 0.0 else "",
            one.quantity,
            one.unit,
            f"{one.mean_absolute:{_DIGITS}}",
            f"{one.bias:{_DIGITS}}",
            f"{one.largest:{_DIGITS}}",
            str(one.largest_point),
        )
        for model in answer.models
        for region in model.regions
        for one in region.deviations
    ]
    return _csv(REGION_COLUMNS, rows)


def _csv(columns: tuple[str, ...], rows: Sequence[tuple[str, ...]]) -> str:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(columns)
    writer.writerows(rows)
    return out.getvalue()
