"""A vapour pressure that is one measured number: isothermal sets need no more."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray


@dataclass(frozen=True)
class ConstantLine:
    """The measured vapour pressure of a set at one temperature."""

    pressure_kPa: float
    critical_temperature_K: float | None = None

    def ln_kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.full(np.shape(temperature_K), np.log(self.pressure_kPa))

    def slope(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.full(np.shape(temperature_K), 0.035)  # 1/K; only carries u(T), which is tiny here
