"""Reading the published collections."""

import numpy as np
import pytest

from groups.pure.coefficients import (
    Candidate,
    candidates,
    every_registry_number,
    name_of,
    rising_part,
    source_records,
)
from groups.pure.equations import Antoine, Dippr101


def test_the_collections_come_in_order_of_precedence() -> None:
    keys = [record.key for record in source_records()]
    found = [c.record.key for c in candidates("64-17-5")]
    assert len(found) >= 5
    assert found == [key for key in keys if key in found]


def test_a_compound_that_none_holds_has_no_candidate() -> None:
    assert candidates("0-00-0") == ()
    assert name_of("0-00-0") == ""


def test_every_registry_number_has_its_form_and_a_name() -> None:
    numbers = every_registry_number()
    assert len(numbers) > 6000  # the largest collection alone holds 6,346 compounds
    assert all(number.count("-") == 2 for number in numbers)
    assert name_of("64-17-5").lower() == "ethanol"


def test_what_is_covered_is_the_common_part() -> None:
    c = Candidate(source_records()[0], Antoine(14.0, 3000.0, -40.0), (), (300.0, 400.0))
    assert c.covered_K((350.0, 450.0)) == 50.0
    assert c.covered_K((450.0, 500.0)) == 0.0


def test_a_range_ends_where_the_pressure_would_fall() -> None:
    # d ln P/dT = 4000/T^2 - 1e-4 T is zero at the cube root of 4e7, 342 K.
    curve = Dippr101(10.0, -4000.0, 0.0, -5e-5, 2.0)
    part = rising_part(curve, (280.0, 380.0))
    assert part is not None
    assert part[0] == 280.0
    assert part[1] == pytest.approx(4e7 ** (1 / 3), abs=1.0)  # the grid has steps of 1 K
    assert np.all(curve.slope(np.array(part)) > 0.0)


def test_a_range_that_makes_no_sense_is_dropped() -> None:
    assert rising_part(Antoine(14.0, 3000.0, -40.0), (400.0, 300.0)) is None
    assert rising_part(Antoine(14.0, -3000.0, -40.0), (300.0, 400.0)) is None
