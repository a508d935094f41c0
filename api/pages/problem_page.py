"""What each problem type means, for people."""

from collections.abc import Iterable
from html import escape

from api.pages.frame import page
from api.problem_types import ProblemType


def problem_page(kinds: Iterable[ProblemType]) -> str:
    """HTML that describes one or more problem types."""
    sections = "".join(
        f'<h2 id="{escape(kind.slug)}">{escape(kind.title)}</h2>'
        f'<p><code><a href="{escape(kind.uri)}">{escape(kind.uri)}</a></code>, '
        f"status {kind.status}.</p><p>{escape(kind.cure)}</p>"
        for kind in kinds
    )
    return page("Problems", f"<h1>Problems and their cures</h1>{sections}")
