"""A typed Python client for the service.

from api.client import MixwrightClient

with MixwrightClient("http://127.0.0.1:8000") as mixwright:
    point = mixwright.bubble_point(["CCO", "O"], [0.3, 0.7], pressure_kPa=101.325)
    print(point.temperature_K, point.y, point.confidence.grade)
"""

from collections.abc import Mapping, Sequence
from types import TracebackType
from typing import Literal, Self, TypeVar

import httpx
from pydantic import BaseModel, ValidationError

from api.schemas.activity import (
    ActivityRequest,
    ActivityResponse,
    InfiniteDilutionRequest,
    InfiniteDilutionResponse,
    Pair,
)
from api.schemas.advice import AdviceRequest, AdviceResponse
from api.schemas.comparisons import ComparisonRequest, ComparisonResponse
from api.schemas.equilibrium import (
    AzeotropesRequest,
    AzeotropesResponse,
    DiagramRequest,
    DiagramResponse,
    FlashRequest,
    LiquidSplitRequest,
    LiquidSplitResponse,
    PhasePointResponse,
    PointRequest,
)
from api.schemas.fits import FitRequest, FitResponse
from api.schemas.gas_solubility import GasSolubilityRequest, GasSolubilityResponse
from api.schemas.liquid_regions import (
    MutualSolubilitiesRequest,
    MutualSolubilitiesResponse,
    TernaryDiagramRequest,
    TernaryDiagramResponse,
)
from api.schemas.measurement_plan import MeasurementPlanRequest, MeasurementPlanResponse
from api.schemas.molecule import (
    DepictionRequest,
    MoleculeInput,
    MoleculesRequest,
    MoleculesResponse,
    molecule_input,
)
from api.schemas.prediction import OnMissing
from api.schemas.problem import Problem
from api.schemas.residue_curves import ResidueCurvesRequest, ResidueCurvesResponse
from api.schemas.service import Health, MethodDetail, MethodsResponse, Readiness

Answer = TypeVar("Answer", bound=BaseModel)
Vapour = Literal["auto", "ideal", "virial"]
MoleculeLike = str | Mapping[str, object] | MoleculeInput
"""SMILES as text, a mapping as in the HTTP contract, or the model itself."""


class ServiceProblemError(Exception):
    """The service refused; `problem` says why, which field is to blame, and the cure."""

    def __init__(self, problem: Problem) -> None:
        where = f" [{problem.field}]" if problem.field else ""
        super().__init__(f"{problem.title}{where}: {problem.detail} {problem.cure}")
        self.problem = problem


