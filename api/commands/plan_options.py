"""The options of `mixwright plan`."""

import argparse

from api.commands.quantities import pressure_kPa, temperature_K


def add_plan(command: argparse.ArgumentParser) -> None:
    """The options."""
    command.description = (
        "The few measurements that shrink the doubt most: about the azeotrope of two components; "
        "with -x, about the relative volatility of the first over the second; with --solvents, "
        "about which solvent parts the two best."
    )
    command.add_argument(
        "components", nargs="+", metavar="MOLECULE", help="SMILES, a name or a CAS number"
    )
    command.add_argument("-T", "--temperature", type=temperature_K, help="351.4K, 78C or 172F")
    command.add_argument("-P", "--pressure", type=pressure_kPa, help="101.325kPa, 1atm or 1.013bar")
    command.add_argument(
        "-x", "--fractions", type=float, nargs="+", help="mole fractions, in the order given"
    )
    command.add_argument(
        "--solvents", nargs="+", metavar="MOLECULE", help="two or more to rank, at -T"
    )
    command.add_argument(
        "--on-missing",
        choices=("estimate", "refuse"),
        default="estimate",
        help="what to do where no parameter is published",
    )
    command.add_argument("--json", action="store_true", help="print the whole answer as JSON")
