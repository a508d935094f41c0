"""Second virial coefficients by corresponding states, for whole arrays of temperatures and pairs.

    B Pc / (R Tc) = f0(Tr) + omega f1(Tr) + a/Tr^6 - b/Tr^8                    (Tsonopoulos)

The last two terms describe polar and hydrogen-bonding molecules; `polar_terms` gives a and b.
Which of three published forms is used was decided by measurement on published curves: see
`tests/reference/vapour/test_second_virial_curves.py`.
"""

from collections.abc import Callable
from typing import Literal

import numpy as np

from groups.arrays import FloatArray

#: R in kPa cm3 / (mol K), exact since the 2019 SI.
GAS_CONSTANT_KPA_CM3 = 8314.46261815324

Correlation = Literal["tsonopoulos", "pitzer-curl", "abbott"]


def second_virial(
    temperature_K: FloatArray,
    critical_temperature_K: FloatArray,
    critical_pressure_kPa: FloatArray,
    acentric_factor: FloatArray,
    polar_a: FloatArray | float = 0.0,
    polar_b: FloatArray | float = 0.0,
    *,
    correlation: Correlation = "tsonopoulos",
) -> FloatArray:
    """Second virial coefficient; the arguments broadcast against each other.

    Parameters
    ----------
    temperature_K : array
        K, above zero.
    critical_temperature_K, critical_pressure_kPa : array
        K and kPa, of a substance or of a pair.
    acentric_factor, polar_a, polar_b : array
        Dimensionless.
    correlation : {"tsonopoulos", "pitzer-curl", "abbott"}

    Returns
    -------
    array
        B in cm3/mol.

    Source
    ------
    C. Tsonopoulos, AIChE J. 20 (1974) 263, eqs. 9 to 11 and 14; K. S. Pitzer, R. F. Curl, J. Am.
    Chem. Soc. 79 (1957) 2369; M. M. Abbott in Smith & Van Ness, Introduction to Chemical
    Engineering Thermodynamics, eqs. 3.61 and 3.62 (7th ed.). Coefficients from memory, checked
    against an independent transcription in a test.
    """
    inverse = critical_temperature_K / temperature_K
    f0, f1 = _FORMS[correlation](inverse)
    sixth = (inverse * inverse * inverse) ** 2  # products: a power of an array is ten times slower
    polar = (polar_a - polar_b * inverse * inverse) * sixth
    scale = GAS_CONSTANT_KPA_CM3 * critical_temperature_K / critical_pressure_kPa
    return np.asarray(scale * (f0 + acentric_factor * f1 + polar))


def _tsonopoulos(s: FloatArray) -> tuple[FloatArray, FloatArray]:
    s2 = s * s
    s3, s8 = s2 * s, (s2 * s2) ** 2
    f0 = 0.1445 - 0.330 * s - 0.1385 * s2 - 0.0121 * s3 - 0.000607 * s8
    return f0, 0.0637 + 0.331 * s2 - 0.423 * s3 - 0.008 * s8


def _pitzer_curl(s: FloatArray) -> tuple[FloatArray, FloatArray]:
    f0 = 0.1445 - 0.330 * s - 0.1385 * s**2 - 0.0121 * s**3
    return f0, 0.073 + 0.46 * s - 0.50 * s**2 - 0.097 * s**3 - 0.0073 * s**8


def _abbott(s: FloatArray) -> tuple[FloatArray, FloatArray]:
    return 0.083 - 0.422 * s**1.6, 0.139 - 0.172 * s**4.2


_FORMS: dict[Correlation, Callable[[FloatArray], tuple[FloatArray, FloatArray]]] = {
    "tsonopoulos": _tsonopoulos,
    "pitzer-curl": _pitzer_curl,
    "abbott": _abbott,
}
