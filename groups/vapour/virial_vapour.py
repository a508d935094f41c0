"""A real vapour at moderate pressure: virial equation and dimers, behind the seam of equilibrium.

The volume of n apparent moles is taken as

    V = n_true RT / P + n sum_i sum_j y_i y_j B_ij

where n_true counts monomers and dimers (`groups.vapour.association`; n_true = n without acids) and
B_ij is physical. The second term depends on the apparent amounts alone, so the dimers are unmoved
by it, and the fugacity coefficients follow exactly:

    ln phi_i = ln(p_i / (y_i P)) + (2 sum_j y_j B_ij - B) P / RT

For acids the dimerisation constants were derived without a B, so B of acid with acid is zero and
that of acid with another molecule j is B_jj / 2: no excess from the physical part.

Source: Smith, Van Ness & Abbott, Introduction to Chemical Engineering Thermodynamics, 7th ed.
(2005), section 11.6 and eqs. 14.4 to 14.6; Nothnagel, Abrams & Prausnitz (1973).
"""

from dataclasses import dataclass, field

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.system import SaturationLine
from groups.vapour.association import Dimerisation, dimer_equilibrium
from groups.vapour.cross_coefficients import PairConstants
from groups.vapour.liquid_volume import LiquidVolume
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3

#: Largest |B P / RT| that is used, for a pure saturated vapour or in a mixture: beyond it the
#: equation has no vapour root, and the value is held so that a search cannot run away.
LARGEST_TERM = 0.5
#: Sets of temperatures whose coefficients are kept.
KEPT = 4


@dataclass(frozen=True, slots=True)
class _AtTemperature:
    """What depends on temperature alone, of n temperatures.

    B_ij (n, nc, nc) in cm3/mol, ln K_i (n, nc) in 1/kPa, ln phi_i of the saturated vapours, the
    pressures they stand at in kPa and the liquid volumes over RT in 1/kPa, each (n, nc).
    """

    B: FloatArray
    ln_constants: FloatArray
    ln_saturated: FloatArray
    saturation_kPa: FloatArray
    liquid: FloatArray


