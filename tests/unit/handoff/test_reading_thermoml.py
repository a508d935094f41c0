"""ThermoML documents as archives hold them: numbers of an organisation, InChI, expanded errors."""

import numpy as np
import pytest

from groups.errors import MeasurementError
from groups.handoff.thermoml import read_thermoml
from groups.structure.identify import molecule_from_name

HEAD = '<?xml version="1.0"?><DataReport xmlns="http://www.iupac.org/namespaces/ThermoML">'
COMPOUNDS = """
<Version><nVersionMajor>2</nVersionMajor><nVersionMinor>0</nVersionMinor></Version>
<Citation><sTitle>Boiling points</sTitle><sDOI>10.1000/x</sDOI></Citation>
<Compound><RegNum><nOrgNum>1</nOrgNum></RegNum>
  <sStandardInChI>InChI=1S/C3H6O/c1-3(2)4/h1-2H3</sStandardInChI></Compound>
<Compound><RegNum><nOrgNum>2</nOrgNum></RegNum><sCommonName>methanol</sCommonName></Compound>
<Compound><RegNum><nCASRNum>7732185</nCASRNum><nOrgNum>3</nOrgNum></RegNum></Compound>
"""


def component(number: int) -> str:
    return f"<Component><RegNum><nOrgNum>{number}</nOrgNum></RegNum></Component>"


def prop(number: int, group: str, name: str, phase: str, of: int | None = None) -> str:
    reference = "" if of is None else f"<RegNum><nOrgNum>{of}</nOrgNum></RegNum>"
    return (
        f"<Property><nPropNumber>{number}</nPropNumber><Property-MethodID><PropertyGroup><{group}>"
        f"<ePropName>{name}</ePropName><eMethodName>Other</eMethodName></{group}></PropertyGroup>"
        f"{reference}</Property-MethodID><PropPhaseID><ePropPhase>{phase}</ePropPhase></PropPhaseID>"
        "<ePresentation>Direct value, X</ePresentation><CombinedUncertainty>"
        "<nCombUncertAssessNum>1</nCombUncertAssessNum><nCombCoverageFactor>4</nCombCoverageFactor>"
        "</CombinedUncertainty></Property>"
    )


def state(kind: str, inner: str, phase: str, of: int | None, value: str = "") -> str:
    short = "Var" if kind == "Variable" else "Constraint"
    reference = "" if of is None else f"<RegNum><nOrgNum>{of}</nOrgNum></RegNum>"
    return (
        f"<{kind}>{value if kind == 'Variable' else ''}<{kind}ID><{kind}Type>{inner}</{kind}Type>"
        f"{reference}</{kind}ID><{short}PhaseID><e{short}Phase>{phase}</e{short}Phase>"
        f"</{short}PhaseID>{value if kind == 'Constraint' else ''}</{kind}>"
    )


