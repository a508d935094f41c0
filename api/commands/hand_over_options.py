"""The options of `mixwright fit` and `mixwright compare`; nothing here loads chemistry."""

import argparse
from collections.abc import Callable
from typing import get_args

from api.commands.quantities import pressure_kPa, temperature_K
from api.schemas.comparisons import MeasurementUnits
from api.schemas.fits import FormName, ModelName


def add_fit(command: argparse.ArgumentParser) -> None:
    """The options of `mixwright fit`."""
    command.description = (
        "Fit a flowsheet's equation to the prediction of a pair, or of all pairs of a mixture. "
        "Prints the parameter sheet with its exact equation, and what the fit does to the mixture."
    )
    command.add_argument("components", nargs="+", metavar="MOLECULE", help="two or more")
    command.add_argument("--model", choices=get_args(ModelName), default="nrtl")
    command.add_argument(
        "--form", choices=get_args(FormName), default="a+b/T", help="default %(default)s"
    )
    command.add_argument(
        "--alpha", type=alpha, default=0.3, help="non-randomness of NRTL, or 'fit' (default 0.3)"
    )
    command.add_argument(
        "-T",
        "--temperature-range",
        type=temperature_K,
        nargs=2,
        metavar=("LOW", "HIGH"),
        help="range to fit over, such as 330K 360K",
    )
    command.add_argument(
        "-P", "--pressure", type=pressure_kPa, help="where azeotropes are compared; 1atm, 1bar"
    )
    command.add_argument("--method", default="auto", help="see `mixwright methods`")
    command.add_argument("--on-missing", choices=("estimate", "refuse"), default="estimate")
    command.add_argument("--thermoml", metavar="FILE", help="write the predicted data as ThermoML")
    shape = command.add_mutually_exclusive_group()
    shape.add_argument("--json", action="store_true", help="print the whole answer as JSON")
    shape.add_argument("--csv", action="store_true", help="print the parameters as CSV")


def add_compare(command: argparse.ArgumentParser, picture: Callable[[str], str]) -> None:
    """The options of `mixwright compare`."""
    command.description = (
        "Test measured points of a binary, compare every method and every fitted equation with "
        "them, and show how they narrow the prediction."
    )
    command.add_argument("components", nargs=2, metavar="MOLECULE", help="x1 is of the first")
    command.add_argument(
        "points",
        metavar="FILE",
        help="CSV with columns such as temperature_C, pressure_kPa, x1, y1; or ThermoML",
    )
    for name in ("temperature", "pressure", "composition"):
        field = MeasurementUnits.model_fields[name]
        command.add_argument(
            f"--{name}-unit",
            choices=get_args(field.annotation),
            default=field.default,
            help="of columns whose names do not say one (default %(default)s)",
        )
    command.add_argument("--form", default="auto", choices=("auto", "a", "b/T", "a+b/T"))
    command.add_argument("--alpha", type=alpha, default=0.3, help="of NRTL, or 'fit'")
    command.add_argument("-T", "--temperature", type=temperature_K, help="of the diagram")
    command.add_argument("-P", "--pressure", type=pressure_kPa, help="of the diagram")
    command.add_argument("--vapour", choices=("auto", "ideal", "virial"), default="auto")
    command.add_argument("--on-missing", choices=("estimate", "refuse"), default="estimate")
    command.add_argument(
        "--picture", type=picture, help="write a picture to this .svg or .png file"
    )
    shape = command.add_mutually_exclusive_group()
    shape.add_argument("--json", action="store_true", help="print the whole answer as JSON")
    shape.add_argument("--csv", choices=("points", "regions"), help="print this table as CSV")
    shape.add_argument(
        "--sheet",
        choices=get_args(ModelName),
        help="print the parameters of this equation, fitted to the points",
    )


def alpha(text: str) -> float | str:
    """A number, or the word that has it fitted."""
    return text if text == "fit" else float(text)