@dataclass(frozen=True, slots=True)
class VirialVapour:
    """Virial equation with dimers for n_components; implements the vapour seam of `System`.

    Parameters
    ----------
    pairs : PairConstants
    dimerisations : tuple of Dimerisation or None
        One for each component; None where it forms no dimers.
    known : bool array of shape (n_components,)
        False for a component without constants, which is treated as ideal in its own terms.
    critical_temperature_K, critical_pressure_kPa : array of shape (n_components,)
        Of the pure components; NaN where not known.
    saturation : tuple of SaturationLine
        The vapour pressures that the system uses.
    liquid_volumes : tuple of LiquidVolume or None
    """

    pairs: PairConstants
    dimerisations: tuple[Dimerisation | None, ...]
    known: BoolArray
    critical_temperature_K: FloatArray
    critical_pressure_kPa: FloatArray
    saturation: tuple[SaturationLine, ...]
    liquid_volumes: tuple[LiquidVolume | None, ...]
    ideal: bool = field(default=False, init=False)
    _recent: dict[bytes, _AtTemperature] = field(
        default_factory=dict, init=False, repr=False, compare=False
    )

    @property
    def associating(self) -> BoolArray:
        """Which components form dimers, of shape (n_components,)."""
        return np.array([d is not None for d in self.dimerisations], dtype=bool)

    def second_virials(self, temperature_K: FloatArray) -> FloatArray:
        """Physical B_ij in cm3/mol, of shape (n, n_components, n_components)."""
        B = self.pairs.second_virial(temperature_K)
        B = np.where(np.outer(self.known, self.known), B, 0.0)
        acid = self.associating
        own = np.where(acid, 0.0, np.einsum("nii->ni", B))
        lewis = 0.5 * (own[:, :, None] + own[:, None, :])
        return np.asarray(np.where(acid[:, None] | acid[None, :], lewis, B))

    def ln_fugacity_coefficients(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> FloatArray:
        """ln phi_i of the vapour, in the shape of `vapour` (n, n_components)."""
        reduced = pressure_kPa / (GAS_CONSTANT_KPA_CM3 * temperature_K)
        at = self._at(temperature_K)
        By = np.einsum("nij,nj->ni", at.B, vapour)
        B = (vapour * By).sum(axis=1)
        physical = (2.0 * By - B[:, None]) * reduced[:, None]
        if not self.associating.any():
            return np.asarray(physical)
        dimers = dimer_equilibrium(at.ln_constants, pressure_kPa, vapour)
        return np.asarray(physical + dimers.ln_monomer)

    def compressibility(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> FloatArray:
        """Z = P V / (n R T) on apparent moles, of shape (n,)."""
        reduced = pressure_kPa / (GAS_CONSTANT_KPA_CM3 * temperature_K)
        at = self._at(temperature_K)
        B = (np.einsum("nij,nj->ni", at.B, vapour) * vapour).sum(axis=1)
        true = np.ones(len(vapour))
        if self.associating.any():
            true = dimer_equilibrium(at.ln_constants, pressure_kPa, vapour).true_moles
        return np.asarray(true + B * reduced)

    def ln_saturated(self, temperature_K: FloatArray) -> FloatArray:
        """ln phi of each pure saturated vapour, of shape (n, n_components).

        Above its critical pressure a component has no saturated vapour; the value is held there.
        """
        return self._at(temperature_K).ln_saturated

    def ln_poynting(self, temperature_K: FloatArray, pressure_kPa: FloatArray) -> FloatArray:
        """ln of the Poynting factor of each pure liquid, of shape (n, n_components)."""
        at = self._at(temperature_K)
        return np.asarray(at.liquid * (pressure_kPa[:, None] - at.saturation_kPa))

    def ln_correction(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> FloatArray:
        """ln(phi_i / (phi_i,sat Poynting_i)), in the shape of `vapour` (n, n_components)."""
        P = np.minimum(pressure_kPa, self._largest_pressure(temperature_K, vapour))
        ln_phi = self.ln_fugacity_coefficients(temperature_K, P, vapour)
        saturated = self.ln_saturated(temperature_K)
        return np.asarray(ln_phi - saturated - self.ln_poynting(temperature_K, P))

    def within_range(
        self, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
    ) -> BoolArray:
        """Where the equation cut after B holds: P at most half T/Tc Pc of the mixture.

        Source: Prausnitz, Lichtenthaler & de Azevedo (1999), section 5.3: densities up to about
        half the critical, P <= (T / 2) sum y_i Pc_i / sum y_i Tc_i. Without critical constants
        of a component the answer is that of the others.
        """
        return np.asarray(pressure_kPa <= self.highest_pressure(temperature_K, vapour))

    def highest_pressure(self, temperature_K: FloatArray, vapour: FloatArray) -> FloatArray:
        """The pressure in kPa up to which `within_range` holds, of shape (n,)."""
        y = vapour * self.known
        Tc = np.where(self.known, self.critical_temperature_K, 0.0)
        Pc = np.where(self.known, self.critical_pressure_kPa, 0.0)
        below = (y * Tc).sum(axis=1)
        above = 0.5 * temperature_K * (y * Pc).sum(axis=1)
        return np.asarray(np.where(below > 0.0, above / np.where(below > 0.0, below, 1.0), np.inf))

    def _largest_pressure(self, temperature_K: FloatArray, vapour: FloatArray) -> FloatArray:
        """Pressure at which |B| P / RT of the mixture reaches LARGEST_TERM."""
        B = (np.einsum("nij,nj->ni", self._at(temperature_K).B, vapour) * vapour).sum(axis=1)
        size = np.maximum(np.abs(B), 1e-300)
        return np.asarray(LARGEST_TERM * GAS_CONSTANT_KPA_CM3 * temperature_K / size)

    def _at(self, temperature_K: FloatArray) -> _AtTemperature:
        """The part that depends on temperature alone, kept because solvers ask for it again."""
        key = temperature_K.tobytes()
        found = self._recent.get(key)
        if found is None:
            found = self._evaluated(temperature_K)
            if len(self._recent) >= KEPT:
                self._recent.clear()
            self._recent[key] = found
        return found

    def _evaluated(self, T: FloatArray) -> _AtTemperature:
        B, K, RT = self.second_virials(T), self._ln_constants(T), GAS_CONSTANT_KPA_CM3 * T[:, None]
        highest = np.where(self.known, self.critical_pressure_kPa, np.inf)
        P = np.minimum(self._saturation_kPa(T), highest)
        term = np.einsum("nii->ni", B) * P / RT
        ln_phi = np.clip(term, -LARGEST_TERM, LARGEST_TERM)
        for acid in np.flatnonzero(self.associating):
            alone = dimer_equilibrium(K[:, [acid]], P[:, acid], np.ones((len(P), 1)))
            ln_phi[:, acid] += alone.ln_monomer[:, 0]
        liquid = np.zeros_like(P)
        for i, volume in enumerate(self.liquid_volumes):
            if volume is not None:
                liquid[:, i] = volume.cm3_mol(T)
        return _AtTemperature(B, K, ln_phi, P, liquid / RT)

    def _saturation_kPa(self, temperature_K: FloatArray) -> FloatArray:
        columns = [line.ln_kPa(temperature_K) for line in self.saturation]
        return np.exp(np.minimum(np.stack(columns, axis=-1), 50.0))

    def _ln_constants(self, temperature_K: FloatArray) -> FloatArray:
        columns = [
            np.full_like(temperature_K, -np.inf) if d is None else d.ln_constant(temperature_K)
            for d in self.dimerisations
        ]
        return np.stack(columns, axis=-1)
