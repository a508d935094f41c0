"""`mixwright groups` and `mixwright methods`."""

import argparse
from pathlib import Path

from api.commands.quantities import molecule
from api.commands.text import aligned, named, wrapped
from api.groups_out import molecule_result
from api.methods import method_detail, method_entries
from api.schemas.molecule import GroupAssignment, MoleculeResult
from api.schemas.service import MethodDetail, MethodsResponse
from groups.errors import UnknownMethodError
from groups.parameters import METHODS
from groups.prediction import ALL_METHODS, assign_groups
from groups.structure.depiction import depict


def groups_of(given: argparse.Namespace) -> str:
    """The groups of one molecule by one or several methods."""
    asked = molecule(given.molecule)
    methods = list(dict.fromkeys(given.method or METHODS))
    [assignments] = assign_groups([asked], methods)
    if given.picture is not None:
        Path(given.picture).write_text(depict(asked, assignments[methods[0]]), encoding="utf-8")
    result = molecule_result(asked, assignments)
    return result.model_dump_json(indent=2) if given.json else _groups_text(result)


def _groups_text(result: MoleculeResult) -> str:
    head = f"{named(result)}, {result.formula}, {result.molar_mass_g_mol:.3f} g/mol"
    cas = f", CAS {result.cas}" if result.cas else ""
    parts = [f"{method}\n{_assignment(a)}" for method, a in result.assignments.items()]
    return "\n\n".join([head + cas, *parts])


def _assignment(assignment: GroupAssignment) -> str:
    rows = [
        [
            group.count,
            group.subgroup,
            group.number,
            group.main_group,
            " ".join(",".join(map(str, atoms)) for atoms in group.atoms),
        ]
        for group in assignment.groups
    ]
    text = aligned(["count", "subgroup", "number", "main group", "atoms"], rows) if rows else ""
    if assignment.complete:
        return text
    atoms = ", ".join(map(str, assignment.unassigned_atoms))
    why = f"Not covered: atoms {atoms}. {assignment.explanation or ''}"
    return f"{text}\n{wrapped(why)}".strip()


def methods_of(given: argparse.Namespace) -> str:
    """All methods, or one in full."""
    if given.method is None:
        entries = method_entries()
        if given.json:
            return MethodsResponse(default="auto", methods=entries).model_dump_json(indent=2)
        rows = [[entry.id, _range(entry.temperature_range_K), entry.title] for entry in entries]
        return aligned(["method", "T / K", "title"], rows)
    if given.method not in ALL_METHODS:
        raise UnknownMethodError(given.method, ALL_METHODS)
    detail = method_detail(given.method)
    return detail.model_dump_json(indent=2) if given.json else _method_text(detail)


def _range(bounds: list[float] | None) -> str:
    return "-" if bounds is None else f"{bounds[0]:.0f}-{bounds[1]:.0f}"


def _method_text(detail: MethodDetail) -> str:
    parts = [f"{detail.id}: {detail.title}", wrapped(detail.description)]
    if detail.subgroup_count:
        parts.append(
            f"{detail.subgroup_count} subgroups in {detail.main_group_count} main groups; "
            f"{detail.pairs_with_parameters} pairs with parameters, "
            f"{detail.pairs_without_parameters} without; {_range(detail.temperature_range_K)} K"
        )
        parts.append("\n".join(wrapped(source.citation, "Source: ") for source in detail.sources))
        rows = [[s.number, s.name, s.main_group, s.R, s.Q] for s in detail.subgroups]
        parts.append(aligned(["number", "subgroup", "main group", "R", "Q"], rows))
    for pair in detail.suspects:
        parts.append(wrapped(pair.reason, f"Suspect {' / '.join(pair.main_groups)}: "))
    return "\n\n".join(parts)
