"""The loader gives whole tables and refuses files that do not agree with their record."""

import hashlib
import shutil
from collections.abc import Iterator
from importlib.resources import files
from pathlib import Path

import numpy as np
import pytest

from groups.errors import DataError, UnknownMethodError
from groups.parameters import METHODS, record, table
from groups.parameters.suspects import read_suspects


@pytest.fixture
def tables(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[Path]:
    """A copy of the table files that a test may spoil, read in place of the package's own."""
    copy = tmp_path / "tables"
    shutil.copytree(str(files("groups.parameters") / "tables"), copy)
    monkeypatch.setattr(record, "files", lambda _: tmp_path)
    table.cache_clear()
    read_suspects.cache_clear()
    yield copy
    table.cache_clear()
    read_suspects.cache_clear()


def spoil(folder: Path, name: str, old: str, new: str, *, sealed: bool = True) -> None:
    """Replace text in a CSV once; `sealed` also writes the new checksum into the records."""
    path = folder / name
    before = path.read_bytes()
    assert old.encode() in before
    after = before.replace(old.encode(), new.encode(), 1)
    path.write_bytes(after)
    if sealed:
        for toml in folder.glob("*.toml"):
            digests = (hashlib.sha256(text).hexdigest() for text in (before, after))
            toml.write_text(toml.read_text().replace(*digests))


@pytest.mark.parametrize("method", METHODS)
def test_a_table_fits_together(method: str) -> None:
    published = table(method)
    n_sub, n_main = len(published.subgroup_numbers), len(published.main_numbers)
    assert len(published.subgroup_names) == len(published.example_smiles) == n_sub
    assert published.R.shape == published.Q.shape == published.subgroup_main.shape == (n_sub,)
    assert published.subgroup_main.min() >= 0 and published.subgroup_main.max() < n_main
    for matrix in (published.a, published.b, published.c):
        assert matrix.shape == (n_main, n_main)
        assert np.all(np.diag(matrix) == 0)
        assert np.array_equal(np.isnan(matrix), np.isnan(published.a))
    assert 100 < published.temperature_range_K[0] < published.temperature_range_K[1] < 1000


@pytest.mark.parametrize("method", METHODS)
def test_a_table_cannot_be_changed_by_a_caller(method: str) -> None:
    with pytest.raises(ValueError, match="read-only"):
        table(method).a[0, 1] = 0.0


def test_a_table_is_read_once() -> None:
    assert table("unifac") is table("unifac")


def test_an_unknown_method_is_refused_by_name() -> None:
    with pytest.raises(UnknownMethodError, match="unifac-1066"):
        table("unifac-1066")


def test_numbers_are_turned_into_indices() -> None:
    published = table("unifac-dortmund")
    assert published.subgroup_names[published.subgroup_index(201)] == "SS"
    assert published.main_names[published.main_index(99)] == "PF6"
    with pytest.raises(DataError, match="no subgroup 202"):
        published.subgroup_index(202)
    with pytest.raises(DataError, match="no main group 100"):
        published.main_index(100)


def test_a_missing_pair_is_named_once_in_ascending_order() -> None:
    published = table("unifac")
    # CHO with ACNH2 is "n.a." in table II of Hansen et al. 1991 (from memory).
    assert published.missing_pairs([17, 10, 1, 10, 17]) == ((10, 17),)
    assert published.missing_pairs([1, 5, 7]) == ()


def test_a_pair_with_one_direction_counts_as_missing() -> None:
    published = table("unifac-nist")
    i, j = published.main_index(13), published.main_index(59)
    assert np.isnan(published.a[i, j]) and not np.isnan(published.a[j, i])
    assert published.missing_pairs([13, 59]) == ((13, 59),)


@pytest.mark.parametrize("method", ["unifac", "unifac-dortmund"])
def test_only_completed_tables_have_completed_parameters(method: str) -> None:
    fitted, whole = table(method), table(f"{method}-2.0")
    assert not fitted.completed.any()
    for m, i in enumerate(whole.main_numbers):
        for n, j in enumerate(whole.main_numbers):
            unpublished = np.isnan(fitted.a[fitted.main_index(int(i)), fitted.main_index(int(j))])
            assert whole.completed[m, n] == unpublished
    assert not np.isnan(whole.a).any()


def test_the_range_of_a_pair_is_known_where_it_is_published() -> None:
    nist = table("unifac-nist")
    assert not np.isnan(nist.pair_temperature_K[nist.main_index(1), nist.main_index(2)]).any()
    assert np.isnan(table("unifac").pair_temperature_K).all()


SPOILT = [
    ("unifac.interactions.csv", "1,2,86.02", "1,2,86.03", False, "SHA-256"),
    ("unifac.interactions.csv", "1,2,86.02\n", "", True, "rows"),
    ("unifac.interactions.csv", "1,2,86.02", "1,1,86.02", True, "diagonal"),
    ("unifac.interactions.csv", "1,2,86.02", "1,3,86.02", True, "twice"),
    ("unifac.interactions.csv", "1,2,86.02", "1,999,86.02", True, "does not exist"),
    ("unifac.interactions.csv", "1,2,86.02", "1,2,8602000", True, "outside"),
    ("unifac.interactions.csv", "1,2,86.02", "1,2,many", True, "no number"),
    ("unifac.subgroups.csv", "1,CH3,1,", "1,CH3,999,", True, "no list of main groups"),
    ("unifac.subgroups.csv", "1,CH3,1,", "one,CH3,1,", True, "no integer"),
    ("unifac.subgroups.csv", "1,CH3,1,0.9011", "1,CH3,1,9011", True, "outside"),
    ("unifac.subgroups.csv", "1,CH3,1,0.9011", "1,CH3,1,", True, "blank"),
    ("unifac.subgroups.csv", "1,CH3,1,", "2,CH3,1,", True, "ascend"),
    ("unifac.subgroups.csv", "2,CH2,1,", "2,CH3,1,", True, "stands twice"),
    ("unifac.main_groups.csv", "2,C=C", "2,CH2", True, "stands twice"),
    ("unifac.main_groups.csv", "2,C=C", "2,", True, "missing or blank"),
    ("unifac.toml", 'psi = "constant"', 'psi = "cubic"', False, "psi"),
    ("unifac.toml", 'title = "', 'heading = "', False, "'title' is missing"),
    ("unifac.toml", 'method = "unifac"', 'method = "psrk"', False, "record of 'psrk'"),
    ("unifac.toml", "[files.interactions]", "[files.others]", False, "names no file"),
    ("unifac.toml", "method =", "method", False, "cannot be read"),
    ("suspects.csv", "rule,reason", "rule,why", False, "'reason' is missing"),
]


@pytest.mark.parametrize(("name", "old", "new", "sealed", "message"), SPOILT)
def test_a_spoilt_file_is_refused(
    tables: Path, name: str, old: str, new: str, sealed: bool, message: str
) -> None:
    spoil(tables, name, old, new, sealed=sealed)
    with pytest.raises(DataError, match=message):
        table("unifac")


@pytest.mark.parametrize("name", ["unifac.toml", "unifac.subgroups.csv", "suspects.csv"])
def test_an_absent_file_is_refused(tables: Path, name: str) -> None:
    (tables / name).unlink()
    with pytest.raises(DataError, match="cannot be read"):
        table("unifac")
