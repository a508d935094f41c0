"""Settings of the service, from the environment (prefix `MIXWRIGHT_`) or given in code."""

from pydantic import Field
from pydantic_settings import BaseSettings, SettingsConfigDict


class Settings(BaseSettings):
    """Caps and limits of one service process.

    Each has an environment variable of the same name in capitals, e.g. `MIXWRIGHT_MAX_PAIRS`.
    """

    model_config = SettingsConfigDict(env_prefix="MIXWRIGHT_", frozen=True, extra="ignore")

    host: str = "127.0.0.1"
    port: int = Field(default=8000, ge=0, le=65535)
    workers: int = Field(default=1, ge=1, le=64, description="Service processes.")
    threads: int = Field(default=4, ge=1, le=256, description="Requests computed at once.")
    max_body_bytes: int = Field(default=16 * 1024 * 1024, ge=1024)
    time_limit_s: float = Field(default=120.0, gt=0.0, description="Longest time for one request.")
    max_components: int = Field(default=20, ge=2)
    max_molecules: int = Field(default=5_000, ge=1, description="Molecules in one request.")
    max_pairs: int = Field(default=50_000, ge=1, description="Solute/solvent pairs in a request.")
    max_points: int = Field(default=20_000, ge=1, description="Points of activity coefficients.")
    max_grid_points: int = Field(default=1_001, ge=2, description="Points of one diagram.")
    max_fit_values: int = Field(
        default=20_000, ge=1, description="Temperatures times compositions times pairs of a fit."
    )
    max_measurements: int = Field(default=1_000, ge=1, description="Points of one comparison.")
