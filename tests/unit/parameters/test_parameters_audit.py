"""The audit's rules find what they should, and the committed list is what they find today."""

import dataclasses

import numpy as np
import pytest

from groups.parameters import METHODS, audit, audit_rules, read_suspects, table
from groups.parameters.interaction_energy import dilute_group_ln_gamma, interaction_energy_K
from groups.parameters.open_data import (
    MeasuredPoint,
    evidence_csv,
    pair_evidence,
    read_open_data,
)


def test_the_list_of_suspects_is_current() -> None:
    assert audit.find_suspects() == read_suspects(), "run the audit with --write"


def test_the_command_agrees_with_the_files(capsys: pytest.CaptureFixture[str]) -> None:
    assert audit.main([]) == 0
    printed = capsys.readouterr().out
    assert "not current" not in printed
    for method in METHODS:
        assert f"{method}: " in printed


def test_the_command_writes_what_is_not_current(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    written: dict[str, str] = {}
    monkeypatch.setattr(audit, "find_suspects", lambda: ())
    monkeypatch.setattr(audit, "_write", lambda name, text: written.update({name: text}))
    assert audit.main([]) == 1
    assert "not current" in capsys.readouterr().out
    assert written == {}
    assert audit.main(["--write"]) == 0
    assert written == {"suspects.csv": "method,i,j,rule,reason\n"}


def test_a_suspect_is_known_to_its_table_by_an_ascending_pair() -> None:
    for suspect in read_suspects():
        assert suspect.i < suspect.j
        assert suspect.reason in table(suspect.method).suspects[suspect.i, suspect.j]


@pytest.mark.parametrize("method", METHODS)
def test_suspects_are_rare(method: str) -> None:
    """A warning on more than a tenth of the published pairs would be read by nobody.

    The liquid-liquid table was fitted to compositions of liquids at 10 to 40 degrees Celsius alone;
    away from them, where it is asked here, a quarter is allowed.
    """
    published = table(method)
    pairs = np.count_nonzero(~np.isnan(published.a + published.a.T)) / 2
    assert len(published.suspects) < (0.25 if method == "unifac-lle" else 0.1) * pairs


def two_groups(a: float, b: float = 0.0, *, back: float = 10.0) -> object:
    """The first two main groups of UNIFAC with parameters of our own."""
    original = table("unifac")
    matrices = {name: np.full_like(original.a, np.nan) for name in "abc"}
    for matrix in matrices.values():
        np.fill_diagonal(matrix, 0.0)
    for name, value in (("a", a), ("b", b), ("c", 0.0)):
        matrices[name][0, 1] = value
        matrices[name][1, 0] = np.nan if np.isnan(back) else (back if name == "a" else 0.0)
    return dataclasses.replace(original, psi="quadratic", **matrices)


@pytest.mark.parametrize(
    ("a", "b", "found"),
    [
        (-4100.0, 0.0, []),
        (-4300.0, 0.0, ["attraction"]),
        (11900.0, 0.0, []),
        (12100.0, 0.0, ["repulsion"]),
        (-2000.0, -6.0, ["attraction"]),  # -2000 - 6 x 423.15 = -4539 K at the upper end only
    ],
)
def test_an_energy_beyond_its_bounds_is_found(
    monkeypatch: pytest.MonkeyPatch, a: float, b: float, found: list[str]
) -> None:
    monkeypatch.setattr(audit_rules, "table", lambda _: two_groups(a, b))
    suspects = list(audit_rules.unphysical_energy("unifac", {}))
    assert [s.reason.split()[0] for s in suspects] == found
    assert [(s.i, s.j) for s in suspects] == [(1, 2)] * len(found)


def test_measured_data_acquit_a_large_parameter(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(audit_rules, "table", lambda _: two_groups(13000.0))
    good = next(iter(pair_evidence("unifac", measured({(1, 2)}, 0.2, systems=6, each=4))))
    poor = dataclasses.replace(good, points=4)
    assert list(audit_rules.unphysical_energy("unifac", {("unifac", 1, 2): good})) == []
    assert len(list(audit_rules.unphysical_energy("unifac", {("unifac", 1, 2): poor}))) == 1


def test_a_gap_in_one_direction_is_found(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(audit_rules, "table", lambda _: two_groups(100.0, back=float("nan")))
    assert [(s.i, s.j) for s in audit_rules.one_direction_only("unifac")] == [(1, 2)]


@pytest.mark.parametrize(("a", "back", "word"), [(0.0, 0.0, "both"), (0.0, 5.0, "one")])
def test_an_exact_zero_is_found(
    monkeypatch: pytest.MonkeyPatch, a: float, back: float, word: str
) -> None:
    monkeypatch.setattr(audit_rules, "table", lambda _: two_groups(a, back=back))
    assert [s.reason.split()[0] for s in audit_rules.exactly_zero("unifac")] == [word]


def test_an_unsettled_dispute_of_editions_is_found(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(audit_rules, "read_choices", lambda: ())
    found = {(s.i, s.j) for s in audit_rules.editions_disagree({})}
    assert (18, 42) in found  # the slip that was known beforehand


def test_ions_are_out_of_reach() -> None:
    reached = audit_rules.reachable_main_numbers(table("unifac-dortmund"))
    assert 42 in reached and not {84, 85, 99} & set(reached)


def measured(
    pairs: set[tuple[int, int]], error: float, *, systems: int, each: int, others: float = 0.2
) -> list[MeasuredPoint]:
    name = "+".join(f"{i}-{j}" for i, j in sorted(pairs))
    return [
        MeasuredPoint(frozenset(pairs), f"{name} system {k}", error, others)
        for k in range(systems)
        for _ in range(each)
    ]


def blamed(points: list[MeasuredPoint]) -> list[tuple[int, int]]:
    return [(row.i, row.j) for row in pair_evidence("unifac", points) if row.blow_up]


def test_blame_is_laid_on_the_pair_and_not_on_its_company() -> None:
    bad = measured({(1, 2), (1, 3), (2, 3)}, 2.0, systems=4, each=3)
    good = measured({(1, 2)}, 0.1, systems=9, each=3) + measured({(1, 3)}, 0.1, systems=9, each=3)
    assert blamed(bad + good) == [(2, 3)]


def test_blame_needs_systems_points_and_better_tables() -> None:
    assert blamed(measured({(1, 2)}, 1.5, systems=3, each=3)) == [(1, 2)]
    assert blamed(measured({(1, 2)}, 1.5, systems=2, each=9)) == []
    assert blamed(measured({(1, 2)}, 1.5, systems=3, each=2)) == []
    assert blamed(measured({(1, 2)}, 1.5, systems=3, each=3, others=1.0)) == []
    assert blamed(measured({(1, 2)}, 2.5, systems=2, each=2)) == [(1, 2)]
    assert blamed(measured({(1, 2)}, 2.5, systems=1, each=9)) == []
    assert blamed(measured({(1, 2)}, 3.5, systems=1, each=3)) == [(1, 2)]
    assert blamed(measured({(1, 2)}, 3.5, systems=1, each=2)) == []
    assert blamed(measured({(1, 2)}, 0.9, systems=3, each=3)) == []


def test_one_wild_system_does_not_make_a_blow_up() -> None:
    points = measured({(1, 2)}, 0.1, systems=4, each=3)
    wild = MeasuredPoint(frozenset({(1, 2)}), "wild", -1e6, 0.2)
    assert blamed([*points, wild, wild, wild]) == []


def test_statistics_are_written_and_read_alike() -> None:
    committed = tuple(read_open_data().values())
    assert len(committed) > 1000
    assert evidence_csv(committed).count("\n") == len(committed) + 1


def test_the_statistics_count_points_and_systems() -> None:
    points = measured({(1, 2)}, -0.5, systems=2, each=3) + measured(
        {(1, 2), (1, 3)}, 1.0, systems=1, each=2
    )
    row = pair_evidence("unifac", points)[0]
    assert (row.i, row.j, row.points, row.systems) == (1, 2, 8, 3)
    assert row.system_error == 0.5  # median of 0.5, 0.5, 1.0
    assert row.mean_error == pytest.approx((6 * -0.5 + 2 * 1.0) / 8)


def test_the_interaction_energy_follows_the_published_forms() -> None:
    one = np.ones((1, 1))
    # Worked by hand: 2 + 3 x 300 + 0.01 x 300^2 = 1802.
    quadratic = interaction_energy_K("quadratic", 2 * one, 3 * one, 0.01 * one, [300.0])
    assert quadratic[0, 0, 0] == pytest.approx(1802.0)
    # At T0 the logarithmic form leaves a; at 350 K: 5 + 2 (51.85) + 3 (350 ln(298.15/350) + 51.85)
    # = 5 + 103.7 + 3 (-56.120 + 51.85) = 95.89, to the digits carried.
    logarithmic = interaction_energy_K("logarithmic", 5 * one, 2 * one, 3 * one, [298.15, 350.0])
    assert logarithmic[:, 0, 0] == pytest.approx([5.0, 95.89], abs=0.02)


def test_the_dilute_group_follows_from_both_directions() -> None:
    energy = np.array([[[0.0, 300.0], [-300.0, 0.0]]])
    # ln psi_12 = -1 and ln psi_21 = +1 at 300 K: group 1 in 2: 1 - 1 - exp(-1); 2 in 1: 1 + 1 - e.
    found = dilute_group_ln_gamma(energy, [300.0])[0]
    assert found[0, 1] == pytest.approx(-np.exp(-1.0))
    assert found[1, 0] == pytest.approx(2.0 - np.e)
    assert found[0, 0] == 0.0
