"""Molar volume of a pure saturated liquid, for the Poynting factor.

A published curve where the open package `chemicals` carries one; else Rackett's equation with a
published or an estimated compressibility factor. The Poynting factor needs no more: 5 % of a liquid
volume is 0.02 % of a fugacity at 1 bar.
"""

from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache
from types import ModuleType

import numpy as np

from groups.arrays import FloatArray
from groups.pure.registry import registry_number
from groups.structure.molecule import Molecule
from groups.vapour.gas_constants import GasConstants
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3

Curve = Callable[[FloatArray], FloatArray]

#: Reduced temperature at which the volume is held: beyond it the liquid swells without bound.
HIGHEST_REDUCED = 0.98


@dataclass(frozen=True, slots=True)
class LiquidVolume:
    """Molar volume of a saturated liquid against temperature.

    Parameters
    ----------
    curve : callable
        From K to cm3/mol.
    range_K : tuple of float
        Held constant outside.
    source : str
    estimated : bool
        True where no published curve or constant of this substance stands behind it.
    """

    curve: Curve
    range_K: tuple[float, float]
    source: str
    estimated: bool

    def cm3_mol(self, temperature_K: FloatArray) -> FloatArray:
        """Molar volume in cm3/mol, in the shape of the temperature in K."""
        return self.curve(np.clip(temperature_K, *self.range_K))


def liquid_volume(molecule: Molecule, gas: GasConstants) -> LiquidVolume:
    """The best liquid volume there is for a molecule.

    Parameters
    ----------
    molecule : Molecule
    gas : GasConstants

    Returns
    -------
    LiquidVolume

    Source
    ------
    Perry's Chemical Engineers' Handbook, 8th ed. (2007), table 2-32 (DIPPR 105); C. F. Spencer,
    R. P. Danner, J. Chem. Eng. Data 17 (1972) 236 (Rackett with Z_RA); T. Yamada, R. D. Gunn, J.
    Chem. Eng. Data 18 (1973) 234 (Z_RA = 0.29056 - 0.08775 omega).
    """
    cas = registry_number(molecule)
    highest = HIGHEST_REDUCED * gas.critical_temperature_K
    if cas is not None:
        published = _dippr_105(cas, highest)
        if published is not None:
            return published
    Z = None if cas is None else _rackett_factor(cas)
    if Z is not None:
        source = "Spencer & Danner, J. Chem. Eng. Data 17 (1972) 236, published Z_RA"
        return LiquidVolume(rackett(gas, Z), (0.3 * highest, highest), source, False)
    Z = 0.29056 - 0.08775 * gas.acentric_factor
    source = "Yamada & Gunn, J. Chem. Eng. Data 18 (1973) 234"
    return LiquidVolume(rackett(gas, Z), (0.3 * highest, highest), source, True)


def rackett(gas: GasConstants, factor: float) -> Curve:
    """V = (R Tc / Pc) Z_RA^(1 + (1 - Tr)^(2/7)), cm3/mol."""
    scale = GAS_CONSTANT_KPA_CM3 * gas.critical_temperature_K / gas.critical_pressure_kPa

    def curve(temperature_K: FloatArray) -> FloatArray:
        distance = 1.0 - temperature_K / gas.critical_temperature_K
        return np.asarray(scale * factor ** (1.0 + distance ** (2.0 / 7.0)))

    return curve


@lru_cache(maxsize=4096)
def _dippr_105(cas: str, highest_K: float) -> LiquidVolume | None:
    """rho = C1 / C2^(1 + (1 - T/C3)^C4), mol/m3."""
    table = _volume_module().rho_data_Perry_8E_105_l
    if cas not in table.index:
        return None
    row = table.loc[cas]
    C1, C2, C3, C4 = (float(row[f"C{k}"]) for k in range(1, 5))
    low, high = float(row["Tmin"]), min(float(row["Tmax"]), HIGHEST_REDUCED * C3, highest_K)
    if not (0.0 < low < high and C1 > 0.0 and 0.0 < C2 < 1.0):
        return None

    def curve(temperature_K: FloatArray) -> FloatArray:
        return np.asarray(1e6 / C1 * C2 ** (1.0 + (1.0 - temperature_K / C3) ** C4))

    source = "Perry's Chemical Engineers' Handbook, 8th ed. (2007), table 2-32"
    return LiquidVolume(curve, (low, high), source, False)


@lru_cache(maxsize=4096)
def _rackett_factor(cas: str) -> float | None:
    table = _volume_module().rho_data_COSTALD
    if cas not in table.index:
        return None
    factor = float(table.loc[cas]["Z_RA"])
    return factor if 0.15 < factor < 0.35 else None


def _volume_module() -> ModuleType:
    """The tables of `chemicals`, imported on first use because they pull pandas in."""
    import chemicals.volume

    return chemicals.volume
