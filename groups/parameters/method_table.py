"""One published table as arrays."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from itertools import combinations

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.errors import DataError
from groups.parameters.record import PsiForm, Source


@dataclass(frozen=True, slots=True, eq=False)
class MethodTable:
    """A published group-contribution table and the switches of its method.

    Attributes
    ----------
    method, title : str
        Identifier and full name.
    sources : tuple of Source
        The publications.
    combinatorial_exponent : float
        Exponent of R in the modified volume fraction: 1, 3/4 or 2/3.
    staverman_guggenheim : bool
        Whether the combinatorial part has the Staverman-Guggenheim term.
    psi : {"constant", "quadratic", "logarithmic"}
        Form of the group interaction against temperature.
    temperature_range_K : tuple of float
        Lower and upper temperature of the data that the table was fitted to, K.
    subgroup_numbers : IntArray of shape (n_sub,)
        Published subgroup numbers, ascending.
    subgroup_names, example_smiles, example_names : tuple of str of length n_sub
        Name of each subgroup, and one molecule that contains it.
    subgroup_main : IntArray of shape (n_sub,)
        Index (not number) into the arrays of main groups.
    R, Q : FloatArray of shape (n_sub,)
        Relative van der Waals volume and surface, dimensionless.
    main_numbers : IntArray of shape (n_main,)
        Published main-group numbers, ascending.
    main_names : tuple of str of length n_main
        Name of each main group.
    a, b, c : FloatArray of shape (n_main, n_main)
        Interaction parameters, K, dimensionless and 1/K (logarithmic form: K, dimensionless,
        dimensionless); row i, column j is the published a_ij. NaN where not published, 0 on the
        diagonal.
    pair_temperature_K : FloatArray of shape (n_main, n_main, 2)
        Temperature range of the data behind one pair, K; NaN where not published.
    completed : BoolArray of shape (n_main, n_main)
        True where machine learning filled the parameter in, with no fitted published parameter
        behind it.
    suspects : mapping of (int, int) to str
        Main-group numbers (i < j) of pairs that the audit doubts, and why.
    """

    method: str
    title: str
    sources: tuple[Source, ...]
    combinatorial_exponent: float
    staverman_guggenheim: bool
    psi: PsiForm
    temperature_range_K: tuple[float, float]
    subgroup_numbers: IntArray
    subgroup_names: tuple[str, ...]
    subgroup_main: IntArray
    example_smiles: tuple[str, ...]
    example_names: tuple[str, ...]
    R: FloatArray
    Q: FloatArray
    main_numbers: IntArray
    main_names: tuple[str, ...]
    a: FloatArray
    b: FloatArray
    c: FloatArray
    pair_temperature_K: FloatArray
    completed: BoolArray
    suspects: Mapping[tuple[int, int], str]

    def subgroup_index(self, number: int) -> int:
        """Index of a subgroup from its published number.

        Parameters
        ----------
        number : int
            Published subgroup number.

        Returns
        -------
        int
            Index into the subgroup arrays.

        Raises
        ------
        DataError
            If the table has no such subgroup.
        """
        return _index(self.subgroup_numbers, number, f"{self.method} has no subgroup {number}.")

    def main_index(self, number: int) -> int:
        """Index of a main group from its published number.

        Parameters
        ----------
        number : int
            Published main-group number.

        Returns
        -------
        int
            Index into the main-group arrays.

        Raises
        ------
        DataError
            If the table has no such main group.
        """
        return _index(self.main_numbers, number, f"{self.method} has no main group {number}.")

    def missing_pairs(self, main_numbers: Iterable[int]) -> tuple[tuple[int, int], ...]:
        """Pairs among some main groups for which no full parameter set is published.

        Parameters
        ----------
        main_numbers : iterable of int
            Published main-group numbers of a mixture; repeats are allowed.

        Returns
        -------
        tuple of (int, int)
            Pairs (i < j) where a_ij or a_ji is not published, ascending.

        Raises
        ------
        DataError
            If the table has no such main group.
        """
        numbers = sorted(set(main_numbers))
        index = {number: self.main_index(number) for number in numbers}
        return tuple(
            (i, j)
            for i, j in combinations(numbers, 2)
            if np.isnan(self.a[index[i], index[j]]) or np.isnan(self.a[index[j], index[i]])
        )


def _index(numbers: IntArray, number: int, message: str) -> int:
    position = int(numbers.searchsorted(number))
    if position == len(numbers) or numbers[position] != number:
        raise DataError(message)
    return position
