"""The rules by which the audit doubts a parameter pair. A doubt must be rare to mean anything."""

from collections.abc import Iterator, Mapping
from itertools import combinations

import numpy as np
from rdkit import Chem

from groups.arrays import FloatArray
from groups.parameters.editions import METHOD as EDITED_METHOD
from groups.parameters.editions import read_choices, read_edition
from groups.parameters.example_mixtures import read_absurd_mixtures
from groups.parameters.interaction_energy import (
    dilute_group_ln_gamma,
    interaction_energy_K,
    table_energy_K,
)
from groups.parameters.loader import table
from groups.parameters.method_table import MethodTable
from groups.parameters.open_data import PairEvidence
from groups.parameters.suspects import Suspect

Evidence = Mapping[tuple[str, int, int], PairEvidence]

# 0 to 150 degrees Celsius: wider than any fit, and where liquids at low pressure are asked for.
TEMPERATURES_K: FloatArray = np.linspace(273.15, 423.15, 7)

# Attraction: the strongest hydrogen bonds of neutral molecules release about 35 kJ/mol
# (phenol with amines; from memory), which is 4200 K. Repulsion: 100 kJ/mol, 12000 K, is more than
# the enthalpy of vaporisation of any molecule here; a value beyond it is a fit that ran away.
STRONGEST_ATTRACTION_K, STRONGEST_REPULSION_K = -4200.0, 12000.0

# Two published tables may differ by ln 2.7 per unit of group surface, as two fits to different
# data do; more is a different mixture.
DISAGREEMENT = 1.0
# The gas-fitted equation of state may differ twice as far from UNIFAC before it is a doubt.
DISAGREEMENT_WITH_EQUATION_OF_STATE = 2.0

# Measured data overrule a doubt about the size of a parameter: a few systems with an error no worse
# than that of a good table over all open data (0.3 to 0.4). An absurd pair misses by far more.
ACQUITTAL_POINTS, ACQUITTAL_SYSTEMS, ACQUITTAL_ERROR = 5, 3, 0.4


def one_direction_only(method: str) -> Iterator[Suspect]:
    """Pairs with a_ij published and a_ji not.

    Parameters
    ----------
    method : str
        The table.

    Yields
    ------
    Suspect
        One per pair.
    """
    published = table(method)
    for i, j, row, column in _pairs(published):
        given = not np.isnan(published.a[row, column]), not np.isnan(published.a[column, row])
        if given[0] != given[1]:
            text = "only one direction of the pair is published"
            yield Suspect(method, i, j, "one-direction", text)


def exactly_zero(method: str) -> Iterator[Suspect]:
    """Pairs in which a direction is exactly zero: no regression ends there.

    Parameters
    ----------
    method : str
        The table.

    Yields
    ------
    Suspect
        One per pair.
    """
    published = table(method)
    zero = (published.a == 0) & (published.b == 0) & (published.c == 0)
    for i, j, row, column in _pairs(published):
        if zero[row, column] and zero[column, row]:
            text = "both directions are exactly zero, as if nothing had been fitted"
            yield Suspect(method, i, j, "exactly-zero", text)
        elif zero[row, column] or zero[column, row]:
            text = "one direction is exactly zero, as if it had not been fitted"
            yield Suspect(method, i, j, "exactly-zero", text)


def unphysical_energy(method: str, evidence: Evidence) -> Iterator[Suspect]:
    """Pairs whose interaction energy leaves all physical bounds between 273 and 423 K.

    Parameters
    ----------
    method : str
        The table.
    evidence : mapping
        Committed statistics of open data, which may acquit a pair.

    Yields
    ------
    Suspect
        One per pair.
    """
    published = table(method)
    energy = table_energy_K(published, TEMPERATURES_K)
    lowest, highest = energy.min(axis=0), energy.max(axis=0)
    for i, j, row, column in _pairs(published):
        low = np.fmin(lowest[row, column], lowest[column, row])
        high = np.fmax(highest[row, column], highest[column, row])
        if _acquitted(evidence.get((method, i, j))):
            continue
        if low < STRONGEST_ATTRACTION_K:
            text = f"attraction reaches {-low:.0f} K within 273 to 423 K, beyond any hydrogen bond"
            yield Suspect(method, i, j, "unphysical", text)
        elif high > STRONGEST_REPULSION_K:
            text = f"repulsion reaches {high:.0f} K within 273 to 423 K, a fit that ran away"
            yield Suspect(method, i, j, "unphysical", text)


def editions_disagree(evidence: Evidence) -> Iterator[Suspect]:
    """Pairs of the Dortmund table on which its editions disagree and nothing settled it.

    Parameters
    ----------
    evidence : mapping
        Committed statistics of open data, which may acquit a pair.

    Yields
    ------
    Suspect
        One per pair.
    """
    published = table(EDITED_METHOD)
    older, newer = (_edition_ln_gamma(published, edition) for edition in ("2006", "2016"))
    settled = {(choice.i, choice.j) for choice in read_choices()}
    for i, j, row, column in _pairs(published):
        apart = _apart(older, newer, row, column)
        if apart > DISAGREEMENT and (i, j) not in settled:
            if _acquitted(evidence.get((EDITED_METHOD, i, j))):
                continue
            text = f"the editions of 2006 and 2016 differ by {apart:.1f} in ln gamma of the group"
            yield Suspect(EDITED_METHOD, i, j, "tables-disagree", text)


