"""Names and CAS numbers, both ways."""

import csv
import subprocess
import sys
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest

from groups.errors import (
    IsotopeError,
    MetalError,
    SaltError,
    SeveralMoleculesError,
    StructureError,
    UnknownNameError,
)
from groups.structure import Molecule, molecule_from_smiles
from groups.structure.identify import (
    check_digit,
    identified,
    molecule_from_cas,
    molecule_from_name,
    name_and_cas,
)

# Names, CAS numbers and SMILES from memory; each CAS number passes its own check digit.
SOLVENTS = list(
    csv.DictReader(
        (Path(__file__).parent / "solvents.csv").read_text(encoding="utf-8").splitlines()
    )
)


@pytest.mark.parametrize("row", SOLVENTS, ids=lambda row: row["name"])
def test_a_common_substance_is_found_by_name_and_by_cas(row: dict[str, str]) -> None:
    expected = molecule_from_smiles(row["smiles"]).canonical_smiles
    for molecule in (molecule_from_name(row["name"]), molecule_from_cas(row["cas"])):
        assert molecule.canonical_smiles == expected
        assert molecule.cas == row["cas"]
    assert name_and_cas(row["smiles"])[1] == row["cas"]


def test_the_list_holds_at_least_sixty_substances() -> None:
    assert len(SOLVENTS) >= 60


@pytest.mark.parametrize(
    ("smiles", "name"),
    [
        ("CCO", "ethanol"),
        ("CC(C)=O", "acetone"),
        ("Cc1ccccc1", "toluene"),
        ("C1CCOC1", "tetrahydrofuran"),
        ("CCC(C)=O", "2-butanone"),
        ("CN(C)C=O", "N,N-dimethylformamide"),
        ("CNC(C)=O", "N-methylacetamide"),
        ("COC(C)(C)C", "methyl tert-butyl ether"),
        ("C1CO1", "ethylene oxide"),
        ("O=Cc1ccco1", "furfural"),
        ("CC=CCC", "2-pentene"),  # no "cis": the structure does not say so
        ("Cl", "hydrogen chloride"),
    ],
)
def test_the_name_shown_is_the_one_an_engineer_uses(smiles: str, name: str) -> None:
    # Common usage, no source.
    assert identified(molecule_from_smiles(smiles)).name == name


@pytest.mark.parametrize(
    ("name", "smiles"),
    [
        ("MEK", "CCC(C)=O"),
        ("thf", "C1CCOC1"),
        ("Dcm", "ClCCl"),
        ("DMSO", "CS(C)=O"),
        ("2-Butanone", "CCC(C)=O"),
        ("butan-2-one", "CCC(C)=O"),
        ("1 propanol", "CCCO"),
        ("  acetic   acid ", "CC(=O)O"),
        ("Tetra-Hydrofuran", "C1CCOC1"),
        ("tetrahydro furan", "C1CCOC1"),
        ("ethyl-acetate", "CCOC(C)=O"),
        ("N,N-Dimethylformamide", "CN(C)C=O"),
        ("n\u2011hexane", "CCCCCC"),  # a non-breaking hyphen
        ("\u03b1-pinene", "CC1=CCC2CC1C2(C)C"),
        ("64-17-5", "CCO"),
        ("HFC-134a", "FCC(F)(F)F"),
    ],
)
def test_names_are_found_however_they_are_written(name: str, smiles: str) -> None:
    assert (
        molecule_from_name(name).canonical_smiles == molecule_from_smiles(smiles).canonical_smiles
    )


@pytest.mark.parametrize(
    ("name", "meaning"),
    [("xylene", "m-xylene"), ("TEA", "triethylamine"), ("petroleum ether", "hexane")],
)
def test_a_name_for_several_molecules_is_refused_with_its_meanings(name: str, meaning: str) -> None:
    with pytest.raises(UnknownNameError) as caught:
        molecule_from_name(name)
    assert meaning in caught.value.cure


@pytest.mark.parametrize(
    ("name", "error"),
    [
        ("table salt", SaltError),
        ("caustic soda", SaltError),
        ("heavy water", IsotopeError),
        ("mercury", MetalError),
        ("oxalic acid dihydrate", SeveralMoleculesError),
    ],
)
def test_a_name_of_something_unsupported_says_so_and_shows_the_structure(
    name: str, error: type[StructureError]
) -> None:
    with pytest.raises(error) as caught:
        molecule_from_name(name)
    assert f"'{name}' is " in str(caught.value)


def test_an_unknown_name_comes_with_close_ones() -> None:
    with pytest.raises(UnknownNameError) as caught:
        molecule_from_name("tolune")
    assert "toluene" in caught.value.cure


def test_smiles_given_as_a_name_is_recognised() -> None:
    with pytest.raises(UnknownNameError) as caught:
        molecule_from_name("CCCCO")
    assert "SMILES" in caught.value.cure


@pytest.mark.parametrize("name", ["", "   ", "x" * 301])
def test_empty_and_endless_names_are_refused(name: str) -> None:
    with pytest.raises(UnknownNameError):
        molecule_from_name(name)


@pytest.mark.parametrize(
    ("cas", "words"),
    [
        ("64-17-6", "must be 5"),
        ("7723-18-5", "check digit"),  # two digits of water exchanged
        ("64175", "form of a CAS number"),
        ("64-17-55", "form of a CAS number"),
        ("ethanol", "form of a CAS number"),
        ("9999999-99-5", "not in the offline list"),
    ],
)
def test_a_wrong_cas_number_says_what_is_wrong(cas: str, words: str) -> None:
    with pytest.raises(UnknownNameError) as caught:
        molecule_from_cas(cas)
    assert words in str(caught.value)


def test_the_check_digit_is_that_of_the_published_example() -> None:
    # CAS, Check Digit Verification of CAS Registry Numbers: 107-07-3 and 58-08-2.
    assert check_digit("10707") == 3
    assert check_digit("5808") == 2


def test_name_and_cas_of_a_stereo_isomer_fall_back_to_the_flat_molecule() -> None:
    # A deliberately rare isomer mark on a molecule that the list knows only without it.
    assert name_and_cas("C[C@H](F)Cl")[1] == name_and_cas("CC(F)Cl")[1] is not None


def test_an_unknown_structure_has_neither_name_nor_number() -> None:
    assert name_and_cas("FC(Cl)(Br)CCCCCOCCCCN") == (None, None)


def test_identifying_keeps_the_molecule() -> None:
    molecule = molecule_from_smiles("OCC")
    known = identified(molecule)
    assert isinstance(known, Molecule)
    assert (known.canonical_smiles, known.formula) == (molecule.canonical_smiles, molecule.formula)


def test_importing_loads_no_database() -> None:
    code = "import sys, groups.structure.identify; sys.exit('chemicals' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_first_look_ups_from_many_threads_agree() -> None:
    code = (
        "from concurrent.futures import ThreadPoolExecutor as P\n"
        "from groups.structure.identify import molecule_from_name as f\n"
        "names = ['ethanol', 'cyclodecane', 'water', 'methyl hexanoate'] * 8\n"
        "with P(8) as pool:\n"
        "    found = {n: m.cas for n, m in zip(names, pool.map(f, names))}\n"
        "assert found == {'ethanol': '64-17-5', 'cyclodecane': '293-96-9',\n"
        "    'water': '7732-18-5', 'methyl hexanoate': '106-70-7'}, found\n"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_threads_share_one_database() -> None:
    with ThreadPoolExecutor(8) as pool:
        found = set(pool.map(lambda _: molecule_from_name("acetone"), range(32)))
    assert len(found) == 1
