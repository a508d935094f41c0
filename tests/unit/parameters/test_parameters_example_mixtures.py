"""Blame for an absurd mixture is laid on the pair that its simplest mixtures tell of."""

from groups.parameters.example_mixtures import (
    ExampleMixture,
    absurd_csv,
    absurd_pairs,
    read_absurd_mixtures,
)


def mixture(
    solute: set[int], solvent: set[int], ln_gamma: float, others: float = 1.0, name: str = "C"
) -> ExampleMixture:
    return ExampleMixture("CC", name, frozenset(solute), frozenset(solvent), ln_gamma, others)


def blamed(*mixtures: ExampleMixture) -> list[tuple[int, int]]:
    return [(row.i, row.j) for row in absurd_pairs("unifac", mixtures)]


def test_a_mixture_is_absurd_only_beyond_measured_values_and_the_other_tables() -> None:
    assert mixture({1}, {2}, 12.1).absurd
    assert mixture({1}, {2}, -7.1).absurd
    assert not mixture({1}, {2}, 11.9).absurd
    assert not mixture({1}, {2}, 12.1, others=9.0).absurd  # e^3.1 = 22 apart
    assert not mixture({1}, {2}, 20.0, name="O").absurd  # long chains in water
    assert mixture({1}, {2}, 26.0, name="O").absurd


def test_the_simplest_mixture_clears_a_pair_that_a_larger_one_accuses() -> None:
    phenol_in_ccl4, benzene_in_ccl4 = mixture({3, 8}, {24}, 22.0), mixture({3}, {24}, 0.1)
    assert blamed(phenol_in_ccl4, benzene_in_ccl4) == [(8, 24)]
    assert blamed(benzene_in_ccl4, phenol_in_ccl4) == [(8, 24)]


def test_a_pair_within_one_molecule_is_not_told_of() -> None:
    assert blamed(mixture({3, 8}, {3, 24}, 22.0)) == [(8, 24)]


def test_one_odd_example_among_five_blames_no_pair() -> None:
    ordinary = [mixture({1}, {2}, 1.0)] * 4
    assert blamed(mixture({1}, {2}, 22.0), *ordinary) == []
    assert blamed(mixture({1}, {2}, 22.0), *ordinary[:3]) == [(1, 2)]


def test_findings_are_written_and_read_alike() -> None:
    committed = read_absurd_mixtures()
    assert committed
    assert absurd_csv(committed).count("\n") == len(committed) + 1
    for row in committed:
        assert row.i < row.j and abs(row.ln_gamma_inf - row.others_ln_gamma_inf) > 3.9
