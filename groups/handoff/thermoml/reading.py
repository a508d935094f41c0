"""Read measured points of one binary out of a ThermoML document.

What is read: boiling pressures and temperatures with or without the vapour, activity coefficients
(at infinite dilution where the solute's fraction is zero or not stated), two liquids, and excess
molar enthalpies. What is marked as predicted, and everything else, is left out and said so.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from xml.etree import ElementTree

from rdkit import Chem, rdBase

from groups.errors import MeasurementError, StructureError
from groups.handoff.comparisons.columns import Cell
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.reading import read_records
from groups.handoff.thermoml.vocabulary import (
    ACTIVITY_COEFFICIENT,
    EXCESS_ENTHALPY,
    MASS_FRACTION,
    MOLE_FRACTION,
    NAMESPACE,
    PRESSURE,
    TEMPERATURE,
)
from groups.structure.identify import molecule_from_cas, molecule_from_name
from groups.structure.molecule import Molecule, molecule_from_smiles

LARGEST_BYTES = 20_000_000
_LIQUIDS = ("Liquid mixture 1", "Liquid mixture 2", "Liquid mixture 3")
_FLUID = {"Liquid", "Gas", *_LIQUIDS}
_COVERAGE = 2.0  # of an expanded uncertainty where the document states no factor

Element = ElementTree.Element


@dataclass(frozen=True, slots=True)
class ThermoMLPoints:
    """Measured points of one binary, the document's title and DOI, and what was left out."""

    measurements: Measurements
    title: str
    doi: str
    left_out: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class _Quantity:
    """One property, variable or constraint of a data block."""

    name: str
    component: int | None
    phase: str
    predicted: bool = False


@dataclass(slots=True)
class _Row:
    """One point while it is put together; fractions by phase."""

    cells: dict[str, Cell] = field(default_factory=dict)
    fractions: dict[str, float] = field(default_factory=dict)
    unit: str = MOLE_FRACTION


def read_thermoml(document: str | bytes, molecules: tuple[Molecule, Molecule]) -> ThermoMLPoints:
    """Read the measured points of two components.

    Parameters
    ----------
    document : str or bytes
        ThermoML, at most 20 MB; a document type declaration is refused.
    molecules : tuple of Molecule
        Component 1 and component 2 of the answer.

    Returns
    -------
    ThermoMLPoints

    Raises
    ------
    MeasurementError
        If the text is no ThermoML, or holds no measured point of these two that can be used.
    TooFewPointsError
        If the points are too few or too many.
    """
    root = _parsed(document)
    places = _places(root, molecules)
    rows: list[dict[str, Cell]] = []
    left_out: list[str] = []
    for block in _children(root, "PureOrMixtureData"):
        inside = [_reference(c) for c in _children(block, "Component")]
        if {places.get(k, -1) for k in inside} != {0, 1} or len(inside) != 2:
            continue
        rows += _block(block, places, left_out)
    if not rows:
        said = "; ".join(dict.fromkeys(left_out))
        raise MeasurementError(
            "The document holds no measured point of these two components that can be compared."
            + (f" Left out: {said}." if said else ""),
            cure="Check the components, and that the data are measured boiling points, activity "
            "coefficients, two liquids or excess enthalpies.",
            field="thermoml",
        )
    masses = (molecules[0].molar_mass_g_mol, molecules[1].molar_mass_g_mol)
    return ThermoMLPoints(
        read_records(rows, masses),
        _path(root, "Citation", "sTitle"),
        _path(root, "Citation", "sDOI"),
        tuple(dict.fromkeys(left_out)),
    )


def _parsed(document: str | bytes) -> Element:
    data = document.encode() if isinstance(document, str) else document
    # Entities can only be declared in a document type; ThermoML has a schema instead.
    if len(data) > LARGEST_BYTES or b"<!DOCTYPE" in data or b"<!ENTITY" in data:
        raise MeasurementError(
            "The document is too large or declares a document type; ThermoML has none.",
            cure="Give a plain ThermoML file.",
            field="thermoml",
        )
    try:
        root = ElementTree.fromstring(data)
    except ElementTree.ParseError as error:
        raise MeasurementError(f"This is not XML: {error}.", field="thermoml") from error
    if _local(root) != "DataReport" or not root.tag.startswith(f"{{{NAMESPACE}}}"):
        raise MeasurementError(
            "The root of a ThermoML document is DataReport of the namespace " + NAMESPACE + ".",
            cure="Give a ThermoML file.",
            field="thermoml",
        )
    return root


def _local(element: Element) -> str:
    return element.tag.rpartition("}")[2]


def _children(parent: Element, name: str) -> Iterator[Element]:
    return (child for child in parent if _local(child) == name)


