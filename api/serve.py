"""Start the service under uvicorn."""

import uvicorn

from api.settings import Settings


def serve(host: str | None, port: int | None, workers: int | None) -> None:
    """Listen until stopped; what is None comes from the settings."""
    settings = Settings()
    uvicorn.run(
        "api.application:create_app",
        factory=True,
        host=host or settings.host,
        port=settings.port if port is None else port,
        workers=workers or settings.workers,
        log_level="info",
        server_header=False,
    )
