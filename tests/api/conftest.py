"""Services with the usual and with low caps."""

import pytest

from api.application import create_app
from api.settings import Settings
from tests.api.service_caller import Service


@pytest.fixture(scope="session")
def service() -> Service:
    return Service(create_app(Settings()))


@pytest.fixture(scope="session")
def small_service() -> Service:
    """A service with every cap low."""
    return Service(
        create_app(
            Settings(
                max_body_bytes=2048,
                max_components=3,
                max_molecules=2,
                max_pairs=2,
                max_points=3,
                max_grid_points=11,
            )
        )
    )