def _path(parent: Element, *names: str) -> str:
    """Text at the end of a path of first children; empty where it breaks off."""
    for name in names:
        found = next(_children(parent, name), None)
        if found is None:
            return ""
        parent = found
    return (parent.text or "").strip()


def _deep(parent: Element, name: str) -> Element | None:
    return next((one for one in parent.iter() if _local(one) == name), None)


def _reference(parent: Element) -> str:
    """What a component is referred to by: its index, or its organisation or CAS number."""
    index = _path(parent, "nCompIndex")
    if index:
        return f"index {index}"
    number = _path(parent, "RegNum", "nOrgNum")
    return f"number {number}" if number else f"cas {_path(parent, 'RegNum', 'nCASRNum')}"


def _places(root: Element, molecules: tuple[Molecule, Molecule]) -> dict[str, int]:
    """From every way to refer to one of the two components to its place, 0 or 1."""
    wanted = [molecule.canonical_smiles for molecule in molecules]
    found: dict[str, int] = {}
    for compound in _children(root, "Compound"):
        smiles = _smiles(compound)
        if smiles not in wanted:
            continue
        place = wanted.index(smiles)
        for key, text in (
            ("index", _path(compound, "nCompIndex")),
            ("number", _path(compound, "RegNum", "nOrgNum")),
            ("cas", _path(compound, "RegNum", "nCASRNum")),
        ):
            if text:
                found[f"{key} {text}"] = place
    return found


def _smiles(compound: Element) -> str | None:
    """Canonical SMILES by SMILES, InChI, CAS number or name, whichever is understood first."""
    for text in (_path(compound, "sSmiles"), _from_inchi(_path(compound, "sStandardInChI"))):
        if text:
            try:
                return molecule_from_smiles(text).canonical_smiles
            except StructureError:
                pass
    number = _path(compound, "RegNum", "nCASRNum")
    if len(number) > 4 and number.isdigit():
        try:
            cas = f"{number[:-3]}-{number[-3:-1]}-{number[-1]}"
            return molecule_from_cas(cas).canonical_smiles
        except StructureError:
            pass
    for name in (*_children(compound, "sCommonName"), *_children(compound, "sIUPACName")):
        try:
            return molecule_from_name((name.text or "").strip()).canonical_smiles
        except StructureError:
            continue
    return None


def _from_inchi(inchi: str) -> str:
    if not inchi:
        return ""
    with rdBase.BlockLogs():
        mol = Chem.MolFromInchi(inchi)  # type: ignore[no-untyped-call]
    return "" if mol is None else Chem.MolToSmiles(mol)


def _block(block: Element, places: Mapping[str, int], left_out: list[str]) -> list[dict[str, Cell]]:
    phases = {_path(one, "ePhase") for one in _children(block, "PhaseID")}
    if not phases <= _FLUID:
        left_out.append(f"data with {', '.join(sorted(phases - _FLUID))}")
        return []
    properties = {
        _path(one, "nPropNumber"): _property(one, places) for one in _children(block, "Property")
    }
    kept = {}
    for number, quantity in properties.items():
        if quantity.predicted:
            left_out.append(f"{quantity.name} (predicted)")
        elif not _known(quantity):
            left_out.append(quantity.name)
        else:
            kept[number] = quantity
    if not kept:
        return []
    factors = _coverage_factors(block)
    variables = {
        _path(one, "nVarNumber"): _state(one, "Variable", places)
        for one in _children(block, "Variable")
    }
    constant = _Row()
    for one in _children(block, "Constraint"):
        value = _number(_path(one, "nConstraintValue"))
        _put(constant, _state(one, "Constraint", places), value, None)
    rows = []
    for values in _children(block, "NumValues"):
        row = _Row(dict(constant.cells), dict(constant.fractions), constant.unit)
        for one in _children(values, "VariableValue"):
            varied = variables.get(_path(one, "nVarNumber"))
            if varied is not None:
                _put(row, varied, _number(_path(one, "nVarValue")), _uncertainty(one, _COVERAGE))
        for one in _children(values, "PropertyValue"):
            number = _path(one, "nPropNumber")
            if number in kept and _path(one, "nPropValue"):
                u = _uncertainty(one, factors.get(number, _COVERAGE))
                _put(row, kept[number], _number(_path(one, "nPropValue")), u)
        rows += _finished(row)
    return rows


def _known(quantity: _Quantity) -> bool:
    if quantity.name in (MOLE_FRACTION, MASS_FRACTION):
        return quantity.phase in _FLUID
    return quantity.name in (PRESSURE, TEMPERATURE, ACTIVITY_COEFFICIENT, EXCESS_ENTHALPY)


def _property(one: Element, places: Mapping[str, int]) -> _Quantity:
    method = next(_children(one, "Property-MethodID"), None)
    name = "" if method is None else _text_of(_deep(method, "ePropName"))
    component = None if method is None else places.get(_reference(method))
    predicted = method is not None and _deep(method, "Prediction") is not None
    return _Quantity(name, component, _path(one, "PropPhaseID", "ePropPhase"), predicted)


