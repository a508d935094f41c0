"""Molecules as they are given, and as they come back."""

from typing import Annotated, Any, Self

from pydantic import (
    Field,
    GetJsonSchemaHandler,
    ModelWrapValidatorHandler,
    PrivateAttr,
    model_validator,
)
from pydantic.json_schema import JsonSchemaValue
from pydantic_core import CoreSchema, PydanticCustomError

from api.schemas.base import StrictModel
from api.schemas.problem import Problem
from api.schemas.vapour_pressure import VapourPressureInput

MAX_SMILES_LENGTH = 5_000  # as groups.structure takes at most


class MoleculeInput(StrictModel):
    """A molecule by exactly one of SMILES, name or CAS number; a plain text is SMILES."""

    smiles: Annotated[str, Field(max_length=MAX_SMILES_LENGTH)] | None = None
    name: Annotated[str, Field(min_length=1, max_length=300)] | None = None
    cas: Annotated[str, Field(min_length=1, max_length=20)] | None = None
    vapour_pressure: VapourPressureInput | None = None
    _was_text: bool = PrivateAttr(default=False)

    @model_validator(mode="wrap")
    @classmethod
    def _text_is_smiles(cls, value: Any, read: ModelWrapValidatorHandler[Self]) -> Self:
        if not isinstance(value, str):
            return read(value)
        molecule = read({"smiles": value})
        molecule._was_text = True
        return molecule

    @property
    def was_text(self) -> bool:
        """Given as a plain text, so that the request has no field inside."""
        return self._was_text

    @model_validator(mode="after")
    def _exactly_one_identifier(self) -> "MoleculeInput":
        given = [name for name in ("smiles", "name", "cas") if getattr(self, name) is not None]
        if len(given) != 1:
            raise PydanticCustomError(
                "one_identifier",
                "A molecule needs exactly one of 'smiles', 'name' and 'cas'; got {given}.",
                {
                    "given": " and ".join(given) or "none",
                    "cure": "Keep one of 'smiles', 'name' and 'cas'.",
                },
            )
        return self

    @property
    def identifier(self) -> str:
        """Which of the three is given."""
        if self.smiles is not None:
            return "smiles"
        return "name" if self.name is not None else "cas"

    @classmethod
    def __get_pydantic_json_schema__(
        cls, core_schema: CoreSchema, handler: GetJsonSchemaHandler
    ) -> JsonSchemaValue:
        schema = handler.resolve_ref_schema(handler(core_schema))
        as_object = dict(schema)
        schema.clear()
        schema.update(
            {
                "title": "MoleculeInput",
                "description": as_object.pop("description", ""),
                "anyOf": [
                    {"type": "string", "description": "SMILES", "examples": ["CCO"]},
                    as_object,
                ],
            }
        )
        return schema


def molecule_input(value: Any) -> MoleculeInput:
    """A molecule from a SMILES text or a mapping."""
    return MoleculeInput.model_validate(value)


class MoleculeIdentity(StrictModel):
    """Which molecule was understood."""

    canonical_smiles: str
    name: str | None
    cas: str | None
    formula: str
    molar_mass_g_mol: float


class GroupOccurrence(StrictModel):
    """One subgroup of a method in a molecule."""

    subgroup: str
    number: int = Field(description="Number of the subgroup in the published table.")
    main_group: str
    main_number: int
    count: int
    atoms: list[list[int]] = Field(
        description="Per occurrence, its heavy atoms: indices into canonical_smiles, from 0."
    )


class AlternativeGroup(StrictModel):
    """A subgroup and its count in another, equally good assignment."""

    number: int
    count: int


class GroupAssignment(StrictModel):
    """The groups of one molecule in one method."""

    complete: bool = Field(description="True if every atom is in exactly one group.")
    groups: list[GroupOccurrence]
    unassigned_atoms: list[int]
    explanation: str | None = Field(description="Which functional group the table lacks.")
    alternatives: list[list[AlternativeGroup]]


class MoleculeResult(StrictModel):
    """One molecule and its groups by method; null, with `problem`, where it cannot be taken."""

    canonical_smiles: str | None
    name: str | None
    cas: str | None
    formula: str | None
    molar_mass_g_mol: float | None
    assignments: dict[str, GroupAssignment]
    problem: Problem | None = None


class MoleculesRequest(StrictModel):
    """Molecules to identify and split into groups."""

    molecules: list[MoleculeInput] = Field(min_length=1)
    methods: list[str] = Field(default=["unifac", "unifac-dortmund"], min_length=1, max_length=20)


class MoleculesResponse(StrictModel):
    """One result a molecule, in the order of the request."""

    results: list[MoleculeResult]


class DepictionRequest(StrictModel):
    """A molecule to draw with its groups."""

    molecule: MoleculeInput
    method: str = "unifac-dortmund"