class MixwrightClient:
    """Calls a running service. Requests are checked before they are sent."""

    def __init__(self, base_url: str, *, timeout_s: float = 120.0) -> None:
        self._http = httpx.Client(base_url=base_url, timeout=timeout_s)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        _kind: type[BaseException] | None,
        _error: BaseException | None,
        _traceback: TracebackType | None,
    ) -> None:
        self.close()

    def close(self) -> None:
        """Close the connections."""
        self._http.close()

    def health(self) -> Health:
        """Whether the process is alive."""
        return self._get("/v1/health", Health)

    def ready(self) -> Readiness:
        """Whether it can compute."""
        return self._get("/v1/ready", Readiness)

    def methods(self) -> MethodsResponse:
        """All methods."""
        return self._get("/v1/methods", MethodsResponse)

    def method(self, identifier: str) -> MethodDetail:
        """One method in full."""
        return self._get(f"/v1/methods/{identifier}", MethodDetail)

    def molecules(
        self, molecules: Sequence[MoleculeLike], *, methods: Sequence[str] | None = None
    ) -> MoleculesResponse:
        """Identities and groups."""
        given = _molecules(molecules)
        request = (
            MoleculesRequest(molecules=given)
            if methods is None
            else MoleculesRequest(molecules=given, methods=list(methods))
        )
        return self._post("/v1/molecules", request, MoleculesResponse)

    def depiction(self, molecule: MoleculeLike, *, method: str = "unifac-dortmund") -> str:
        """SVG of a molecule with its groups."""
        request = DepictionRequest(molecule=molecule_input(molecule), method=method)
        return self._send("/v1/molecules/depictions", request, "image/svg+xml").text

    def activity_coefficients(
        self,
        components: Sequence[MoleculeLike],
        temperature_K: float | Sequence[float],
        mole_fractions: Sequence[Sequence[float]],
        *,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
    ) -> ActivityResponse:
        """Activity coefficients, gE and hE at given points."""
        single = isinstance(temperature_K, (int, float))
        request = ActivityRequest(
            components=_molecules(components),
            temperature_K=[temperature_K] if single else list(temperature_K),  # type: ignore[list-item, arg-type]
            mole_fractions=[list(point) for point in mole_fractions],
            method=method,
            on_missing=on_missing,
        )
        return self._post("/v1/activity-coefficients", request, ActivityResponse)

    def infinite_dilution(
        self,
        pairs: Sequence[tuple[MoleculeLike, MoleculeLike, float]],
        *,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        level: float | None = None,
    ) -> InfiniteDilutionResponse:
        """Limits of (solute, solvent, temperature_K) triples; `level`: of a second interval."""
        asked = [
            Pair(solute=molecule_input(u), solvent=molecule_input(v), temperature_K=T)
            for u, v, T in pairs
        ]
        request = InfiniteDilutionRequest(
            pairs=asked, method=method, on_missing=on_missing, level=level
        )
        return self._post("/v1/infinite-dilution", request, InfiniteDilutionResponse)

    def bubble_point(
        self,
        components: Sequence[MoleculeLike],
        mole_fractions: Sequence[float],
        *,
        temperature_K: float | None = None,
        pressure_kPa: float | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> PhasePointResponse:
        """Where a liquid begins to boil."""
        request = PointRequest(
            components=_molecules(components),
            mole_fractions=list(mole_fractions),
            temperature_K=temperature_K,
            pressure_kPa=pressure_kPa,
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/bubble-point", request, PhasePointResponse)

    def dew_point(
        self,
        components: Sequence[MoleculeLike],
        mole_fractions: Sequence[float],
        *,
        temperature_K: float | None = None,
        pressure_kPa: float | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> PhasePointResponse:
        """Where a vapour begins to condense."""
        request = PointRequest(
            components=_molecules(components),
            mole_fractions=list(mole_fractions),
            temperature_K=temperature_K,
            pressure_kPa=pressure_kPa,
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/dew-point", request, PhasePointResponse)

    def flash(
        self,
        components: Sequence[MoleculeLike],
        mole_fractions: Sequence[float],
        *,
        temperature_K: float | None = None,
        pressure_kPa: float | None = None,
        vapour_fraction: float | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> PhasePointResponse:
        """The phases of a feed; two of temperature, pressure and vapour fraction are given."""
        request = FlashRequest(
            components=_molecules(components),
            mole_fractions=list(mole_fractions),
            temperature_K=temperature_K,
            pressure_kPa=pressure_kPa,
            vapour_fraction=vapour_fraction,
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/flash", request, PhasePointResponse)

    def diagram(
        self,
        kind: Literal["Txy", "Pxy"],
        components: Sequence[MoleculeLike],
        *,
        pressure_kPa: float | None = None,
        temperature_K: float | None = None,
        points: int = 101,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> DiagramResponse:
        """A binary diagram."""
        request = DiagramRequest(
            kind=kind,
            components=_molecules(components),
            pressure_kPa=pressure_kPa,
            temperature_K=temperature_K,
            points=points,
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/diagrams", request, DiagramResponse)

    def azeotropes(
        self,
        components: Sequence[MoleculeLike],
        *,
        pressure_kPa: float | None = None,
        temperature_K: float | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> AzeotropesResponse:
        """All azeotropes of a mixture."""
        request = AzeotropesRequest(
            components=_molecules(components),
            pressure_kPa=pressure_kPa,
            temperature_K=temperature_K,
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/azeotropes", request, AzeotropesResponse)

    def liquid_split(
        self,
        components: Sequence[MoleculeLike],
        *,
        temperature_K: float,
        mole_fractions: Sequence[float] | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
    ) -> LiquidSplitResponse:
        """The coexisting liquids."""
        request = LiquidSplitRequest(
            components=_molecules(components),
            temperature_K=temperature_K,
            mole_fractions=None if mole_fractions is None else list(mole_fractions),
            method=method,
            on_missing=on_missing,
        )
        return self._post("/v1/liquid-splits", request, LiquidSplitResponse)

    def fit(self, request: FitRequest) -> FitResponse:
        """An equation fitted to the prediction of a mixture."""
        return self._post("/v1/fits", request, FitResponse)

    def fit_sheet(self, request: FitRequest) -> str:
        """The parameter sheet of a fit, as a text to read."""
        return self._send("/v1/fits", request, "text/plain").text

    def predicted_thermoml(self, request: FitRequest) -> str:
        """The data that a fit stands on, as ThermoML."""
        return self._send("/v1/fits", request, "application/xml").text

    def compare(self, request: ComparisonRequest) -> ComparisonResponse:
        """Measured points tested, compared with every model, and used to narrow the prediction."""
        return self._post("/v1/comparisons", request, ComparisonResponse)

    def comparison_picture(self, request: ComparisonRequest) -> bytes:
        """A comparison as PNG."""
        return self._send("/v1/comparisons", request, "image/png").content

    def mutual_solubilities(
        self,
        components: Sequence[MoleculeLike],
        *,
        lowest_K: float,
        highest_K: float,
        points: int = 21,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
    ) -> MutualSolubilitiesResponse:
        """What two liquids dissolve of each other, and their consolute points."""
        request = MutualSolubilitiesRequest(
            components=_molecules(components),
            lowest_K=lowest_K,
            highest_K=highest_K,
            points=points,
            method=method,
            on_missing=on_missing,
        )
        return self._post("/v1/mutual-solubilities", request, MutualSolubilitiesResponse)

    def ternary_diagram(
        self,
        components: Sequence[MoleculeLike],
        *,
        temperature_K: float,
        tie_lines: int = 15,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
    ) -> TernaryDiagramResponse:
        """Two-liquid regions of a ternary."""
        request = TernaryDiagramRequest(
            components=_molecules(components),
            temperature_K=temperature_K,
            tie_lines=tie_lines,
            method=method,
            on_missing=on_missing,
        )
        return self._post("/v1/ternary-diagrams", request, TernaryDiagramResponse)

    def residue_curves(
        self,
        components: Sequence[MoleculeLike],
        *,
        pressure_kPa: float,
        starts: Sequence[Sequence[float]] | None = None,
        method: str = "auto",
        on_missing: OnMissing = "estimate",
        vapour: Vapour = "auto",
    ) -> ResidueCurvesResponse:
        """Paths of an open still, nodes, saddles and boundaries of a ternary."""
        request = ResidueCurvesRequest(
            components=_molecules(components),
            pressure_kPa=pressure_kPa,
            starts=None if starts is None else [list(start) for start in starts],
            method=method,
            on_missing=on_missing,
            vapour=vapour,
        )
        return self._post("/v1/residue-curves", request, ResidueCurvesResponse)

    def gas_solubility(
        self,
        gas: MoleculeLike,
        solvents: Sequence[MoleculeLike],
        *,
        temperature_K: float | Sequence[float],
        pressure_kPa: float = 101.325,
        solvent_mole_fractions: Sequence[float] | None = None,
    ) -> GasSolubilityResponse:
        """Henry's constant and solubility of a gas."""
        single = isinstance(temperature_K, (int, float))
        request = GasSolubilityRequest(
            gas=molecule_input(gas),
            solvents=_molecules(solvents),
            temperature_K=[temperature_K] if single else list(temperature_K),  # type: ignore[list-item, arg-type]
            pressure_kPa=pressure_kPa,
            solvent_mole_fractions=None
            if solvent_mole_fractions is None
            else list(solvent_mole_fractions),
        )
        return self._post("/v1/gas-solubility", request, GasSolubilityResponse)

    def measurement_plan(
        self,
        components: Sequence[MoleculeLike],
        question: Literal["azeotrope", "relative_volatility", "ranking"],
        *,
        mole_fractions: Sequence[float] | None = None,
        temperature_K: float | None = None,
        pressure_kPa: float | None = None,
        solvents: Sequence[MoleculeLike] | None = None,
        on_missing: OnMissing = "estimate",
    ) -> MeasurementPlanResponse:
        """The few measurements that shrink the doubt about a question most."""
        request = MeasurementPlanRequest(
            components=_molecules(components),
            question=question,
            mole_fractions=None if mole_fractions is None else list(mole_fractions),
            temperature_K=temperature_K,
            pressure_kPa=pressure_kPa,
            solvents=None if solvents is None else _molecules(solvents),
            on_missing=on_missing,
        )
        return self._post("/v1/measurement-plan", request, MeasurementPlanResponse)

    def advice(
        self,
        components: Sequence[MoleculeLike],
        *,
        temperature_K: tuple[float, float],
        pressure_kPa: tuple[float, float],
        mole_fractions: Sequence[tuple[float, float]] | None = None,
        on_missing: OnMissing = "estimate",
    ) -> AdviceResponse:
        """Which class of property method a mixture needs over these ranges."""
        request = AdviceRequest(
            components=_molecules(components),
            temperature_K=list(temperature_K),
            pressure_kPa=list(pressure_kPa),
            mole_fractions=None if mole_fractions is None else [list(r) for r in mole_fractions],
            on_missing=on_missing,
        )
        return self._post("/v1/advice", request, AdviceResponse)

    def _get(self, path: str, kind: type[Answer]) -> Answer:
        return kind.model_validate_json(_checked(self._http.get(path)).content)

    def _post(self, path: str, request: BaseModel, kind: type[Answer]) -> Answer:
        return kind.model_validate_json(self._send(path, request, "application/json").content)

    def _send(self, path: str, request: BaseModel, accept: str) -> httpx.Response:
        body = request.model_dump_json(exclude_none=True)
        headers = {"Content-Type": "application/json", "Accept": accept}
        return _checked(self._http.post(path, content=body, headers=headers))


def _molecules(given: Sequence[MoleculeLike]) -> list[MoleculeInput]:
    return [molecule_input(value) for value in given]


def _checked(response: httpx.Response) -> httpx.Response:
    """The response, or its problem as an exception."""
    if response.is_success:
        return response
    try:
        problem = Problem.model_validate_json(response.content)
    except ValidationError:
        response.raise_for_status()
        raise
    raise ServiceProblemError(problem)
