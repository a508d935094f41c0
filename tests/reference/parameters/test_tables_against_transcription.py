"""Every number is that of the reference library's tables, but for the recorded corrections."""

from collections.abc import Mapping

import numpy as np
import pytest
import thermo.unifac as library

from groups.parameters import METHODS, MethodTable, read_record, table
from groups.parameters.editions import read_edition

# Method: names of the subgroup and the interaction tables in the reference library.
TABLES = {
    "unifac": ("UFSG", "UFIP"),
    "unifac-lle": ("LLEUFSG", "LLEUFIP"),
    "unifac-lyngby": ("LUFSG", "LUFIP"),
    "unifac-nist": ("NISTUFSG", "NISTUFIP"),
    "unifac-2.0": ("UFSG", "UF2IP"),
    "unifac-dortmund-2.0": ("DOUFSG", "DOUF2IP"),
    "psrk": ("PSRKSG", "PSRKIP"),
    "unifac-dortmund": ("DOUFSG", ""),
}
Changes = set[tuple[str, str, str, str, str]]


def interactions(name: str) -> dict[tuple[int, int], tuple[float, ...]]:
    """Directed pairs of a table of the reference library, without its diagonal."""
    library.load_unifac_ip()
    pairs = {}
    for i, row in getattr(library, name).items():
        for j, value in row.items():
            if i != j:
                a_b_c = value if isinstance(value, tuple) else (value, 0.0, 0.0)
                pairs[i, j] = tuple(float(number) for number in a_b_c)
    return pairs


def subgroup_changes(published: MethodTable, theirs: Mapping[int, object]) -> Changes:
    """Subgroup entries that differ, in the words of a correction."""
    assert set(theirs) == set(published.subgroup_numbers.tolist())
    changes: Changes = set()
    for k, number in enumerate(published.subgroup_numbers.tolist()):
        group = theirs[number]
        ours = {
            "main_number": int(published.main_numbers[published.subgroup_main[k]]),
            "R": published.R[k],
            "Q": published.Q[k],
        }
        other = {"main_number": "main_group_id", "R": "R", "Q": "Q"}
        for column, value in ours.items():
            transcribed = getattr(group, other[column])
            if value != transcribed:
                texts = f"{transcribed:g}", f"{value:g}"
                changes.add(("subgroups", str(number), column, *texts))
    return changes


def interaction_changes(
    published: MethodTable, theirs: Mapping[tuple[int, int], tuple[float, ...]]
) -> Changes:
    """Interaction entries that differ, in the words of a correction."""
    numbers = published.main_numbers.tolist()
    given = {
        (i, j)
        for k, i in enumerate(numbers)
        for m, j in enumerate(numbers)
        if i != j and not np.isnan(published.a[k, m])
    }
    assert given == set(theirs)
    changes: Changes = set()
    for (i, j), transcribed in theirs.items():
        at = published.main_index(i), published.main_index(j)
        for column, was in zip("abc", transcribed, strict=True):
            value = getattr(published, column)[at]
            if value != was:
                changes.add(("interactions", f"{i},{j}", column, f"{was:g}", f"{value:g}"))
    return changes


def test_every_method_is_compared() -> None:
    assert set(TABLES) == set(METHODS)


@pytest.mark.parametrize("method", [m for m in METHODS if m != "unifac-dortmund"])
def test_a_table_differs_from_the_transcription_by_its_recorded_corrections_only(
    method: str,
) -> None:
    subgroups, pairs = TABLES[method]
    published = table(method)
    changes = subgroup_changes(published, getattr(library, subgroups))
    changes |= interaction_changes(published, interactions(pairs))
    recorded = {
        (c.file, c.key, c.column, c.transcribed, c.corrected)
        for c in read_record(method).corrections
    }
    assert changes == recorded


def test_the_dortmund_subgroups_are_those_of_the_transcription() -> None:
    assert subgroup_changes(table("unifac-dortmund"), library.DOUFSG) == set()
    assert read_record("unifac-dortmund").corrections == ()


@pytest.mark.parametrize("edition", ["2006", "2016"])
def test_each_edition_of_the_dortmund_table_is_that_of_the_transcription(edition: str) -> None:
    ours = {
        pair: tuple(float(text) for text in texts) for pair, texts in read_edition(edition).items()
    }
    assert ours == interactions(f"DOUFIP{edition}")


def test_the_nist_interactions_of_cl_groups_follow_the_dortmund_numbering() -> None:
    """The correction of CCl4 and ACCl: their columns resemble Dortmund's 24 and 25, not 52, 53."""
    nist, dortmund = table("unifac-nist"), table("unifac-dortmund")

    def resemblance(theirs: int, ours: int) -> float:
        points = []
        for number in range(1, 50):
            if number in (24, 25):
                continue
            i, k = dortmund.main_index(number), dortmund.main_index(theirs)
            m, n = nist.main_index(number), nist.main_index(ours)
            for p, q in (((i, k), (m, n)), ((k, i), (n, m))):
                points.append(
                    [t.a[s] / 330 + t.b[s] + 330 * t.c[s] for t, s in ((dortmund, p), (nist, q))]
                )
        both = np.array([p for p in points if not np.isnan(p).any()])
        return float(np.corrcoef(np.clip(both, -6, 6).T)[0, 1])  # beyond 6, psi is 0 or absurd

    assert resemblance(24, 24) > resemblance(24, 52)
    assert resemblance(25, 25) > resemblance(25, 53)
    assert resemblance(52, 52) > resemblance(52, 24)
    assert resemblance(53, 53) > resemblance(53, 25)
