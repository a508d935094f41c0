"""The start page: what this is, and a boiling diagram to try."""

from html import escape
from importlib.resources import files

from api.pages.frame import page
from groups.prediction import CAUTIONS


def start_page() -> str:
    """HTML of the start page."""
    body = files("api.pages").joinpath("start.html").read_text(encoding="utf-8")
    cautions = "".join(f"<li>{escape(caution)}</li>" for caution in CAUTIONS)
    return page("Start", body.replace("{{cautions}}", cautions))
