"""The demo: an invented plant, real molecules, one of them without any measured data.

Everything it prints is computed when it runs. The scenario stands nowhere else in the project but
in the README that shows its output.
"""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

import numpy as np

from api.commands.text import aligned, wrapped
from api.pictures import diagram_picture
from groups.confidence import Confidence
from groups.errors import PredictionError
from groups.prediction import (
    ALL_METHODS,
    CAUTIONS,
    Component,
    azeotropes,
    bubble_point,
    diagram,
    measurement_plan,
)
from groups.prediction.answers import DiagramAnswer, MeasurementPlan, PhasePointAnswer
from groups.structure.molecule import molecule_from_smiles

ISOPROPANOL = replace(molecule_from_smiles("CC(C)O"), name="isopropanol")
ACRYLATE = replace(molecule_from_smiles("C=CC(=O)OC"), name="methyl acrylate")
PRODUCT = replace(molecule_from_smiles("COC(=O)CCOC(C)C"), name="methyl 3-isopropoxypropanoate")
REACTANTS = (Component(ISOPROPANOL), Component(ACRYLATE))
CRUDE = (*REACTANTS, Component(PRODUCT))
ATMOSPHERIC_KPA, VACUUM_KPA = 101.325, 15.0

STORY = """\
FERNHOLLOW WORKS (invented), unit 3. Isopropanol adds to methyl acrylate; the crude holds the
product, methyl 3-isopropoxypropanoate, and what did not react. Nobody has published a vapour
pressure of the product, or any equilibrium with it. The questions before the pilot still runs:
  1. Can the two reactants be taken apart overhead, or do they leave as an azeotrope?
  2. Do they strip off the product cleanly, and how hot does the pot get?
  3. Which of these numbers carry weight, and what should the laboratory measure first?"""


def run(folder: Path) -> str:
    """Run the scenario, write its diagrams into the folder and return the report.

    Parameters
    ----------
    folder : Path
        Made if it does not exist.

    Returns
    -------
    str
        The report, ready to print.
    """
    folder.mkdir(parents=True, exist_ok=True)
    reactants = diagram("Txy", REACTANTS, pressure_kPa=ATMOSPHERIC_KPA)
    stripping = diagram("Txy", (CRUDE[0], CRUDE[2]), pressure_kPa=VACUUM_KPA)
    written = [
        *_pictures(reactants, folder / "isopropanol-methyl-acrylate"),
        *_pictures(stripping, folder / "isopropanol-product-vacuum"),
    ]
    pot = {pressure: _pot(pressure) for pressure in (ATMOSPHERIC_KPA, VACUUM_KPA)}
    return "\n\n".join(
        [
            STORY,
            _first_question(reactants),
            _second_question(pot),
            _third_question(reactants, pot[VACUUM_KPA]),
            "Diagrams: " + ", ".join(str(path) for path in written),
            wrapped(" ".join(CAUTIONS), "Cautions: "),
        ]
    )


def _pictures(answer: DiagramAnswer, stem: Path) -> list[Path]:
    vector, raster = stem.with_suffix(".svg"), stem.with_suffix(".png")
    vector.write_bytes(diagram_picture(answer, "svg"))
    raster.write_bytes(diagram_picture(answer, "png"))
    return [vector, raster]


def _pot(pressure_kPa: float) -> PhasePointAnswer:
    """The pot when a hundredth of each reactant is left."""
    return bubble_point(CRUDE, [0.01, 0.01, 0.98], pressure_kPa=pressure_kPa)


def _first_question(reactants: DiagramAnswer) -> str:
    """The azeotrope of the reactants by every table, at two pressures."""
    rows = []
    for method in ("auto", *(m for m in ALL_METHODS if m not in ("auto", "unifac-lle"))):
        row: list[object] = [method]
        for pressure in (ATMOSPHERIC_KPA, VACUUM_KPA):
            row += _azeotrope_cells(method, pressure)
        rows.append(row)
    header = ["method", "x1 at 101.3 kPa", "T / K", "x1 at 15 kPa", "T / K"]
    found = reactants.diagram.azeotropes
    verdict = (
        "They leave as an azeotrope: plain distillation gives a mixture to recycle, not the pure "
        "reactants. Recycle it as it is, or look for an entrainer."
        if found
        else "No azeotrope is predicted: plain distillation can take them apart."
    )
    return "\n".join(
        [
            "1. ISOPROPANOL (1) / METHYL ACRYLATE (2): THE AZEOTROPE BY EVERY PUBLISHED TABLE",
            aligned(header, rows),
            *_chance(reactants),
            wrapped(verdict),
            *_doubts("Taken: " + reactants.method, reactants.confidence),
        ]
    )


