"""Correlative liquid models (NRTL, UNIQUAC, Wilson, van Laar, Margules) with all derivatives."""

from groups.handoff.correlations.build import BINARY_ONLY, CORRELATIONS, correlative_model
from groups.handoff.correlations.model import CorrelativeModel, Interactions
from groups.handoff.correlations.temperature_forms import FORMS, form_text

__all__ = [
    "BINARY_ONLY",
    "CORRELATIONS",
    "FORMS",
    "CorrelativeModel",
    "Interactions",
    "correlative_model",
    "form_text",
]
