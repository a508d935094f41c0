"""The names an engineer uses, where the identifier database has others, lacks them or misleads."""

import csv
import re
from functools import cache
from importlib.resources import files

from groups.structure.molecule import molecule_from_smiles

_NITROGEN_LOCANT = re.compile(
    r"^n-(?=methyl|ethyl|phenyl|vinyl|formyl|acetyl|cyclohexyl|isopropyl|tert)"
)
_STEREO_WORD = re.compile(
    r"^(?:(?:cis|trans|dl|d|l)-|\((?:\d*[rsez]|[+/\u00b1-]+)(?:,\d*[rsez])*\)-?)+"
)
_DASHES = dict.fromkeys(map(ord, "‐‑‒–—−"), "-")
_GREEK = {
    ord("α"): "alpha",
    ord("β"): "beta",
    ord("γ"): "gamma",
    ord("δ"): "delta",
    ord("ε"): "epsilon",
}


def normal_form(name: str) -> str:
    """A name in lower case, with single spaces, plain hyphens and Greek letters written out.

    Parameters
    ----------
    name
        As the user wrote it.

    Returns
    -------
    str
        The form under which names are looked up.

    Source
    ------
    None: a convention of this project.
    """
    return " ".join(name.translate(_DASHES).translate(_GREEK).lower().split())


@cache
def smiles_by_common_name() -> dict[str, str]:
    """Canonical SMILES by every name and abbreviation of the project's own list.

    Returns
    -------
    dict
        Keys are in `normal_form`.

    Source
    ------
    names.csv; see names.toml.
    """
    table: dict[str, str] = {}
    for row in _rows("names.csv"):
        canonical = molecule_from_smiles(row["smiles"]).canonical_smiles
        for name in (row["name"], *row["also"].split(";")):
            if name:
                table[normal_form(name)] = canonical
    return table


@cache
def common_name_by_smiles() -> dict[str, str]:
    """The name to show, by canonical SMILES.

    Returns
    -------
    dict
        Only the molecules of the project's own list.

    Source
    ------
    names.csv; see names.toml.
    """
    return {
        molecule_from_smiles(row["smiles"]).canonical_smiles: row["name"]
        for row in _rows("names.csv")
    }


@cache
def ambiguous_names() -> dict[str, tuple[str, ...]]:
    """Names that stand for several molecules, a mixture or a solution, and what they may mean.

    Returns
    -------
    dict
        Keys are in `normal_form`.

    Source
    ------
    ambiguous_names.csv; see ambiguous_names.toml.
    """
    return {row["name"]: tuple(row["meanings"].split(";")) for row in _rows("ambiguous_names.csv")}


def readable_name(common_name: str, systematic_name: str, *, stereo: bool) -> str:
    """A database name as a chemist writes it.

    Parameters
    ----------
    common_name, systematic_name
        The two names of the database; inverted index names ("1h-indene, octahydro-") give way to
        the systematic one.
    stereo
        Whether the molecule states its stereochemistry. If not, cis, trans and the like are left
        out: the name must not say more than the structure.

    Returns
    -------
    str
        In lower case but for N where it stands for nitrogen.

    Source
    ------
    None: a convention of this project.
    """
    inverted = ", " in common_name or common_name.endswith("-")
    name = (systematic_name if inverted and systematic_name else common_name).lower()
    if not stereo:
        name = _STEREO_WORD.sub("", name)
    if name.startswith("n,n-"):
        return "N,N-" + name[4:]
    return _NITROGEN_LOCANT.sub("N-", name)


def _rows(file_name: str) -> list[dict[str, str]]:
    text = (files("groups.structure") / file_name).read_text(encoding="utf-8")
    return list(csv.DictReader(text.splitlines()))