MOLE = "<eComponentComposition>Mole fraction</eComponentComposition>"
KELVIN = "<eTemperature>Temperature, K</eTemperature>"
BOILING = (
    "<PureOrMixtureData>"
    + component(1)
    + component(2)
    + prop(1, "VaporPBoilingTAzeotropTandP", "Vapor or sublimation pressure, kPa", "Liquid")
    + prop(2, "CompositionAtPhaseEquilibrium", "Mole fraction", "Gas", 2)
    + "<PhaseID><ePhase>Liquid</ePhase></PhaseID><PhaseID><ePhase>Gas</ePhase></PhaseID>"
    + state("Constraint", KELVIN, "Liquid", None, "<nConstraintValue>323.15</nConstraintValue>")
    + state("Variable", MOLE, "Liquid", 2, "<nVarNumber>1</nVarNumber>")
    + "<NumValues><VariableValue><nVarNumber>1</nVarNumber><nVarValue>0.3</nVarValue>"
    "</VariableValue><PropertyValue><nPropNumber>1</nPropNumber><nPropValue>80.5</nPropValue>"
    "<CombinedUncertainty><nCombExpandUncertValue>0.8</nCombExpandUncertValue>"
    "</CombinedUncertainty></PropertyValue><PropertyValue><nPropNumber>2</nPropNumber>"
    "<nPropValue>0.25</nPropValue></PropertyValue></NumValues></PureOrMixtureData>"
)
DILUTE = (
    "<PureOrMixtureData>"
    + component(2)
    + component(1)
    + prop(1, "ActivityFugacityOsmoticProp", "Activity coefficient", "Liquid", 2)
    + "<PhaseID><ePhase>Liquid</ePhase></PhaseID>"
    + state("Constraint", MOLE, "Liquid", 2, "<nConstraintValue>0</nConstraintValue>")
    + state("Variable", KELVIN, "Liquid", None, "<nVarNumber>1</nVarNumber>")
    + "<NumValues><VariableValue><nVarNumber>1</nVarNumber><nVarValue>310</nVarValue>"
    "</VariableValue><PropertyValue><nPropNumber>1</nPropNumber><nPropValue>1.9</nPropValue>"
    "</PropertyValue></NumValues></PureOrMixtureData>"
)
LIQUIDS = (
    "<PureOrMixtureData>"
    + component(1)
    + component(2)
    + prop(1, "CompositionAtPhaseEquilibrium", "Mole fraction", "Liquid mixture 1", 1)
    + prop(2, "CompositionAtPhaseEquilibrium", "Mole fraction", "Liquid mixture 2", 1)
    + "<PhaseID><ePhase>Liquid mixture 1</ePhase></PhaseID>"
    + state("Constraint", KELVIN, "Liquid mixture 1", None,
            "<nConstraintValue>300</nConstraintValue>")
    + "<NumValues><PropertyValue><nPropNumber>1</nPropNumber><nPropValue>0.7</nPropValue>"
    "</PropertyValue><PropertyValue><nPropNumber>2</nPropNumber><nPropValue>0.1</nPropValue>"
    "</PropertyValue></NumValues></PureOrMixtureData>"
)  # fmt: skip


@pytest.fixture(scope="module")
def two():
    return molecule_from_name("acetone"), molecule_from_name("methanol")


def test_boiling_points_with_the_other_components_fractions(two):
    found = read_thermoml(f"{HEAD}{COMPOUNDS}{BOILING}</DataReport>", two)
    v = found.measurements.vapour_liquid
    assert (v.temperature_K[0], v.pressure_kPa[0]) == (323.15, 80.5)
    assert v.x1[0] == pytest.approx(0.7)
    assert v.y1[0] == pytest.approx(0.75)
    assert v.u_pressure_kPa[0] == pytest.approx(0.2)  # expanded 0.8 with coverage factor 4
    assert (found.title, found.doi) == ("Boiling points", "10.1000/x")


def test_a_solute_fraction_of_zero_is_infinite_dilution(two):
    found = read_thermoml(f"{HEAD}{COMPOUNDS}{DILUTE}</DataReport>", two).measurements.activities
    assert (found.solute[0], found.x1[0], found.temperature_K[0]) == (1, 1.0, 310.0)
    assert found.ln_gamma[0] == pytest.approx(np.log(1.9))


def test_two_liquids_are_put_in_order(two):
    found = read_thermoml(f"{HEAD}{COMPOUNDS}{LIQUIDS}</DataReport>", two).measurements
    assert (found.solubilities.x1_poor[0], found.solubilities.x1_rich[0]) == (0.1, 0.7)


def test_solids_and_unknown_properties_are_left_out_and_said_so(two):
    solid = BOILING.replace("<ePhase>Gas</ePhase>", "<ePhase>Crystal</ePhase>")
    density = DILUTE.replace("Activity coefficient", "Mass density, kg/m3")
    found = read_thermoml(f"{HEAD}{COMPOUNDS}{BOILING}{solid}{density}</DataReport>", two)
    assert found.measurements.n_points == 1
    assert found.left_out == ("data with Crystal", "Mass density, kg/m3")


def test_other_components_are_not_mixed_up():
    other = (molecule_from_name("acetone"), molecule_from_name("water"))
    with pytest.raises(MeasurementError, match="no measured point"):
        read_thermoml(f"{HEAD}{COMPOUNDS}{BOILING}</DataReport>", other)


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("not xml", "not XML"),
        ("<DataReport/>", "namespace"),
        ("<html xmlns='http://www.iupac.org/namespaces/ThermoML'/>", "DataReport"),
        (f"<!DOCTYPE x [<!ENTITY a 'b'>]>{HEAD[21:]}</DataReport>", "document type"),
    ],
)
def test_what_is_no_thermoml_is_refused(two, text, words):
    with pytest.raises(MeasurementError, match=words):
        read_thermoml(text, two)
