"""The search finds what trying out every selection finds."""

import random
from itertools import combinations

import pytest

from groups.structure import cover
from groups.structure.cover import Candidate, blocks, cheapest_cover

MISSING = 10**6


def candidates(rng: random.Random, bits: int, number: int) -> list[Candidate]:
    """Random candidates of one to three bits; the tally names the candidate's kind."""
    found = []
    for _ in range(number):
        chosen = rng.sample(range(bits), rng.randint(1, 3))
        kind = rng.randint(0, 3)
        found.append(Candidate(sum(1 << b for b in chosen), 1 + kind, 1 << (8 * kind), kind))
    return found


def tried_out(options: list[Candidate], block: int) -> tuple[int, set[int]]:
    """Least price and its tallies over every selection that does not overlap."""
    best, tallies = -1, set()
    for size in range(len(options) + 1):
        for selection in combinations(options, size):
            held = sum(c.bits for c in selection)
            union = 0
            for candidate in selection:
                union |= candidate.bits
            if union != held:
                continue
            price = sum(c.cost for c in selection) + MISSING * (block & ~union).bit_count()
            if best < 0 or price < best:
                best, tallies = price, set()
            if price == best:
                tallies.add(sum(c.tally for c in selection))
    return best, tallies


@pytest.mark.parametrize("seed", range(60))
def test_the_cheapest_cover_is_the_one_found_by_trying_out_all(seed: int) -> None:
    rng = random.Random(seed)
    bits = rng.randint(3, 7)
    options = candidates(rng, bits, rng.randint(2, 9))
    block = (1 << bits) - 1
    price, tallies = tried_out(options, block)
    choices = cheapest_cover(options, block, MISSING).choices
    assert set(choices) == tallies
    for tally, chosen in choices.items():
        left = block
        for index in chosen:
            assert options[index].bits & ~left == 0
            left ^= options[index].bits
        assert tally == sum(options[index].tally for index in chosen)
        assert price == sum(options[i].cost for i in chosen) + MISSING * left.bit_count()


@pytest.mark.parametrize("seed", range(20))
def test_no_candidate_crosses_a_block(seed: int) -> None:
    options = candidates(random.Random(seed), 12, 8)
    found = blocks(options)
    assert sorted(map(id, options)) == sorted(id(c) for _, inside in found for c in inside)
    for bits, inside in found:
        union = 0
        for candidate in inside:
            union |= candidate.bits
        assert union == bits
    for (first, _), (second, _) in combinations(found, 2):
        assert first & second == 0


def test_a_block_too_tangled_to_search_is_filled_largest_first(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setattr(cover, "MOST_STATES", 0)
    options = [Candidate(0b0011, 5, 1, 0), Candidate(0b0110, 5, 2, 1), Candidate(0b1100, 5, 4, 2)]
    found = cheapest_cover(options, 0b1111, MISSING)
    assert not found.searched_all
    assert found.choices == {5: (0, 2)}
