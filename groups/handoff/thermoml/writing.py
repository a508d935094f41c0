"""Write predicted data as ThermoML, marked as predicted.

The order of elements is the schema's: it is a sequence at every level.

Source: the ThermoML schema, version 4.0, namespace http://www.iupac.org/namespaces/ThermoML; the
papers stand in `vocabulary.SOURCE`.
"""

from collections.abc import Sequence
from xml.etree import ElementTree

from rdkit import Chem

from groups.errors import InvalidInputError
from groups.handoff.thermoml.tables import Column, PredictedTable
from groups.handoff.thermoml.vocabulary import (
    ACTIVITY_COEFFICIENT,
    EXCESS_ENTHALPY,
    GROUP_OF,
    KIND_OF_VARIABLE,
    NAMESPACE,
    VERSION,
)
from groups.structure.molecule import Molecule

DIGITS = 6
_SAME_T_P = "Pure components in the same proportion at the same temperature and pressure"
_NOTICE = "Predicted by a group-contribution method; no measurement."


def write_thermoml(
    molecules: Sequence[Molecule], tables: Sequence[PredictedTable], title: str
) -> str:
    """Write predicted tables of one mixture as a ThermoML document.

    Parameters
    ----------
    molecules : sequence of Molecule
        In the order of the tables' components.
    tables : sequence of PredictedTable
        At least one.
    title : str
        Title of the report.

    Returns
    -------
    str
        XML, in UTF-8 when encoded.

    Raises
    ------
    InvalidInputError
        If there is no table.
    """
    if not tables:
        raise InvalidInputError("There is nothing to write.", field="tables")
    ElementTree.register_namespace("", NAMESPACE)
    root = ElementTree.Element(_tag("DataReport"))
    version = _add(root, "Version")
    _add(version, "nVersionMajor", VERSION[0])
    _add(version, "nVersionMinor", VERSION[1])
    citation = _add(root, "Citation")
    _add(citation, "eType", "unspecified")
    _add(citation, "eSourceType", "Original")
    _add(citation, "sTitle", title)
    _add(citation, "sAbstract", _NOTICE)
    for index, molecule in enumerate(molecules, start=1):
        _compound(root, index, molecule)
    for number, table in enumerate(tables, start=1):
        _data(root, number, len(molecules), table)
    ElementTree.indent(root)
    body = ElementTree.tostring(root, encoding="unicode")
    return f'<?xml version="1.0" encoding="UTF-8"?>\n{body}\n'


def _tag(name: str) -> str:
    return f"{{{NAMESPACE}}}{name}"


def _add(
    parent: ElementTree.Element, name: str, text: str | int | None = None
) -> ElementTree.Element:
    child = ElementTree.SubElement(parent, _tag(name))
    if text is not None:
        child.text = str(text)
    return child


def _compound(root: ElementTree.Element, index: int, molecule: Molecule) -> None:
    compound = _add(root, "Compound")
    _add(compound, "nCompIndex", index)
    if molecule.cas is not None:
        _add(_add(compound, "RegNum"), "nCASRNum", molecule.cas.replace("-", ""))
    inchi = Chem.MolToInchi(molecule.mol)  # type: ignore[no-untyped-call]
    if inchi:
        _add(compound, "sStandardInChI", inchi)
        key = Chem.InchiToInchiKey(inchi)  # type: ignore[no-untyped-call]
        _add(compound, "sStandardInChIKey", key)
    if molecule.name is not None:
        _add(compound, "sCommonName", molecule.name)
    _add(compound, "sFormulaMolec", molecule.formula)
    _add(compound, "sSmiles", molecule.canonical_smiles)


def _data(root: ElementTree.Element, number: int, n: int, table: PredictedTable) -> None:
    data = _add(root, "PureOrMixtureData")
    _add(data, "nPureOrMixtureDataNumber", number)
    for index in range(1, n + 1):
        _add(_add(data, "Component"), "nCompIndex", index)
    for k, column in enumerate(table.properties, start=1):
        _property(data, k, column, table)
    for phase in table.phases:
        _add(_add(data, "PhaseID"), "ePhase", phase)
    for k, column in enumerate(table.fixed, start=1):
        constraint = _add(data, "Constraint")
        _add(constraint, "nConstraintNumber", k)
        _state(constraint, "Constraint", "ConstraintType", column)
        _add(constraint, "nConstraintValue", _text(column.values[0]))
        _add(constraint, "nConstrDigits", DIGITS)
    for k, column in enumerate(table.variables, start=1):
        variable = _add(data, "Variable")
        _add(variable, "nVarNumber", k)
        _state(variable, "Variable", "VariableType", column)
    for point in range(len(table.properties[0].values)):
        _values(data, table, point)


def _property(data: ElementTree.Element, k: int, column: Column, table: PredictedTable) -> None:
    one = _add(data, "Property")
    _add(one, "nPropNumber", k)
    method = _add(one, "Property-MethodID")
    group = _add(_add(method, "PropertyGroup"), GROUP_OF[column.quantity])
    _add(group, "ePropName", column.quantity)
    prediction = _add(group, "Prediction")
    _add(prediction, "ePredictionType", "Group contribution")
    _add(prediction, "sPredictionMethodName", table.method)
    if table.description:
        _add(prediction, "sPredictionMethodDescription", table.description)
    if column.component is not None:
        _add(method, "nCompIndex", column.component + 1)
    if column.phase is not None:
        _add(_add(one, "PropPhaseID"), "ePropPhase", column.phase)
    difference = column.quantity == EXCESS_ENTHALPY
    _add(
        one,
        "ePresentation",
        "Difference with the reference state, X-X(REF)" if difference else "Direct value, X",
    )
    if difference:
        _add(one, "eRefStateType", _SAME_T_P)
    if column.quantity == ACTIVITY_COEFFICIENT:
        _add(one, "eStandardState", "Pure compound")
    if column.standard_uncertainty is not None:
        combined = _add(one, "CombinedUncertainty")
        _add(combined, "nCombUncertAssessNum", 1)
        _add(combined, "eCombUncertEvalMethod", "Comparison with reference property values")


def _state(parent: ElementTree.Element, prefix: str, kind: str, column: Column) -> None:
    identity = _add(parent, f"{prefix}ID")
    _add(_add(identity, kind), KIND_OF_VARIABLE[column.quantity], column.quantity)
    if column.component is not None:
        _add(identity, "nCompIndex", column.component + 1)
    if column.phase is not None:
        short = "Var" if prefix == "Variable" else prefix
        _add(_add(parent, f"{short}PhaseID"), f"e{short}Phase", column.phase)


def _values(data: ElementTree.Element, table: PredictedTable, point: int) -> None:
    values = _add(data, "NumValues")
    for k, column in enumerate(table.variables, start=1):
        variable = _add(values, "VariableValue")
        _add(variable, "nVarNumber", k)
        _add(variable, "nVarValue", _text(column.values[point]))
        _add(variable, "nVarDigits", DIGITS)
    for k, column in enumerate(table.properties, start=1):
        value = _add(values, "PropertyValue")
        _add(value, "nPropNumber", k)
        _add(value, "nPropValue", _text(column.values[point]))
        _add(value, "nPropDigits", DIGITS)
        if column.standard_uncertainty is not None:
            combined = _add(value, "CombinedUncertainty")
            _add(combined, "nCombUncertAssessNum", 1)
            _add(combined, "nCombStdUncertValue", _text(column.standard_uncertainty[point]))


def _text(value: float) -> str:
    return f"{float(value):.{DIGITS}g}"
