"""From the advice of `groups` to its schema."""

from api.answers import cautions, confidence, identities
from api.schemas.advice import (
    AdviceResponse,
    Finding,
    LiquidJudged,
    Recommendation,
    SimplificationCost,
    VapourJudged,
)
from api.tables import Cell, csv_text
from groups.prediction import AdviceAnswer
from groups.prediction.ideality_costs import Cost


def advice(answer: AdviceAnswer) -> AdviceResponse:
    """What the mixture needs."""
    low, high = answer.compressibility
    solution = answer.solution
    return AdviceResponse(
        components=identities(answer.components),
        temperature_K=list(answer.temperature_K),
        pressure_kPa=list(answer.pressure_kPa),
        boils_within=answer.boils_within,
        vapour=VapourJudged(
            verdict=answer.vapour,
            compressibility_lowest=low,
            compressibility_highest=high,
            largest_ln_fugacity_coefficient=answer.largest_ln_phi,
            associating=list(answer.associating),
            supercritical=list(answer.supercritical),
            cost_of_ideal_gas=_cost(answer.ideal_gas_cost),
        ),
        liquid=LiquidJudged(
            verdict=answer.liquid,
            largest_ln_gamma=solution.largest_ln_gamma,
            largest_ln_gamma_component=solution.component,
            largest_excess_gibbs_RT=solution.largest_excess_gibbs_RT,
            relative_volatility_ratio=solution.volatility_ratio,
            azeotropes=answer.azeotropes,
            splits=[list(pair) for pair in answer.splits],
            cost_of_ideal_solution=_cost(answer.ideal_solution_cost),
        ),
        out_of_scope=[Finding(code=f.code, message=f.message) for f in answer.out_of_scope],
        recommended=Recommendation(
            method=answer.method,
            vapour=answer.vapour_model,
            flowsheet_class=answer.flowsheet_class,
            why=answer.findings[-1].message,
        ),
        findings=[Finding(code=f.code, message=f.message) for f in answer.findings],
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def _cost(cost: Cost) -> SimplificationCost:
    return SimplificationCost(
        pressure_percent=100.0 * cost.pressure,
        vapour_mole_fraction=cost.vapour,
        relative_volatility_percent=100.0 * cost.relative_volatility,
    )


def _cells(cost: SimplificationCost) -> list[Cell]:
    return [cost.pressure_percent, cost.vapour_mole_fraction, cost.relative_volatility_percent]


def advice_csv(answer: AdviceResponse) -> str:
    """One row a simplification, then the recommendation."""
    header = "question,verdict,pressure_percent,vapour_mole_fraction,relative_volatility_percent"
    solution = answer.liquid.cost_of_ideal_solution
    rows: list[list[Cell]] = [
        ["ideal gas", answer.vapour.verdict, *_cells(answer.vapour.cost_of_ideal_gas), None],
        ["ideal solution", answer.liquid.verdict, *_cells(solution), None],
    ]
    said = answer.recommended
    rows.append(["method here", said.method, None, None, None, said.why])
    rows.append(["vapour here", said.vapour, None, None, None, None])
    rows.append(["flowsheet class", said.flowsheet_class, None, None, None, None])
    return csv_text([*header.split(","), "why"], rows)
