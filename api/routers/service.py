"""Is the process alive, and can it compute."""

from fastapi import APIRouter

from api import __version__
from api.documentation import problem_responses
from api.readiness import ready_methods
from api.schemas.service import Health, Readiness

router = APIRouter(prefix="/v1", tags=["service"])


@router.get("/health", operation_id="health", summary="Is the process alive")
async def health() -> Health:
    """Answers as long as the process runs, even while every thread computes."""
    return Health(status="ok", version=__version__)


@router.get(
    "/ready",
    operation_id="ready",
    summary="Can it compute",
    responses=problem_responses("not-ready"),
)
def ready() -> Readiness:
    """Loads the tables and makes one small prediction; answers once that has worked."""
    return Readiness(status="ready", methods=ready_methods())
