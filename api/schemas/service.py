"""Health, readiness and the methods."""

from typing import Literal

from pydantic import Field

from api.schemas.base import StrictModel


class Health(StrictModel):
    """The process answers."""

    status: Literal["ok"]
    version: str


class Readiness(StrictModel):
    """The tables are loaded and a calculation runs."""

    status: Literal["ready"]
    methods: list[str]


class SourceRecord(StrictModel):
    """A publication behind a table."""

    citation: str
    doi: str | None


class MethodEntry(StrictModel):
    """One method in short."""

    id: str
    title: str
    temperature_range_K: list[float] | None


class MethodsResponse(StrictModel):
    """All methods."""

    default: str
    methods: list[MethodEntry]


class SubgroupEntry(StrictModel):
    """One subgroup of a table."""

    number: int
    name: str
    main_number: int
    main_group: str
    R: float
    Q: float


class DoubtedPair(StrictModel):
    """A main-group pair that failed the audit."""

    main_numbers: list[int]
    main_groups: list[str]
    reason: str


class MethodDetail(MethodEntry):
    """One method in full; `ideal` and `auto` have no table, so their lists are empty."""

    description: str
    sources: list[SourceRecord]
    subgroup_count: int
    main_group_count: int
    pairs_with_parameters: int = Field(description="Main-group pairs with both directions")
    pairs_without_parameters: int
    pairs_completed: int = Field(
        description="Pairs with parameters of which at least one direction is machine learning's"
    )
    subgroups: list[SubgroupEntry]
    suspects: list[DoubtedPair]
