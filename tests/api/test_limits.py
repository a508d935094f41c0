"""Limits on the size of bodies and on time, at the level of ASGI messages."""

import threading
import time
from collections.abc import AsyncIterator

import anyio
import httpx
import pytest
from fastapi import FastAPI

from api.application import create_app
from api.limits import TimeLimit
from api.problems import add_problem_handlers
from api.settings import Settings
from tests.api.problem_check import assert_problem
from tests.api.service_caller import Service

JSON = {"Content-Type": "application/json"}


def test_a_stated_length_above_the_cap_is_refused_before_the_body_is_read(small_service):
    body = b'{"molecules": ["' + b"C" * 4000 + b'"]}'
    response = small_service.call("POST", "/v1/molecules", content=body, headers=JSON)
    assert_problem(response, "body-too-large")


def test_a_body_in_chunks_is_refused_when_it_passes_the_cap(small_service):
    sent = 0

    async def chunks() -> AsyncIterator[bytes]:
        nonlocal sent
        for _ in range(1000):
            sent += 1
            yield b" " * 512

    async def go() -> httpx.Response:
        transport = httpx.ASGITransport(app=small_service.app, raise_app_exceptions=False)
        async with httpx.AsyncClient(transport=transport, base_url="http://service") as client:
            return await client.post("/v1/molecules", content=chunks(), headers=JSON)

    assert_problem(anyio.run(go), "body-too-large")
    assert sent < 10  # 2048 bytes are four chunks; the rest was never asked for


def test_a_body_at_the_cap_is_taken():
    body = b'{"molecules": ["CCO"]}'
    body += b" " * (1024 - len(body))
    service = Service(create_app(Settings(max_body_bytes=1024)))
    response = service.call("POST", "/v1/molecules", content=body, headers=JSON)
    assert response.status_code == 200


@pytest.mark.parametrize("length", ["-5", "x", "9" * 400])
def test_an_absurd_content_length_is_no_crash(small_service, length):
    headers = JSON | {"Content-Length": length}
    response = small_service.call("POST", "/v1/molecules", content=b"{}", headers=headers)
    assert 400 <= response.status_code < 500


def _slow_service(seconds: float, release: threading.Event) -> Service:
    app = FastAPI()

    @app.get("/slow")
    def slow() -> str:
        release.wait(30.0)
        return "late"

    @app.get("/fast")
    def fast() -> str:
        return "in time"

    add_problem_handlers(app)
    app.add_middleware(TimeLimit, seconds=seconds)
    return Service(app)


def test_a_request_over_the_time_limit_gets_a_problem():
    release = threading.Event()
    service = _slow_service(0.05, release)
    timer = threading.Timer(0.5, release.set)  # frees the thread, long after the limit
    timer.start()
    started = time.perf_counter()
    assert_problem(service.get("/slow"), "time-limit")
    assert time.perf_counter() - started < 20.0  # it did not wait for the 30 s of the route
    timer.join()


def test_a_request_within_the_time_limit_is_answered():
    response = _slow_service(30.0, threading.Event()).get("/fast")
    assert (response.status_code, response.json()) == (200, "in time")


@pytest.mark.parametrize(
    ("verb", "path", "slug"),
    [
        ("PUT", "/v1/health", "verb-not-allowed"),
        ("POST", "/v1/ready", "verb-not-allowed"),
        ("PUT", "/v1/molecules", "verb-not-allowed"),
        ("POST", "/v1/nowhere", "not-found"),
        ("POST", "/v1/molecules", "unsupported-media-type"),
    ],
)
def test_the_address_and_the_verb_come_before_the_media_type(service, verb, path, slug):
    assert_problem(service.call(verb, path), slug)
