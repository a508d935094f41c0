"""The audit of the published curves, and that its list is current."""

import csv
from io import StringIO

import pytest

from groups.pure.audit import CURVE_BOUND_LN, TABLE, as_csv, audit, audit_compound


def test_the_list_in_the_project_is_what_the_audit_finds() -> None:
    found = {(f.cas, f.source): f for f in audit()}
    with TABLE.open(encoding="utf-8") as text:
        listed = {(row["cas"], row["source"]): row for row in csv.DictReader(text)}
    assert listed.keys() == found.keys(), "run: python -m groups.pure.audit --write"
    for key, row in listed.items():
        assert row["verdict"] == found[key].verdict
        # Printed to three decimals; the last may differ between machines.
        assert float(row["disagreement_ln"]) == pytest.approx(found[key].disagreement_ln, abs=2e-3)


def test_well_measured_liquids_have_no_finding() -> None:
    for cas in ("64-17-5", "71-43-2", "7732-18-5", "110-54-3", "67-56-1"):
        assert audit_compound(cas) == ()


def test_a_finding_tells_what_contradicts_and_by_how_much() -> None:
    finding = audit_compound("110-86-1")[0]
    assert (finding.source, finding.verdict) == ("landolt-antoine", "rejected")
    assert finding.disagreement_ln > CURVE_BOUND_LN
    assert finding.witness in finding.reason


def test_the_csv_holds_what_was_found() -> None:
    findings = audit_compound("110-86-1")
    rows = list(csv.DictReader(StringIO(as_csv(findings))))
    assert [row["cas"] for row in rows] == [f.cas for f in findings]
    assert [row["reason"] for row in rows] == [f.reason for f in findings]
