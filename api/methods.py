"""The methods as the service lists them."""

from functools import lru_cache

from api.problem_types import RequestProblemError
from api.schemas.service import (
    DoubtedPair,
    MethodDetail,
    MethodEntry,
    SourceRecord,
    SubgroupEntry,
)
from groups.parameters import METHODS, MethodTable, method_summary, table
from groups.prediction import ALL_METHODS

_WITHOUT_TABLE = {
    "ideal": (
        "Raoult's law",
        "The yardstick: every activity coefficient is 1. It needs no groups.",
    ),
    "auto": (
        "The evidence-weighted choice",
        "Takes, for each mixture, the best-ranked published table that has every parameter and no "
        "pair under suspicion; completed tables come last. The answer says which it took.",
    ),
}
_DESCRIPTIONS = {
    "constant": "psi = exp(-a/T)",
    "quadratic": "psi = exp(-(a + b T + c T^2)/T)",
    "logarithmic": "psi = exp(-(a + b (T - T0) + c (T ln(T0/T) + T - T0))/T), T0 = 298.15 K",
}


def method_entries() -> list[MethodEntry]:
    """All methods in short."""
    return [_entry(method) for method in ALL_METHODS]


@lru_cache(maxsize=32)
def method_detail(method: str) -> MethodDetail:
    """One method in full; an unknown one is a problem of status 404."""
    if method in METHODS:
        return _table_detail(table(method))
    if method in _WITHOUT_TABLE:
        return _plain_detail(method)
    raise RequestProblemError(
        "method-not-found",
        f"There is no such method. Allowed: {', '.join(ALL_METHODS)}.",
        field="method",
    )


def _entry(method: str) -> MethodEntry:
    if method not in METHODS:
        title = _WITHOUT_TABLE[method][0]
        return MethodEntry(id=method, title=title, temperature_range_K=None)
    published = table(method)
    return MethodEntry(
        id=method,
        title=published.title,
        temperature_range_K=list(published.temperature_range_K),
    )


def _plain_detail(method: str) -> MethodDetail:
    return MethodDetail(
        id=method,
        title=_WITHOUT_TABLE[method][0],
        temperature_range_K=None,
        description=_WITHOUT_TABLE[method][1],
        sources=[],
        subgroup_count=0,
        main_group_count=0,
        pairs_with_parameters=0,
        pairs_without_parameters=0,
        pairs_completed=0,
        subgroups=[],
        suspects=[],
    )


def _table_detail(published: MethodTable) -> MethodDetail:
    summary = method_summary(published.method)
    return MethodDetail(
        **dict(_entry(published.method)),
        description=_description(published),
        sources=[SourceRecord(citation=s.citation, doi=s.doi or None) for s in summary.sources],
        subgroup_count=summary.n_subgroups,
        main_group_count=summary.n_main_groups,
        pairs_with_parameters=summary.n_pairs_with_parameters,
        pairs_without_parameters=summary.n_pairs_without_parameters,
        pairs_completed=summary.n_pairs_completed,
        subgroups=_subgroups(published),
        suspects=[
            DoubtedPair(
                main_numbers=list(pair),
                main_groups=[published.main_names[published.main_index(n)] for n in pair],
                reason=reason,
            )
            for pair, reason in sorted(summary.suspects.items())
        ],
    )


def _description(published: MethodTable) -> str:
    term = "with" if published.staverman_guggenheim else "without"
    return (
        f"Combinatorial exponent {published.combinatorial_exponent:.4g}, {term} the "
        f"Staverman-Guggenheim term; {_DESCRIPTIONS[published.psi]}."
    )


def _subgroups(published: MethodTable) -> list[SubgroupEntry]:
    return [
        SubgroupEntry(
            number=int(published.subgroup_numbers[k]),
            name=published.subgroup_names[k],
            main_number=int(published.main_numbers[main]),
            main_group=published.main_names[main],
            R=float(published.R[k]),
            Q=float(published.Q[k]),
        )
        for k, main in enumerate(published.subgroup_main)
    ]
