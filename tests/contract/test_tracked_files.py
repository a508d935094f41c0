"""Tracked files hold nothing of the machine they were written on."""

import re
import subprocess
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]

# Each pattern is split so that this file does not match itself.
FORBIDDEN = {
    "a path of one machine": re.compile(
        r"(?<![\w.])/(?:wo" r"rk|tmp/v|ro" r"ot|home/(?!mixwright))\b"
    ),
    "a private host": re.compile(
        r"https?://(?:10\.|192\.168\.|[\w.-]+\.(?:inter" r"nal|lo" r"cal)\b)"
    ),
    "an index of packages": re.compile(r"--(?:extra-)?index-" r"url|regis" r"try\.np" r"m"),
}


def tracked_files() -> list[Path]:
    """Files under version control; every file outside a repository (an unpacked archive)."""
    found = subprocess.run(
        ["git", "ls-files", "-z"], cwd=ROOT, capture_output=True, text=True, check=False
    )
    names = found.stdout.split("\0") if found.returncode == 0 else []
    listed = [ROOT / name for name in names if name]
    return listed or [p for p in ROOT.rglob("*") if p.is_file() and not _generated(p)]


def _generated(path: Path) -> bool:
    parts = path.relative_to(ROOT).parts
    return any(p.startswith(".") and p != ".ci" for p in parts) or any(
        p in {"__pycache__", "build", "dist"} or p.endswith(".egg-info") for p in parts
    )


def test_there_are_files_to_look_at():
    assert len(tracked_files()) > 30


@pytest.mark.parametrize("what", sorted(FORBIDDEN))
def test_tracked_files_hold_nothing_of_one_machine(what):
    offences = []
    for path in tracked_files():
        if not path.is_file():
            continue
        text = path.read_bytes().decode("utf-8", "ignore")
        offences += [
            f"{path.relative_to(ROOT)}: {match.group()}" for match in FORBIDDEN[what].finditer(text)
        ]
    assert offences == []


def test_the_patterns_find_what_they_should():
    assert FORBIDDEN["a path of one machine"].search("see /" + "work/plan")
    assert FORBIDDEN["a path of one machine"].search("/tmp" + "/v/bin/python")
    assert not FORBIDDEN["a path of one machine"].search("artwork/plan")
    assert FORBIDDEN["a private host"].search("http://" + "10.0.0.1/simple")
    assert FORBIDDEN["an index of packages"].search("pip --index-" + "url x")