def _chance(reactants: DiagramAnswer) -> list[str]:
    """How probable the azeotrope is, and where it lies, by all tables and measurements together."""
    chance = reactants.azeotrope_chance
    if chance is None or chance.x1 is None:
        return []
    return [
        wrapped(
            f"By all of them and the open measurements together an azeotrope exists at 101.3 kPa "
            f"with probability {chance.probability:.2f}, x1 between {chance.x1.lower:.2f} and "
            f"{chance.x1.upper:.2f}."
        )
    ]


def _azeotrope_cells(method: str, pressure_kPa: float) -> list[object]:
    try:
        found = azeotropes(
            REACTANTS, pressure_kPa=pressure_kPa, method=method, on_missing="refuse"
        ).azeotropes
    except PredictionError:
        return ["no parameters", ""]
    if not found:
        return ["none", ""]
    return [f"{found[0].mole_fractions[0]:.3f}", f"{found[0].temperature_K:.2f}"]


def _second_question(pot: dict[float, PhasePointAnswer]) -> str:
    """Volatilities over the product in the stripped pot, and how hot it is."""
    rows = [
        [
            f"{pressure:g} kPa",
            f"{answer.temperature_K - 273.15:.0f} C",
            *(_ratio(answer, k) for k in (0, 1)),
            f"{100 * answer.y[2]:.0f} %",
        ]
        for pressure, answer in pot.items()
    ]
    header = ["at", "pot", "isopropanol/product", "acrylate/product", "product in the vapour"]
    return "\n".join(
        [
            "2. THE POT WITH 1 MOL-% OF EACH REACTANT LEFT (90 % INTERVAL OF EACH VOLATILITY)",
            aligned(header, rows),
            wrapped(
                "Volatilities this far from one strip easily; what goes over at the end is mostly "
                "product, so the last cut wants reflux. Vacuum keeps the pot "
                f"{_cooler(pot):.0f} K cooler; whether the ester stands the heat is not assessed."
            ),
        ]
    )


def _ratio(answer: PhasePointAnswer, k: int) -> str:
    """A volatility over the product, with its 90 % interval."""
    text = f"{answer.relative_volatility[k]:.1f}"
    if answer.bands is None:
        return text
    band = answer.bands.relative_volatility
    return f"{text} ({band.lower[0, k]:.0f} to {band.upper[0, k]:.0f})"


def _cooler(pot: dict[float, PhasePointAnswer]) -> float:
    temperatures = [answer.temperature_K for answer in pot.values()]
    return float(np.ptp(temperatures))


def _third_question(reactants: DiagramAnswer, pot: PhasePointAnswer) -> str:
    """The doubts side by side, and the measurement that settles most."""
    product_line = pot.vapour_pressures[2]
    sigma = 100.0 * product_line.uncertainty_ln
    stripping = measurement_plan(
        (CRUDE[0], CRUDE[2]),
        "relative_volatility",
        mole_fractions=[0.01, 0.99],
        pressure_kPa=VACUUM_KPA,
    )
    place = measurement_plan(REACTANTS, "azeotrope", pressure_kPa=ATMOSPHERIC_KPA)
    return "\n".join(
        [
            "3. WHAT TO DOUBT, AND WHAT TO MEASURE FIRST",
            *_doubts("Reactants", reactants.confidence),
            *_doubts("Pot", pot.confidence),
            wrapped(
                f"The vapour pressure of the product is {product_line.source} and about "
                f"{sigma:.0f} % uncertain, and every number of part 2 scales with it. Give "
                "measured points as 'vapour_pressure' and run again.",
                "-> ",
            ),
            *_planned("the isopropanol left in the pot", stripping),
            *_planned("the azeotrope of the reactants", place),
        ]
    )


def _planned(subject: str, plan: MeasurementPlan) -> list[str]:
    """The measurements that shrink the doubt about a number, in order."""
    width = plan.interval[1] - plan.interval[0]
    lines = [
        wrapped(
            f"To measure for {subject} ({plan.question}, now {plan.interval[0]:.2f} to "
            f"{plan.interval[1]:.2f}, {width:.2f} wide):",
            "-> ",
        )
    ]
    return lines + [
        wrapped(
            f"{one.what} at {one.temperature_K:.0f} K; expected width {one.expected_width:.2f}",
            f"   {k}. ",
        )
        for k, one in enumerate(plan.measurements, start=1)
    ]


def _doubts(title: str, confidence: Confidence) -> Sequence[str]:
    lines = [f"{title}: confidence {confidence.grade}"]
    return lines + [wrapped(reason.message, "  - ") for reason in confidence.reasons]
