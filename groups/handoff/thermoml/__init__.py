"""ThermoML, the IUPAC standard for thermophysical data: predicted tables out, measurements in."""

from groups.handoff.thermoml.reading import ThermoMLPoints, read_thermoml
from groups.handoff.thermoml.tables import (
    PredictedTable,
    activity_table,
    boiling_table,
    enthalpy_table,
)
from groups.handoff.thermoml.writing import write_thermoml

__all__ = [
    "PredictedTable",
    "ThermoMLPoints",
    "activity_table",
    "boiling_table",
    "enthalpy_table",
    "read_thermoml",
    "write_thermoml",
]
