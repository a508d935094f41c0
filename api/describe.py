"""`python -m api.describe` writes openapi/openapi.json; `--check` says whether it is current."""

import argparse
import json
import sys
from pathlib import Path

from api.application import create_app
from api.settings import Settings

TARGET = Path(__file__).parent.parent / "openapi" / "openapi.json"


def description() -> str:
    """The OpenAPI description as the file holds it."""
    return json.dumps(create_app(Settings()).openapi(), indent=1, ensure_ascii=False) + "\n"


def main(arguments: list[str] | None = None) -> int:
    """Write or check the file."""
    parser = argparse.ArgumentParser(prog="python -m api.describe", description=__doc__)
    parser.add_argument("--check", action="store_true", help="write nothing; fail if not current")
    current = description()
    if not parser.parse_args(arguments).check:
        TARGET.parent.mkdir(exist_ok=True)
        TARGET.write_text(current, encoding="utf-8")
        return 0
    if TARGET.is_file() and TARGET.read_text(encoding="utf-8") == current:
        return 0
    sys.stderr.write(f"{TARGET.name} is not current: run `python -m api.describe`.\n")
    return 1


if __name__ == "__main__":
    sys.exit(main())
