"""What can be checked of the image without a container engine."""

import ast
import re
from pathlib import Path

from api.settings import Settings

ROOT = Path(__file__).parents[2]
DOCKERFILE = (ROOT / "docker" / "Dockerfile").read_text(encoding="utf-8")
COMPOSE = (ROOT / "docker" / "compose.yaml").read_text(encoding="utf-8")


def instructions() -> list[tuple[str, str]]:
    """(instruction, rest) of the Dockerfile, continued lines joined."""
    joined = re.sub(r"\\\n", " ", DOCKERFILE)
    lines = [line for line in joined.splitlines() if line.strip() and not line.startswith("#")]
    return [(line.split(None, 1)[0], line.split(None, 1)[1]) for line in lines]


def test_the_image_is_made_in_two_stages_from_a_slim_base():
    bases = [rest for name, rest in instructions() if name == "FROM"]
    assert len(bases) == 2
    assert all(base.startswith("python:3.12-slim") for base in bases)


def test_the_dependencies_are_installed_before_the_code_is_copied():
    steps = [f"{name} {rest}" for name, rest in instructions()]
    install = next(k for k, step in enumerate(steps) if "-r dependencies.txt" in step)
    code = min(k for k, step in enumerate(steps) if step.startswith(("COPY api", "COPY groups")))
    assert install < code


def test_every_copied_path_exists():
    for name, rest in instructions():
        if name == "COPY" and not rest.startswith("--from"):
            *sources, _target = rest.split()
            assert all((ROOT / source).exists() for source in sources), rest


def test_the_process_does_not_run_as_root():
    names = [name for name, _ in instructions()]
    user = next(rest for name, rest in instructions() if name == "USER")
    assert user not in {"root", "0"}
    assert names.index("USER") < names.index("CMD")


def test_the_health_check_compiles():
    check = next(rest for name, rest in instructions() if name == "HEALTHCHECK")
    command = ast.literal_eval(check[check.index("[") :])
    assert command[:2] == ["python", "-c"]
    compile(command[2], "health check", "exec")
    assert "/v1/health" in command[2]


def test_every_variable_is_a_setting():
    named = set(re.findall(r"MIXWRIGHT_(\w+?)(?=[=:'\"\]])", DOCKERFILE + COMPOSE))
    assert {"HOST", "PORT", "WORKERS"} <= named
    assert {name.lower() for name in named} <= set(Settings.model_fields)


def test_the_compose_file_builds_this_dockerfile():
    assert "\t" not in COMPOSE  # YAML allows no tabs for indentation
    assert re.search(r"^\s+dockerfile: docker/Dockerfile$", COMPOSE, re.MULTILINE)
    assert re.search(r"^\s+context: \.\.$", COMPOSE, re.MULTILINE)
