"""How far off a number may be: weights of `auto`, intervals, grades and evidence from open data."""

from groups.confidence.calibration.addition import AddedExcess
from groups.confidence.calibration.automatic import AutoModel, auto_model
from groups.confidence.calibration.dilute import TABLES, DiluteTables, dilute_tables
from groups.confidence.calibration.evidence import evidence
from groups.confidence.calibration.intervals import (
    DiluteAnswers,
    dilute_answers,
    ln_gamma_interval,
)
from groups.confidence.calibration.mixture import TableWeight, mixture_weights, pair_weights
from groups.confidence.calibration.samples import SampledModels, sample_models

__all__ = [
    "TABLES",
    "AddedExcess",
    "AutoModel",
    "DiluteAnswers",
    "DiluteTables",
    "SampledModels",
    "TableWeight",
    "auto_model",
    "dilute_answers",
    "dilute_tables",
    "evidence",
    "ln_gamma_interval",
    "mixture_weights",
    "pair_weights",
    "sample_models",
]
