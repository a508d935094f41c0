"""A service in this process, called through its ASGI interface."""

import json
from typing import Any

import anyio
import httpx
from fastapi import FastAPI


class Service:
    """Calls an application as a client would; errors inside it come back as responses."""

    def __init__(self, app: FastAPI) -> None:
        self.app = app

    def call(self, verb: str, path: str, **rest: Any) -> httpx.Response:
        async def go() -> httpx.Response:
            transport = httpx.ASGITransport(app=self.app, raise_app_exceptions=False)
            async with httpx.AsyncClient(transport=transport, base_url="http://service") as client:
                return await client.request(verb, path, **rest)

        return anyio.run(go)

    def get(self, path: str, **rest: Any) -> httpx.Response:
        return self.call("GET", path, **rest)

    def post(self, path: str, body: object, accept: str = "application/json") -> httpx.Response:
        headers = {"Accept": accept, "Content-Type": "application/json"}
        return self.call("POST", path, content=json.dumps(body), headers=headers)

    def post_text(self, path: str, text: str | bytes) -> httpx.Response:
        return self.call("POST", path, content=text, headers={"Content-Type": "application/json"})
