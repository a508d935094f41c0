"""The published tables as data: groups, interaction parameters, sources and doubts."""

from groups.parameters.loader import METHODS, table
from groups.parameters.method_table import MethodTable
from groups.parameters.record import (
    Correction,
    DataFile,
    Difference,
    PsiForm,
    Record,
    Source,
    read_record,
)
from groups.parameters.summary import MethodSummary, method_summary
from groups.parameters.suspects import Suspect, read_suspects

__all__ = [
    "METHODS",
    "Correction",
    "DataFile",
    "Difference",
    "MethodSummary",
    "MethodTable",
    "PsiForm",
    "Record",
    "Source",
    "Suspect",
    "method_summary",
    "read_record",
    "read_suspects",
    "table",
]