def equation_of_state_disagrees() -> Iterator[Suspect]:
    """Pairs that PSRK shares with UNIFAC by number and name, and has very differently.

    Yields
    ------
    Suspect
        One per pair, on the PSRK table.
    """
    psrk, unifac = table("psrk"), table("unifac")
    theirs, ours = (_ln_gamma(published) for published in (psrk, unifac))
    names = dict(zip(unifac.main_numbers.tolist(), unifac.main_names, strict=True))
    shared = {
        int(number)
        for number, name in zip(psrk.main_numbers, psrk.main_names, strict=True)
        if names.get(int(number)) == name
    }
    for i, j, row, column in _pairs(psrk):
        if {i, j} <= shared:
            k, m = unifac.main_index(i), unifac.main_index(j)
            apart = _apart(
                theirs[:, [[row], [column]], [row, column]], ours[:, [[k], [m]], [k, m]], 0, 1
            )
            if apart > DISAGREEMENT_WITH_EQUATION_OF_STATE:
                text = f"differs from the UNIFAC table by {apart:.1f} in ln gamma of the group"
                yield Suspect("psrk", i, j, "tables-disagree", text)


def open_data_blow_up(method: str, evidence: Evidence) -> Iterator[Suspect]:
    """Pairs that open measurements of gamma at infinite dilution refute.

    Parameters
    ----------
    method : str
        The table.
    evidence : mapping
        Committed statistics of open data.

    Yields
    ------
    Suspect
        One per pair.
    """
    for row in evidence.values():
        if row.method == method and row.blow_up:
            systems = (
                "one measured system" if row.systems == 1 else f"{row.systems} measured systems"
            )
            text = (
                f"median error {row.system_error:.1f} in ln gamma at infinite dilution over "
                f"{systems}, where the other tables have "
                f"{row.others_error:.1f}"
            )
            yield Suspect(method, row.i, row.j, "open-data", text)


def absurd_mixture(method: str) -> Iterator[Suspect]:
    """Pairs with which the table alone puts a simple mixture beyond anything measured.

    Parameters
    ----------
    method : str
        The table.

    Yields
    ------
    Suspect
        One per pair.
    """
    for row in read_absurd_mixtures():
        if row.method == method:
            text = (
                f"puts ln gamma at infinite dilution of {row.solute} in {row.solvent} at "
                f"{row.ln_gamma_inf:.0f}, where the other tables have {row.others_ln_gamma_inf:.0f}"
            )
            yield Suspect(method, row.i, row.j, "absurd-mixture", text)


def reachable_main_numbers(published: MethodTable) -> tuple[int, ...]:
    """Main groups that a neutral molecule can hold.

    Parameters
    ----------
    published : MethodTable
        The table.

    Returns
    -------
    tuple of int
        Main-group numbers with a subgroup whose example is no ion, ascending.
    """
    reached = {
        int(published.main_numbers[main])
        for main, smiles in zip(published.subgroup_main, published.example_smiles, strict=True)
        if Chem.GetFormalCharge(Chem.MolFromSmiles(smiles)) == 0
    }
    return tuple(sorted(reached))


def _pairs(published: MethodTable) -> Iterator[tuple[int, int, int, int]]:
    """Reachable main-group pairs i < j with their matrix indices."""
    for i, j in combinations(reachable_main_numbers(published), 2):
        yield i, j, published.main_index(i), published.main_index(j)


def _acquitted(evidence: PairEvidence | None) -> bool:
    return (
        evidence is not None
        and evidence.points >= ACQUITTAL_POINTS
        and evidence.systems >= ACQUITTAL_SYSTEMS
        and evidence.system_error <= ACQUITTAL_ERROR
    )


def _ln_gamma(published: MethodTable) -> FloatArray:
    return dilute_group_ln_gamma(table_energy_K(published, TEMPERATURES_K), TEMPERATURES_K)


def _edition_ln_gamma(published: MethodTable, edition: str) -> FloatArray:
    n = len(published.main_numbers)
    parameters = np.full((3, n, n), np.nan)
    for (i, j), texts in read_edition(edition).items():
        at = published.main_index(i), published.main_index(j)
        parameters[:, at[0], at[1]] = [float(text) for text in texts]
    a, b, c = parameters
    energy = interaction_energy_K(published.psi, a, b, c, TEMPERATURES_K)
    return dilute_group_ln_gamma(energy, TEMPERATURES_K)


def _apart(first: FloatArray, second: FloatArray, row: int, column: int) -> float:
    """Largest difference of a pair in either direction; 0 where one of the tables lacks it.

    Relative to the smaller of the two where both are beyond 1: an exponential that has grown to
    hundreds differs by tens for a digit in the last place.
    """
    both = [
        np.abs(x - y) / np.maximum(1.0, np.minimum(np.abs(x), np.abs(y)))
        for x, y in (
            (first[:, row, column], second[:, row, column]),
            (first[:, column, row], second[:, column, row]),
        )
    ]
    return 0.0 if np.isnan(both).any() else float(np.max(both))
