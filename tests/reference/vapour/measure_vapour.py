"""Print how far real vapours and the equation of state are from handbook values.

Run `python -m tests.reference.vapour.measure_vapour` at the root of the project. The sources of the
measured values stand in the TOML files beside this one.
"""

import sys

import numpy as np

from tests.reference.vapour import test_psrk_reference as psrk
from tests.reference.vapour import test_second_virial_curves as curves
from tests.reference.vapour import test_vapour_reference as vapour


def write(*cells: object) -> None:
    sys.stdout.write("| " + " | ".join(str(cell) for cell in cells) + " |\n")


def second_virials() -> None:
    write("substance", "T / K", "B measured / cm3/mol", "B here", "deviation")
    for row in vapour.rows("second_virials.csv"):
        model, _ = vapour.virial(row["smiles"])
        B = model.second_virials(np.array([float(row["temperature_K"])]))[0, 0, 0]
        gap = B - float(row["B_cm3_mol"])
        write(row["name"], row["temperature_K"], row["B_cm3_mol"], f"{B:.1f}", f"{gap:+.1f}")


def correlations() -> None:
    write("correlation", "polar terms", "median relative error of B, by class")
    for form in curves.FORMS:
        for polar in (False, True):
            table = curves.errors(form, polar)
            cells = ", ".join(f"{name} {np.median(part):.1%}" for name, part in table.items())
            write(form, "with" if polar else "without", cells)


def acetic_acid() -> None:
    write("acetic acid/water, liquid by", "vapour", "mean error of y", "mean error of T / K")
    for method in ("unifac", "unifac-dortmund"):
        for real in (False, True):
            y, T = vapour.boiling(method, real)
            kind = "virial and dimers" if real else "ideal"
            write(method, kind, f"{np.abs(y).mean():.4f}", f"{np.abs(T).mean():.2f}")


def solubilities() -> None:
    write("gas", "solvent", "quantity at 298.15 K", "measured", "psrk", "deviation")
    misses = []
    for row in psrk.ROWS:
        found, value = psrk.computed(row), float(row["value"])
        misses.append(abs(np.log(found / value)))
        deviation = f"{found / value - 1.0:+.0%}"
        write(row["gas"], row["solvent"], row["what"], row["value"], f"{found:.3g}", deviation)
    write("mean", "", "", "", "", f"{np.expm1(np.mean(misses)):.0%}")


if __name__ == "__main__":
    for table in (second_virials, correlations, acetic_acid, solubilities):
        table()
        sys.stdout.write("\n")
