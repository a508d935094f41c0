"""The frame that every page stands in."""

from functools import lru_cache
from html import escape
from importlib.resources import files


@lru_cache(maxsize=1)
def _frame() -> str:
    return files("api.pages").joinpath("frame.html").read_text(encoding="utf-8")


def page(title: str, body: str) -> str:
    """A whole page; `body` is HTML, `title` is text."""
    return _frame().replace("{{title}}", escape(title)).replace("{{body}}", body)
