"""The audit of the published tables: ``python -m groups.parameters.audit [--write]``.

Lists every parameter pair that a rule doubts, with the reason; ``--write`` brings the merged
Dortmund table and ``tables/suspects.csv`` up to date. What it prints and writes depends only on the
files in the package.
"""

import argparse
import csv
import io
import sys
from collections import Counter
from collections.abc import Iterator, Sequence
from importlib.resources import as_file

from groups.parameters.audit_rules import (
    absurd_mixture,
    editions_disagree,
    equation_of_state_disagrees,
    exactly_zero,
    one_direction_only,
    open_data_blow_up,
    reachable_main_numbers,
    unphysical_energy,
)
from groups.parameters.editions import merged_csv
from groups.parameters.loader import METHODS, table
from groups.parameters.open_data import read_open_data
from groups.parameters.record import read_record, tables_folder
from groups.parameters.suspects import COLUMNS, SUSPECTS_FILE, Suspect

MERGED_FILE = "unifac-dortmund.interactions.csv"


def find_suspects() -> tuple[Suspect, ...]:
    """All pairs that a rule doubts.

    Returns
    -------
    tuple of Suspect
        In the order of `METHODS`, then by pair and rule.

    Raises
    ------
    DataError
        If a table or the statistics of open data cannot be read.
    """
    evidence = read_open_data()
    found: list[Suspect] = [*editions_disagree(evidence), *equation_of_state_disagrees()]
    for method in METHODS:
        found += one_direction_only(method)
        found += exactly_zero(method)
        found += unphysical_energy(method, evidence)
        found += open_data_blow_up(method, evidence)
        found += absurd_mixture(method)
    return tuple(sorted(found, key=lambda s: (METHODS.index(s.method), s.i, s.j, s.rule)))


def suspects_csv(suspects: Sequence[Suspect]) -> str:
    """Text of the list of suspects.

    Parameters
    ----------
    suspects : sequence of Suspect
        Rows in the order to be written.

    Returns
    -------
    str
        CSV with a header row.
    """
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    writer.writerows([s.method, s.i, s.j, s.rule, s.reason] for s in suspects)
    return text.getvalue()


def report(suspects: Sequence[Suspect]) -> Iterator[str]:
    """Lines of the printed audit.

    Parameters
    ----------
    suspects : sequence of Suspect
        Result of `find_suspects`.

    Yields
    ------
    str
        One line each.
    """
    per_method = Counter(suspect.method for suspect in suspects)
    for method in METHODS:
        published, record = table(method), read_record(method)
        names = dict(zip(published.main_numbers.tolist(), published.main_names, strict=True))
        yield f"{method}: {per_method[method]} suspect entries"
        for correction in record.corrections:
            change = f"{correction.transcribed} -> {correction.corrected}"
            where = f"{correction.file} {correction.key} {correction.column}"
            yield f"  corrected  {where}: {change}. {correction.reason}"
        unreached = sorted(set(names) - set(reachable_main_numbers(published)))
        if unreached:
            yield f"  unreached  main groups without a neutral subgroup: {unreached}"
        for s in suspects:
            if s.method == method:
                yield f"  {s.rule:<15} {s.i}-{s.j} {names[s.i]} / {names[s.j]}: {s.reason}"


def _write(name: str, text: str) -> None:
    with as_file(tables_folder() / name) as path:
        path.write_text(text, encoding="utf-8")


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the audit from the command line.

    Parameters
    ----------
    arguments : sequence of str, optional
        Command-line arguments; those of the process by default.

    Returns
    -------
    int
        0, or 1 where the files in the package are not those that the audit would write.
    """
    parser = argparse.ArgumentParser(prog="python -m groups.parameters.audit")
    parser.add_argument("--write", action="store_true", help="bring the files up to date")
    write = parser.parse_args(arguments).write
    suspects = find_suspects()
    wanted = {MERGED_FILE: merged_csv(), SUSPECTS_FILE: suspects_csv(suspects)}
    for line in report(suspects):
        sys.stdout.write(f"{line}\n")
    stale = [
        name
        for name, text in wanted.items()
        if (tables_folder() / name).read_text(encoding="utf-8") != text
    ]
    for name in stale:
        if write:
            _write(name, wanted[name])
        sys.stdout.write(f"{name} {'written' if write else 'is not current'}\n")
    return 0 if write or not stale else 1


if __name__ == "__main__":
    sys.exit(main())
