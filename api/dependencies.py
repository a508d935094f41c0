"""What routes ask for: the settings, and the caps on lists."""

from typing import Annotated

from fastapi import Depends, Request

from api.problem_types import RequestProblemError
from api.settings import Settings


def settings_of(request: Request) -> Settings:
    """The settings this application was made with."""
    settings = request.app.state.settings
    assert isinstance(settings, Settings)
    return settings


SettingsDependency = Annotated[Settings, Depends(settings_of)]


def check_length(field: str, length: int, most: int) -> None:
    """Refuse a list, or a number of points, above its cap."""
    if length > most:
        raise RequestProblemError(
            "too-many-items",
            f"'{field}' asks for {length}; this service takes at most {most}.",
            cure=f"Split the request so that '{field}' is at most {most}.",
            field=f"/{field}",
        )
