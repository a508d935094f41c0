"""Limits on what one request may cost: body size, media type and time. Pure ASGI."""

import asyncio
import logging

from starlette.datastructures import Headers
from starlette.exceptions import HTTPException
from starlette.routing import Match
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from api.problem_types import REQUEST_TYPES
from api.problems import ProblemResponse, problem_of

_log = logging.getLogger("mixwright")


class BodyGate:
    """Refuse bodies that are too large or not JSON, before anything reads them into memory.

    A stated length above the cap is refused at once. A body sent in chunks is counted while it
    arrives and refused when it passes the cap.
    """

    def __init__(self, app: ASGIApp, max_bytes: int) -> None:
        self.app, self.max_bytes = app, max_bytes

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        if scope["type"] != "http" or scope["method"] not in {"POST", "PUT", "PATCH"}:
            await self.app(scope, receive, send)
            return
        refusal = self._refusal(Headers(scope=scope)) if _has_route(scope) else None
        if refusal is not None:
            await refusal(scope, receive, send)
            return
        received = 0

        async def counted() -> Message:
            nonlocal received
            message = await receive()
            received += len(message.get("body", b""))
            if received > self.max_bytes:
                raise HTTPException(413, self._too_large())
            return message

        await self.app(scope, counted, send)

    def _refusal(self, headers: Headers) -> ProblemResponse | None:
        length = headers.get("content-length", "")
        if length.isdecimal() and int(length[:20]) > self.max_bytes:
            return _refused("body-too-large", self._too_large())
        media_type = headers.get("content-type", "").partition(";")[0].strip().lower()
        is_json = media_type == "application/json" or (
            media_type.startswith("application/") and media_type.endswith("+json")
        )
        if not is_json:
            got = f"'{media_type}'" if media_type else "no 'Content-Type'"
            return _refused(
                "unsupported-media-type",
                f"The body must be JSON. Got {got} instead.",
                "Content-Type",
            )
        if headers.get("content-encoding", "identity").lower() != "identity":
            return _refused(
                "unsupported-media-type", "A compressed body is not taken.", "Content-Encoding"
            )
        return None

    def _too_large(self) -> str:
        return f"The body is larger than {self.max_bytes} bytes, the most this service takes."


def _has_route(scope: Scope) -> bool:
    """Whether the address takes the verb; where it does not, that is the better answer."""
    return any(route.matches(scope)[0] is Match.FULL for route in scope["app"].routes)


class TimeLimit:
    """Answer with a problem when a request takes too long.

    A computing thread cannot be interrupted. It is left to finish and its answer is dropped; the
    caps on points and lists bound how long that can be.
    """

    def __init__(self, app: ASGIApp, seconds: float) -> None:
        self.app, self.seconds = app, seconds
        self._abandoned: set[asyncio.Task[None]] = set()

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return
        started = expired = False

        async def send_in_time(message: Message) -> None:
            nonlocal started
            if not expired:
                started = True
                await send(message)

        task = asyncio.ensure_future(_run(self.app, scope, receive, send_in_time))
        try:
            await asyncio.wait({task}, timeout=self.seconds)
            if not task.done() and started:
                await task  # the answer is computed and under way: let it finish
        except asyncio.CancelledError:
            task.cancel()
            raise
        if task.done():
            task.result()
            return
        expired = True
        self._abandon(task)
        detail = f"The request was not answered within {self.seconds:g} s."
        await _refused("time-limit", detail)(scope, receive, send)

    def _abandon(self, task: asyncio.Task[None]) -> None:
        self._abandoned.add(task)
        task.add_done_callback(self._forget)

    def _forget(self, task: asyncio.Task[None]) -> None:
        self._abandoned.discard(task)
        if not task.cancelled() and task.exception() is not None:
            _log.error("A request failed after its time limit", exc_info=task.exception())


async def _run(app: ASGIApp, scope: Scope, receive: Receive, send: Send) -> None:
    await app(scope, receive, send)


def _refused(slug: str, detail: str, field: str | None = None) -> ProblemResponse:
    return ProblemResponse(problem_of(REQUEST_TYPES[slug], detail, field=field))
