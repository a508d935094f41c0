"""Names of the ThermoML schema that are used here, and what they are called in this project."""

NAMESPACE = "http://www.iupac.org/namespaces/ThermoML"
VERSION = (4, 0)
SOURCE = (
    "Frenkel, Chirico, Diky, Dong, Frenkel, Franchois, Embry, Teague, Marsh & Wilhoit, "
    "J. Chem. Eng. Data 48 (2003) 2; IUPAC Recommendations 2006, Pure Appl. Chem. 78 (2006) 541"
)

PRESSURE = "Vapor or sublimation pressure, kPa"
TEMPERATURE = "Boiling temperature at pressure P, K"
MOLE_FRACTION = "Mole fraction"
MASS_FRACTION = "Mass fraction"
ACTIVITY_COEFFICIENT = "Activity coefficient"
EXCESS_ENTHALPY = "Excess molar enthalpy (molar enthalpy of mixing), kJ/mol"

GROUP_OF = {
    PRESSURE: "VaporPBoilingTAzeotropTandP",
    TEMPERATURE: "VaporPBoilingTAzeotropTandP",
    MOLE_FRACTION: "CompositionAtPhaseEquilibrium",
    ACTIVITY_COEFFICIENT: "ActivityFugacityOsmoticProp",
    EXCESS_ENTHALPY: "ExcessPartialApparentEnergyProp",
}
"""The property group that each property stands in."""

KIND_OF_VARIABLE = {
    "Temperature, K": "eTemperature",
    "Pressure, kPa": "ePressure",
    "Mole fraction": "eComponentComposition",
}
