"""Temperatures, pressures and molecules as an engineer types them."""

import argparse
import re

from groups.errors import MixwrightError, UnknownNameError
from groups.structure.identify import identified, molecule_from_cas, molecule_from_name
from groups.structure.molecule import Molecule, molecule_from_smiles

_NUMBER_AND_UNIT = re.compile(r"^\s*([-+]?[0-9.]+(?:[eE][-+]?[0-9]+)?|nan|inf)\s*([A-Za-z°]*)\s*$")
_KPA = {
    "": 1.0,
    "kpa": 1.0,
    "pa": 1e-3,
    "mpa": 1e3,
    "bar": 100.0,
    "mbar": 0.1,
    "atm": 101.325,
    "mmhg": 101.325 / 760.0,
    "torr": 101.325 / 760.0,
    "psi": 6.894757293168,
}
_CAS_NUMBER = re.compile(r"^\d{2,7}-\d{2}-\d$")


def temperature_K(text: str) -> float:
    """Kelvin from '351.4', '351.4K', '78.2C' or '172F'."""
    value, unit = _split(text)
    if unit in {"", "k"}:
        return value
    if unit in {"c", "°c", "degc"}:
        return value + 273.15
    if unit in {"f", "°f", "degf"}:
        return (value - 32.0) / 1.8 + 273.15
    raise argparse.ArgumentTypeError(f"unknown unit of temperature in '{text}': use K, C or F")


def pressure_kPa(text: str) -> float:
    """Kilopascal from '101.325', '1atm', '1.013bar', '760mmHg', '14.7psi'."""
    value, unit = _split(text)
    if unit not in _KPA:
        known = "kPa, Pa, MPa, bar, mbar, atm, mmHg, torr or psi"
        raise argparse.ArgumentTypeError(f"unknown unit of pressure in '{text}': use {known}")
    return value * _KPA[unit]


def _split(text: str) -> tuple[float, str]:
    match = _NUMBER_AND_UNIT.match(text)
    try:
        return float(match[1]) if match else float("x"), match[2].lower() if match else ""
    except ValueError:
        raise argparse.ArgumentTypeError(f"'{text}' is not a number with a unit") from None


def molecule(text: str) -> Molecule:
    """A molecule from SMILES, a name or a CAS number.

    `smiles:`, `name:` and `cas:` in front say which it is. Without, a text in the form of a CAS
    number is one, what reads as SMILES is SMILES, and the rest is a name.
    """
    kind, _, rest = text.partition(":")
    readers = {
        "smiles": molecule_from_smiles,
        "name": molecule_from_name,
        "cas": molecule_from_cas,
    }
    if rest and kind in readers:
        return identified(readers[kind](rest))
    if _CAS_NUMBER.match(text):
        return identified(molecule_from_cas(text))
    return identified(_smiles_or_name(text))


def _smiles_or_name(text: str) -> Molecule:
    try:
        return molecule_from_smiles(text)
    except MixwrightError as not_smiles:
        try:
            return molecule_from_name(text)
        except UnknownNameError as unknown:
            raise (unknown if text.isalpha() and text.islower() else not_smiles) from None
