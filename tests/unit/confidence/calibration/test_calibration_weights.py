"""The rule by which `auto` weighs the tables, on hand-made cases."""

import numpy as np
import pytest

from groups.confidence.calibration import TABLES, mixture_weights
from groups.confidence.calibration.weights import DISPUTED, weights_from
from groups.structure.molecule import molecule_from_smiles

N = len(TABLES)
FITTED, NIST, COMPLETED = (
    TABLES.index(name) for name in ("unifac-dortmund", "unifac-nist", "unifac-dortmund-2.0")
)


def weigh(distance, disputed=0.0, available=None, completed=(), suspect=()):
    known = np.zeros((1, N), dtype=bool)
    known[0, list(range(N) if available is None else available)] = True
    flags = np.zeros((2, 1, N), dtype=bool)
    flags[0, 0, list(completed)] = True
    flags[1, 0, list(suspect)] = True
    whole = np.full((1, N), np.nan)
    whole[0, known[0]] = distance
    return weights_from(whole, np.array([disputed]), known, *flags)[0]


def test_weights_sum_to_one_and_are_not_negative():
    found = weigh(np.linspace(0.0, 1.0, N), disputed=0.3)
    assert found.sum() == pytest.approx(1.0, abs=1e-12)
    assert found.min() >= 0.0


def test_completed_tables_have_no_vote_where_fitted_tables_agree():
    assert weigh(np.zeros(N), disputed=0.0)[COMPLETED] == 0.0


def test_completed_tables_gain_weight_as_fitted_tables_disagree():
    shares = [weigh(np.zeros(N), disputed=d)[COMPLETED] for d in (0.1, DISPUTED, 1.0)]
    assert shares == sorted(shares)
    assert shares[-1] > shares[0] > 0.0


def test_a_table_far_from_all_others_gets_no_weight():
    distance = np.full(N, 0.05)
    distance[FITTED] = 3.0  # a factor 20 in gamma
    assert weigh(distance)[FITTED] == 0.0


def test_the_only_table_gets_all_the_weight_even_if_far():
    assert weigh([3.0], available=[FITTED])[FITTED] == 1.0


def test_the_weight_of_a_suspect_table_falls():
    sound = weigh(np.full(2, 0.1), available=[FITTED, NIST])
    doubted = weigh(np.full(2, 0.1), available=[FITTED, NIST], suspect=[NIST])
    assert doubted[NIST] < sound[NIST]


def test_no_table_gives_no_weight():
    assert not weigh([], available=[]).any()


def test_a_mixture_is_weighed_alike_in_any_order():
    molecules = [molecule_from_smiles(smiles) for smiles in ("CCO", "O", "CC(C)=O")]
    forward = {one.method: one.weight for one in mixture_weights(molecules)}
    backward = {one.method: one.weight for one in mixture_weights(molecules[::-1])}
    assert forward == pytest.approx(backward, abs=1e-12)
    assert sum(forward.values()) == pytest.approx(1.0, abs=1e-12)


def test_fitted_tables_dominate_ethanol_with_water():
    molecules = [molecule_from_smiles(smiles) for smiles in ("CCO", "O")]
    weights = {one.method: one.weight for one in mixture_weights(molecules)}
    assert weights["unifac-dortmund"] + weights["unifac-nist"] > 0.7


def test_refused_estimates_leave_completed_parameters_out():
    # Thiophene with a sulfone: no fitted table has the pair, the 2.0 tables completed it.
    molecules = [molecule_from_smiles(smiles) for smiles in ("c1ccsc1", "C1CCS(=O)(=O)C1")]
    found = {one.method for one in mixture_weights(molecules, "estimate")}
    assert found == {"unifac-dortmund-2.0", "unifac-2.0"}
    assert mixture_weights(molecules, "refuse") == ()
