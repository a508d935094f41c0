"""A system with some of its components left out."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.equilibrium.system import LiquidModel, System, VapourModel


@dataclass(frozen=True, slots=True)
class SubsetLiquid:
    """A liquid model seen by some of its components; the others have mole fraction zero."""

    whole: LiquidModel
    components: tuple[int, ...]

    @property
    def n_components(self) -> int:
        """Number of components kept."""
        return len(self.components)

    def ln_gamma(self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike) -> FloatArray:
        """ln gamma of the components kept."""
        x = embedded(mole_fractions, self.components, self.whole.n_components)
        return self.whole.ln_gamma(temperature_K, x)[..., list(self.components)]

    def ln_gamma_slope(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        """d ln gamma / dT of the components kept, in 1/K."""
        x = embedded(mole_fractions, self.components, self.whole.n_components)
        return self.whole.ln_gamma_slope(temperature_K, x)[..., list(self.components)]

    def ln_gamma_mole_derivatives(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        """n d ln gamma_i/dn_j of the components kept."""
        x = embedded(mole_fractions, self.components, self.whole.n_components)
        kept = list(self.components)
        derivatives = self.whole.ln_gamma_mole_derivatives(temperature_K, x)
        return np.asarray(derivatives[..., kept, :][..., kept])


@dataclass(frozen=True, slots=True)
class SubsetVapour:
    """A vapour model seen by some of its components."""

    whole: VapourModel
    components: tuple[int, ...]
    total: int

    @property
    def ideal(self) -> bool:
        """Whether the correction is zero by definition."""
        return self.whole.ideal

    def ln_correction(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> FloatArray:
        """Correction of the components kept."""
        y = embedded(vapour, self.components, self.total)
        correction = self.whole.ln_correction(temperature_K, pressure_kPa, y)
        return correction[..., list(self.components)]


def subset(system: System, components: tuple[int, ...]) -> System:
    """The system of some of the components, in the order given.

    Parameters
    ----------
    system : System
    components : tuple of int
        0-based indices.

    Returns
    -------
    System
    """
    if components == tuple(range(system.n_components)):
        return system
    vapour: VapourModel = system.vapour
    if not vapour.ideal:
        vapour = SubsetVapour(vapour, components, system.n_components)
    lines = tuple(system.vapour_pressures[i] for i in components)
    return System(SubsetLiquid(system.activity, components), lines, vapour)


def embedded(mole_fractions: npt.ArrayLike, components: tuple[int, ...], total: int) -> FloatArray:
    """Mole fractions of all components from those of some; the last axis grows to `total`."""
    part = np.asarray(mole_fractions, dtype=np.float64)
    whole = np.zeros((*part.shape[:-1], total))
    whole[..., list(components)] = part
    return whole
