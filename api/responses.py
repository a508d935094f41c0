"""Answers in the media type that was negotiated."""

from collections.abc import Callable
from typing import TypeVar

from fastapi.responses import Response
from pydantic import BaseModel

from api.negotiation import MediaType

Answer = TypeVar("Answer", bound=BaseModel)

CSV_ALSO = {"text/csv": "as CSV with `Accept: text/csv`"}
PICTURE_ALSO = {
    "image/svg+xml": "drawn with `Accept: image/svg+xml`",
    "image/png": "or `image/png`",
}


def answer_as(
    media: MediaType, answer: Answer, as_csv: Callable[[Answer], str] | None = None
) -> Response:
    """JSON, or CSV where it was asked for and exists.

    The model is written out directly: it was built by this code, so a second validation on the
    way out would only cost time.
    """
    if media == "text/csv" and as_csv is not None:
        return Response(as_csv(answer), media_type="text/csv; charset=utf-8", headers=_VARY)
    return Response(answer.model_dump_json(), media_type="application/json", headers=_VARY)


def picture_as(media: MediaType, content: str | bytes) -> Response:
    """A picture."""
    return Response(content, media_type=media, headers=_VARY)


def text_as(media: MediaType, content: str) -> Response:
    """A text, such as a sheet, a table or an XML document."""
    return Response(content, media_type=f"{media}; charset=utf-8", headers=_VARY)


_VARY = {"Vary": "Accept"}