def _state(one: Element, prefix: str, places: Mapping[str, int]) -> _Quantity:
    identity = next(_children(one, f"{prefix}ID"), None)
    if identity is None:
        return _Quantity("", None, "")
    kind = next(_children(identity, f"{prefix}Type"), None)
    name = "" if kind is None or not len(kind) else _text_of(kind[0])
    short = "Var" if prefix == "Variable" else prefix
    phase = _path(one, f"{short}PhaseID", f"e{short}Phase")
    return _Quantity(name, places.get(_reference(identity)), phase)


def _text_of(element: Element | None) -> str:
    return "" if element is None else (element.text or "").strip()


def _number(text: str) -> float:
    try:
        return float(text)
    except ValueError as error:
        raise MeasurementError(f"'{text}' is no number.", field="thermoml") from error


def _coverage_factors(block: Element) -> dict[str, float]:
    """Coverage factor of the expanded uncertainties of each property."""
    found = {}
    for one in _children(block, "Property"):
        factor = _path(one, "CombinedUncertainty", "nCombCoverageFactor")
        factor = factor or _path(one, "PropUncertainty", "nCoverageFactor")
        if factor and _number(factor) > 0.0:
            found[_path(one, "nPropNumber")] = _number(factor)
    return found


def _uncertainty(value: Element, factor: float) -> float | None:
    """Standard uncertainty of one number, where one is stated."""
    for name, scale in (
        ("nCombStdUncertValue", 1.0),
        ("nStdUncertValue", 1.0),
        ("nCombExpandUncertValue", factor),
        ("nExpandUncertValue", factor),
    ):
        text = _text_of(_deep(value, name))
        if text and _number(text) > 0.0:
            return _number(text) / scale
    return None


_CELL_OF = {
    "Temperature, K": "temperature",
    "Pressure, kPa": "pressure",
    PRESSURE: "pressure",
    TEMPERATURE: "temperature",
}


def _put(row: _Row, quantity: _Quantity, value: float, u: float | None) -> None:
    """Write one number into the row it belongs to."""
    if quantity.name in _CELL_OF:
        name = _CELL_OF[quantity.name]
        row.cells[name] = value
        if u is not None:
            row.cells[f"u_{name}"] = u
    elif quantity.name in (MOLE_FRACTION, MASS_FRACTION) and quantity.component is not None:
        row.unit = quantity.name
        share = value if quantity.component == 0 else 1.0 - value
        row.fractions[quantity.phase or "Liquid"] = share
        if u is not None and quantity.phase in ("Liquid", "Gas"):
            row.cells["u_y1" if quantity.phase == "Gas" else "u_x1"] = u
    elif quantity.name == ACTIVITY_COEFFICIENT and quantity.component is not None:
        row.cells[f"gamma_{quantity.component + 1}"] = value
        if u is not None:
            row.cells["u_gamma"] = u / value
    elif quantity.name == EXCESS_ENTHALPY:
        row.cells["excess_enthalpy_kJ_mol"] = value
        if u is not None:
            row.cells["u_excess_enthalpy_kJ_mol"] = u


def _finished(row: _Row) -> list[dict[str, Cell]]:
    """The row as a record; none where it says nothing."""
    cells, suffix = dict(row.cells), "" if row.unit == MOLE_FRACTION else "_mass"
    liquids = sorted(row.fractions[phase] for phase in _LIQUIDS if phase in row.fractions)
    if liquids:
        cells = {"temperature": cells.get("temperature")}
        if len(liquids) > 1 or liquids[0] < 0.5:
            cells[f"x1_poor{suffix}"] = liquids[0]
        if len(liquids) > 1 or liquids[0] >= 0.5:
            cells[f"x1_rich{suffix}"] = liquids[-1]
        return [cells]
    if "Liquid" in row.fractions:
        cells[f"x1{suffix}"] = row.fractions["Liquid"]
    if "Gas" in row.fractions:
        cells[f"y1{suffix}"] = row.fractions["Gas"]
    has_gamma = [k for k in (1, 2) if f"gamma_{k}" in cells]
    for k in has_gamma:
        at = row.fractions.get("Liquid")
        if at is None or at == (0.0 if k == 1 else 1.0):
            cells[f"gamma_inf_{k}"] = cells.pop(f"gamma_{k}")
    if has_gamma or "excess_enthalpy_kJ_mol" in cells:
        cells.pop("pressure", None)
        cells.pop("u_pressure", None)
    said = {"pressure", "excess_enthalpy_kJ_mol", "gamma_1", "gamma_2"} & set(cells)
    said |= {name for name in cells if name.startswith("gamma_inf")}
    return [cells] if said else []
