"""From the molecules of a request to the components of `groups`, naming the field of each fault."""

from collections.abc import Sequence
from dataclasses import dataclass

from api.schemas.molecule import MoleculeInput
from api.user_vapour_pressure import own_vapour_pressure
from groups.errors import MixwrightError
from groups.prediction import Component
from groups.structure.identify import identified, molecule_from_cas, molecule_from_name
from groups.structure.molecule import Molecule, molecule_from_smiles


class MoleculesRefusedError(Exception):
    """One or more molecules of a request cannot be taken; `faults` pairs field and error."""

    def __init__(self, faults: Sequence[tuple[str, MixwrightError]]) -> None:
        super().__init__(str(faults[0][1]))
        self.faults = tuple(faults)


@dataclass(frozen=True, slots=True)
class Refused:
    """A molecule of a batch that cannot be taken, and the field that gives it."""

    field: str
    error: MixwrightError


def molecules_of(fields: Sequence[tuple[str, MoleculeInput]]) -> list[Molecule]:
    """The molecules of a request; every fault is reported together.

    `fields` pairs the JSON pointer of each molecule with what was given there.
    """
    outcomes = _outcomes(fields)
    refuse([outcome for outcome in outcomes if isinstance(outcome, Refused)])
    return [outcome for outcome in outcomes if isinstance(outcome, Molecule)]


def batch_of(fields: Sequence[tuple[str, MoleculeInput]]) -> list[Molecule | Refused]:
    """The molecules of a batch, with a `Refused` in the place of each that cannot be taken.

    A list out of a database holds salts, unknown names and SMILES that cannot be read; one of
    them among thousands costs only its own place.
    """
    return _outcomes(fields)


def refuse(faults: Sequence[Refused]) -> None:
    """Refuse a request for these faults; without any, do nothing."""
    if faults:
        raise MoleculesRefusedError([(fault.field, fault.error) for fault in faults])


def _outcomes(fields: Sequence[tuple[str, MoleculeInput]]) -> list[Molecule | Refused]:
    """Each molecule or its refusal; one text is read once."""
    read: dict[tuple[str, str], Molecule | MixwrightError] = {}
    outcomes: list[Molecule | Refused] = []
    for field, given in fields:
        key = (given.identifier, str(getattr(given, given.identifier)))
        if key not in read:
            read[key] = _read(*key)
        outcome = read[key]
        if isinstance(outcome, MixwrightError):
            place = field if given.was_text else f"{field}/{given.identifier}"
            outcomes.append(Refused(place, outcome))
        else:
            outcomes.append(outcome)
    return outcomes


def components_of(given: Sequence[MoleculeInput]) -> list[Component]:
    """The components of a mixture, with the user's vapour pressures."""
    return components_at([(f"/components/{k}", value) for k, value in enumerate(given)])


def components_at(fields: Sequence[tuple[str, MoleculeInput]]) -> list[Component]:
    """The same from any fields; `fields` pairs the JSON pointer of each with what was given."""
    return [
        Component(
            molecule,
            None
            if value.vapour_pressure is None
            else own_vapour_pressure(value.vapour_pressure, f"{field}/vapour_pressure"),
        )
        for molecule, (field, value) in zip(molecules_of(fields), fields, strict=True)
    ]


def _read(identifier: str, text: str) -> Molecule | MixwrightError:
    readers = {
        "smiles": molecule_from_smiles,
        "name": molecule_from_name,
        "cas": molecule_from_cas,
    }
    try:
        return identified(readers[identifier](text))
    except MixwrightError as error:
        return error
