"""Every public function of `groups` says what it takes, gives and raises.

Public is what a package of `groups` lists in `__all__`, and what `api` imports. By rule such a
function has a summary; a Parameters section that names each parameter; a Returns section where
something is returned; a Raises section where the function itself raises. Every other function
without a leading underscore has at least a summary.
"""

import ast
import re
from dataclasses import dataclass
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
_SECTION = re.compile(r"^\s*(\w+)\n\s*-{3,}\s*$", re.MULTILINE)


@dataclass(frozen=True)
class Function:
    """A module-level function without leading underscore, and where it stands."""

    module: str
    node: ast.FunctionDef

    @property
    def place(self) -> str:
        return f"{self.module}.{self.node.name}"


def _module(file: Path) -> str:
    return ".".join(file.relative_to(ROOT).with_suffix("").parts).removesuffix(".__init__")


def _parsed(folder: str) -> dict[str, ast.Module]:
    files = sorted((ROOT / folder).rglob("*.py"))
    return {_module(file): ast.parse(file.read_text(encoding="utf-8")) for file in files}


GROUPS = _parsed("groups")


def _imports(tree: ast.Module) -> set[str]:
    """Full names of what a module imports from `groups`."""
    return {
        f"{node.module}.{alias.name}"
        for node in ast.walk(tree)
        if isinstance(node, ast.ImportFrom) and (node.module or "").startswith("groups")
        for alias in node.names
    }


def public_names() -> set[str]:
    """Full names, at the place of definition, of what packages re-export or `api` imports."""
    packages = {_module(f) for f in (ROOT / "groups").rglob("__init__.py")}
    names = set().union(*(_imports(GROUPS[package]) for package in packages))
    return names.union(*map(_imports, _parsed("api").values()))


FUNCTIONS = [
    Function(module, node)
    for module, tree in GROUPS.items()
    for node in tree.body
    if isinstance(node, ast.FunctionDef) and not node.name.startswith("_")
]
NAMES = public_names()
PUBLIC = [function for function in FUNCTIONS if function.place in NAMES]


def sections(docstring: str) -> set[str]:
    """Titles that are underlined."""
    return set(_SECTION.findall(docstring))


def faults(node: ast.FunctionDef) -> list[str]:
    """What the docstring of a function lacks."""
    docstring = ast.get_docstring(node) or ""
    if not docstring.strip():
        return ["no docstring"]
    titles, missing = sections(docstring), []
    arguments = [*node.args.posonlyargs, *node.args.args, *node.args.kwonlyargs]
    names = [argument.arg for argument in arguments if argument.arg not in {"self", "cls"}]
    if names and "Parameters" not in titles:
        missing.append("no Parameters section")
    elif names:
        missing += [f"'{n}' is not described" for n in names if not _described(n, docstring)]
    returned = node.returns is not None and ast.unparse(node.returns) not in {"None", "NoReturn"}
    if returned and not titles & {"Returns", "Yields"}:
        missing.append("no Returns section")
    raises = any(isinstance(inner, ast.Raise) for inner in ast.walk(node))
    if raises and "Raises" not in titles:
        missing.append("no Raises section")
    return missing


def _described(name: str, docstring: str) -> bool:
    return re.search(rf"^\s*[\w, ]*\b{re.escape(name)}\b", docstring, re.MULTILINE) is not None


def test_there_are_functions_to_look_at():
    assert len(PUBLIC) > 20


@pytest.mark.parametrize("function", PUBLIC, ids=lambda function: function.place)
def test_public_function_is_documented(function):
    assert faults(function.node) == []


def test_every_other_function_has_a_summary():
    assert [f.place for f in FUNCTIONS if not (ast.get_docstring(f.node) or "").strip()] == []


def test_the_check_finds_each_fault():
    node = ast.parse(
        'def bare(x: int, y: int) -> int:\n    """Summary."""\n    raise ValueError(x)\n'
    ).body[0]
    assert isinstance(node, ast.FunctionDef)
    assert faults(node) == ["no Parameters section", "no Returns section", "no Raises section"]
