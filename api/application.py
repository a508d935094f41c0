"""The application: routers, limits and problems put together."""

import contextlib
from collections.abc import AsyncIterator

import anyio.to_thread
from fastapi import FastAPI

from api import __version__
from api.limits import BodyGate, TimeLimit
from api.openapi_description import describe
from api.problems import add_problem_handlers
from api.routers import (
    activity,
    advice,
    comparisons,
    diagrams,
    fits,
    gas_solubility,
    liquid_regions,
    measurement_plans,
    methods,
    molecules,
    pages,
    phase_points,
    residue_curves,
    separations,
    service,
)
from api.settings import Settings


def create_app(settings: Settings | None = None) -> FastAPI:
    """A service with these settings; from the environment where none are given.

    Parameters
    ----------
    settings : Settings, optional

    Returns
    -------
    FastAPI
    """
    chosen = settings or Settings()

    @contextlib.asynccontextmanager
    async def lifespan(_app: FastAPI) -> AsyncIterator[None]:
        anyio.to_thread.current_default_thread_limiter().total_tokens = chosen.threads
        yield

    app = FastAPI(
        title="Mixwright",
        version=__version__,
        lifespan=lifespan,
        docs_url=None,
        redoc_url=None,
    )
    app.state.settings = chosen
    for module in (
        service,
        methods,
        molecules,
        activity,
        phase_points,
        diagrams,
        separations,
        liquid_regions,
        residue_curves,
        gas_solubility,
        advice,
        measurement_plans,
        fits,
        comparisons,
        pages,
    ):
        app.include_router(module.router)
    add_problem_handlers(app)
    app.add_middleware(TimeLimit, seconds=chosen.time_limit_s)
    app.add_middleware(BodyGate, max_bytes=chosen.max_body_bytes)
    describe(app)
    return app
