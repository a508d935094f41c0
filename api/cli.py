"""The command line: `mixwright serve`, `predict`, `fit`, `compare`, `groups`, ...

Exit status: 0 done; 2 the input is at fault; 3 no method gives the number; 1 anything else.
"""

import argparse
import sys
from collections.abc import Callable, Sequence

from api import __version__
from api.problem_types import problem_type_of
from groups.errors import MixwrightError, PredictionError


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command and return the exit status."""
    given = parser().parse_args(arguments)
    try:
        text = given.run(given)
    except MixwrightError as error:
        kind = problem_type_of(error)
        print(f"{kind.title}.\n  {error}\n  {error.cure or kind.cure}", file=sys.stderr)
        return 3 if isinstance(error, PredictionError) else 2
    except OSError as error:
        print(f"A file cannot be read or written, or a port opened.\n  {error}", file=sys.stderr)
        return 1
    if text:
        try:
            print(text, flush=True)
        except BrokenPipeError:  # the reader, such as `head`, has seen enough
            sys.stderr.close()
    return 0


def parser() -> argparse.ArgumentParser:
    """The commands and their options."""
    top = argparse.ArgumentParser(
        prog="mixwright",
        description="Behaviour of liquid mixtures that nobody has measured, from the molecules, "
        "with the reasons to doubt each number.",
    )
    top.add_argument("--version", action="version", version=f"%(prog)s {__version__}")
    commands = top.add_subparsers(required=True, metavar="COMMAND")
    _add_serve(commands.add_parser("serve", help="start the HTTP service"))
    _add_predict(commands.add_parser("predict", help="predict one mixture"))
    _add_fit(commands.add_parser("fit", help="parameters for a flowsheet, from the prediction"))
    _add_compare(commands.add_parser("compare", help="measured points against every model"))
    _add_plan(commands.add_parser("plan", help="what to measure to settle a question"))
    _add_advise(commands.add_parser("advise", help="which class of property method is needed"))
    _add_groups(commands.add_parser("groups", help="split a molecule into groups"))
    _add_methods(commands.add_parser("methods", help="list the methods, or show one"))
    _add_demo(commands.add_parser("demo", help="a worked example, with diagrams as files"))
    return top


def _add_serve(command: argparse.ArgumentParser) -> None:
    command.add_argument("--host", help="address to listen on (default 127.0.0.1)")
    command.add_argument("--port", type=_port, help="port to listen on (default 8000)")
    command.add_argument("--workers", type=_workers, help="processes (default 1)")
    command.set_defaults(run=_serve)


def _port(text: str) -> int:
    """A port number; argparse names the option when this refuses."""
    port = int(text)
    if not 0 <= port <= 65535:
        raise argparse.ArgumentTypeError(f"{port} is no port; give one from 1 to 65535")
    return port


def _level(text: str) -> float:
    level = float(text)
    if not 0.01 <= level <= 0.99:
        raise argparse.ArgumentTypeError(f"{text} is no probability from 0.01 to 0.99")
    return level


def _workers(text: str) -> int:
    workers = int(text)
    if not 1 <= workers <= 64:
        raise argparse.ArgumentTypeError(f"give 1 to 64 processes, not {workers}")
    return workers


def _picture(*suffixes: str) -> Callable[[str], str]:
    """A file name whose ending is one of those that can be drawn."""

    def file(text: str) -> str:
        if not text.lower().endswith(suffixes):
            raise argparse.ArgumentTypeError(
                f"'{text}' must end in {' or '.join(suffixes)}, which says what is drawn"
            )
        return text

    return file


def _add_predict(command: argparse.ArgumentParser) -> None:
    from api.commands.predict import WHAT
    from api.commands.quantities import pressure_kPa, temperature_K

    command.description = (
        "With -x: a bubble point (or --what dew), or a flash if both -T and -P are given. "
        "Without: the diagram of two components, the azeotropes of more."
    )
    command.add_argument(
        "components",
        nargs="+",
        metavar="MOLECULE",
        help="SMILES, a name or a CAS number; smiles:, name: or cas: in front say which",
    )
    command.add_argument("-T", "--temperature", type=temperature_K, help="351.4K, 78C or 172F")
    command.add_argument("-P", "--pressure", type=pressure_kPa, help="101.325kPa, 1atm or 1.013bar")
    command.add_argument(
        "-x", "--fractions", type=float, nargs="+", help="mole fractions, in the order given"
    )
    command.add_argument(
        "--vapour-fraction", type=float, help="of a flash, in place of -T or -P: 0 to 1"
    )
    command.add_argument(
        "--vapour",
        choices=("auto", "ideal", "virial"),
        default="auto",
        help="ideal or real vapour (default: real where the mixture needs it)",
    )
    command.add_argument(
        "--level", type=_level, help="probability of a second interval with --what dilution"
    )
    command.add_argument("--what", choices=WHAT, help="what to predict")
    command.add_argument("--method", default="auto", help="see `mixwright methods`")
    command.add_argument(
        "--on-missing",
        choices=("estimate", "refuse"),
        default="estimate",
        help="what to do where no parameter is published",
    )
    command.add_argument(
        "--points", type=int, default=101, help="points of a diagram (default %(default)s)"
    )
    command.add_argument(
        "--picture",
        type=_picture(".svg", ".png"),
        help="write the diagram to this .svg or .png file",
    )
    shape = command.add_mutually_exclusive_group()
    shape.add_argument("--json", action="store_true", help="print the whole answer as JSON")
    shape.add_argument("--csv", action="store_true", help="print the table as CSV")
    command.set_defaults(run=_predict)


def _add_fit(command: argparse.ArgumentParser) -> None:
    from api.commands.hand_over_options import add_fit

    add_fit(command)
    command.set_defaults(run=_fit)


def _add_compare(command: argparse.ArgumentParser) -> None:
    from api.commands.hand_over_options import add_compare

    add_compare(command, _picture(".svg", ".png"))
    command.set_defaults(run=_compare)


def _add_plan(command: argparse.ArgumentParser) -> None:
    from api.commands.plan_options import add_plan

    add_plan(command)
    command.set_defaults(run=_plan)


def _add_advise(command: argparse.ArgumentParser) -> None:
    from api.commands.quantities import pressure_kPa, temperature_K

    command.description = (
        "Ideal or real gas, ideal or real solution, by computation for this mixture; what each "
        "simplification would cost; the class of method for a flowsheet."
    )
    command.add_argument(
        "components",
        nargs="+",
        metavar="MOLECULE",
        help="SMILES, a name or a CAS number; smiles:, name: or cas: in front say which",
    )
    command.add_argument(
        "-T",
        "--temperature",
        type=temperature_K,
        nargs="+",
        required=True,
        help="lowest and highest, such as 350K 390K; or one",
    )
    command.add_argument(
        "-P",
        "--pressure",
        type=pressure_kPa,
        nargs="+",
        required=True,
        help="lowest and highest, such as 1atm 3bar; or one",
    )
    command.add_argument(
        "--on-missing",
        choices=("estimate", "refuse"),
        default="estimate",
        help="what to do where no parameter is published",
    )
    shape = command.add_mutually_exclusive_group()
    shape.add_argument("--json", action="store_true", help="print the whole answer as JSON")
    shape.add_argument("--csv", action="store_true", help="print the table as CSV")
    command.set_defaults(run=_advise)


def _add_groups(command: argparse.ArgumentParser) -> None:
    command.add_argument("molecule", metavar="MOLECULE", help="SMILES, a name or a CAS number")
    command.add_argument("--method", action="append", help="a method; may be repeated")
    command.add_argument(
        "--picture", type=_picture(".svg"), help="write a drawing to this .svg file"
    )
    command.add_argument("--json", action="store_true", help="print the answer as JSON")
    command.set_defaults(run=_groups)


def _add_methods(command: argparse.ArgumentParser) -> None:
    command.add_argument("method", nargs="?", help="show this one in full")
    command.add_argument("--json", action="store_true", help="print the answer as JSON")
    command.set_defaults(run=_methods)


def _add_demo(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--out", default="mixwright-demo", help="folder for the diagrams (default %(default)s)"
    )
    command.set_defaults(run=_demo)


# Each command imports what it needs when it runs: `mixwright --help` should not load chemistry.
def _serve(given: argparse.Namespace) -> str:
    from api.serve import serve

    serve(given.host, given.port, given.workers)
    return ""


def _predict(given: argparse.Namespace) -> str:
    from api.commands.predict import predict

    return predict(given)


def _fit(given: argparse.Namespace) -> str:
    from api.commands.fit import fit

    return fit(given)


def _compare(given: argparse.Namespace) -> str:
    from api.commands.compare import compare

    return compare(given)


def _plan(given: argparse.Namespace) -> str:
    from api.commands.plan import plan

    return plan(given)


def _advise(given: argparse.Namespace) -> str:
    from api.commands.advise import advise

    return advise(given)


def _groups(given: argparse.Namespace) -> str:
    from api.commands.structure import groups_of

    return groups_of(given)


def _methods(given: argparse.Namespace) -> str:
    from api.commands.structure import methods_of

    return methods_of(given)


def _demo(given: argparse.Namespace) -> str:
    from pathlib import Path

    from api.demo import run

    return run(Path(given.out))


if __name__ == "__main__":
    sys.exit(main())
