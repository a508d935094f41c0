"""The arrows between the packages point one way."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
GROUPS_FILES = sorted((ROOT / "groups").rglob("*.py"))
FORBIDDEN_IN_GROUPS = {"api", "fastapi", "starlette", "pydantic", "pydantic_settings", "uvicorn"}
FORBIDDEN_IN_GROUPS |= {"httpx", "matplotlib", "thermo"}

# Package of `groups` -> packages of `groups` that it must not import.
ABOVE = {
    "parameters": {
        "structure",
        "activity",
        "pure",
        "equilibrium",
        "vapour",
        "confidence",
        "prediction",
        "handoff",
    },
    "structure": {
        "activity",
        "pure",
        "equilibrium",
        "vapour",
        "confidence",
        "prediction",
        "handoff",
    },
    "activity": {"pure", "equilibrium", "vapour", "confidence", "prediction", "handoff"},
    "pure": {"activity", "equilibrium", "vapour", "confidence", "prediction", "handoff"},
    "equilibrium": {"vapour", "confidence", "prediction", "handoff"},
    "vapour": {"parameters", "confidence", "prediction", "handoff"},
    "confidence": {"vapour", "prediction", "handoff"},
    "prediction": {"handoff"},
}


def imported_modules(file: Path) -> Iterator[str]:
    """Every module that a file imports, at its top or inside a function."""
    for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{file}: a relative import hides where it points"
            yield node.module or ""
            yield from (f"{node.module}.{alias.name}" for alias in node.names)


def test_there_are_files_to_look_at():
    assert len(GROUPS_FILES) > 20


@pytest.mark.parametrize("file", GROUPS_FILES, ids=lambda f: str(f.relative_to(ROOT)))
def test_groups_imports_no_web_framework_and_not_the_api(file):
    roots = {module.partition(".")[0] for module in imported_modules(file)}
    assert not roots & FORBIDDEN_IN_GROUPS


@pytest.mark.parametrize("package", sorted(ABOVE))
def test_a_lower_package_does_not_import_a_higher_one(package):
    offences = [
        f"{file.relative_to(ROOT)} imports {module}"
        for file in sorted((ROOT / "groups" / package).rglob("*.py"))
        for module in imported_modules(file)
        if module.startswith("groups.") and module.split(".")[1] in ABOVE[package]
    ]
    assert offences == []


def test_the_check_sees_an_import_inside_a_function(tmp_path):
    file = tmp_path / "inner.py"
    file.write_text("def late():\n    from api.settings import Settings\n", encoding="utf-8")
    assert "api.settings" in set(imported_modules(file))


def test_no_plotting_state_is_shared():
    offences = [
        str(file.relative_to(ROOT))
        for file in sorted((ROOT / "api").rglob("*.py"))
        if "matplotlib.pyplot" in set(imported_modules(file))
    ]
    assert offences == []
