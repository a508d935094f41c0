"""Which media type to answer in, from the Accept header (RFC 9110, section 12.5.1)."""

from collections.abc import Callable, Sequence
from typing import Literal

from fastapi import Request

from api.problem_types import RequestProblemError

MediaType = Literal[
    "application/json",
    "text/csv",
    "text/plain",
    "text/html",
    "application/xml",
    "image/svg+xml",
    "image/png",
]


def choose(accept: str | None, offered: Sequence[MediaType]) -> MediaType:
    """The offered type the caller likes best; the earlier one where it does not mind.

    Raises `RequestProblemError` (406) where the caller takes none of them.
    """
    ranges = _ranges(accept or "*/*")
    best = max(offered, key=lambda media: _quality(media, ranges))
    if _quality(best, ranges) <= 0.0:
        raise RequestProblemError(
            "not-acceptable",
            f"The answer exists as {', '.join(offered)} only.",
            cure=f"Send 'Accept: {offered[0]}'"
            + "".join(f" or '{media}'" for media in offered[1:])
            + ", or no 'Accept' at all.",
            field="Accept",
        )
    return best


def accepts(*offered: MediaType) -> Callable[[Request], MediaType]:
    """A dependency that gives the media type to answer in."""

    def negotiate(request: Request) -> MediaType:
        return choose(",".join(request.headers.getlist("accept")) or None, offered)

    return negotiate


def _ranges(accept: str) -> list[tuple[str, float]]:
    ranges = []
    for part in accept.split(","):
        name, *parameters = (piece.strip().lower() for piece in part.split(";"))
        if name:
            ranges.append((name, _weight(parameters)))
    return ranges or [("*/*", 1.0)]


def _weight(parameters: Sequence[str]) -> float:
    for parameter in parameters:
        key, _, value = parameter.partition("=")
        if key.strip() == "q":
            try:
                weight = float(value)
            except ValueError:
                return 0.0
            return min(weight, 1.0) if weight >= 0.0 else 0.0
    return 1.0


def _quality(media: str, ranges: Sequence[tuple[str, float]]) -> float:
    """The weight of the most specific range that matches."""
    family = media.partition("/")[0]
    for wanted in (media, f"{family}/*", "*/*"):
        weights = [weight for name, weight in ranges if name == wanted]
        if weights:
            return max(weights)
    return 0.0
