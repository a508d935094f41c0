"""Names of fields as the sender wrote them."""

from collections.abc import Iterator
from contextlib import contextmanager

from groups.errors import InvalidInputError

_ROW = "mole_fractions[0]"


@contextmanager
def one_composition() -> Iterator[None]:
    """Name the faults of a flat list of mole fractions.

    `groups` takes compositions as rows and names the first one; a request with a single
    composition has no rows.
    """
    try:
        yield
    except InvalidInputError as error:
        if error.field is not None and error.field.startswith(_ROW):
            error.field = "mole_fractions" + error.field[len(_ROW) :]
        raise
