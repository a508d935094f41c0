"""Vapour-pressure curves from a boiling point and critical constants.

Each published equation here, written out in T, has the form of DIPPR 101 or of Wagner, so that the
curve is one of the classes of `equations` with its exact slope.
"""

from dataclasses import dataclass

import numpy as np

from groups.pure.equations import Dippr101, Wagner

ATMOSPHERE_KPA = 101.325

# Coefficients of ln(P/Pc) = f0 + w f1 in the order 1, 1/Tr, ln Tr, Tr^6.
_LEE_KESLER = np.array(
    [[5.92714, -6.09648, -1.28862, 0.169347], [15.2518, -15.6875, -13.4721, 0.43577]]
)

# Coefficients of (Tc/T) sum_k c_k tau^e_k for the powers 0, 1, 2 of the acentric factor.
_AMBROSE_WALTON = np.array(
    [
        [-5.97616, 1.29874, -0.60394, -1.06841],
        [-5.03365, 1.11505, -5.41217, -7.46628],
        [-0.64771, 2.41539, -4.26979, 3.25259],
    ]
)
_AMBROSE_WALTON_EXPONENTS = (1.0, 1.5, 2.5, 5.0)

_RIEDEL_K = 0.0838


@dataclass(frozen=True, slots=True)
class Anchor:
    """The three numbers that a corresponding-states curve hangs from.

    Parameters
    ----------
    boiling_K : float
        Normal boiling point, K.
    critical_temperature_K : float
        K, above the boiling point.
    critical_pressure_kPa : float
        kPa, above one atmosphere.
    """

    boiling_K: float
    critical_temperature_K: float
    critical_pressure_kPa: float

    @property
    def reduced_boiling(self) -> float:
        """Normal boiling point over the critical temperature."""
        return self.boiling_K / self.critical_temperature_K

    @property
    def ln_reduced_atmosphere(self) -> float:
        """ln of one atmosphere over the critical pressure."""
        return float(np.log(ATMOSPHERE_KPA / self.critical_pressure_kPa))


def lee_kesler_acentric_factor(anchor: Anchor) -> float:
    """Acentric factor that makes the Lee-Kesler curve pass through the boiling point.

    Parameters
    ----------
    anchor : Anchor

    Returns
    -------
    float

    Source
    ------
    Lee & Kesler, AIChE J. 21 (1975) 510.
    """
    Tr = anchor.reduced_boiling
    f0, f1 = _LEE_KESLER @ np.array([1.0, 1.0 / Tr, np.log(Tr), Tr**6])
    return float((anchor.ln_reduced_atmosphere - f0) / f1)


def lee_kesler(anchor: Anchor) -> Dippr101:
    """The Lee-Kesler curve through a boiling point.

    Parameters
    ----------
    anchor : Anchor

    Returns
    -------
    Dippr101

    Source
    ------
    Lee & Kesler, AIChE J. 21 (1975) 510.
    """
    a, b, c, d = _LEE_KESLER[0] + lee_kesler_acentric_factor(anchor) * _LEE_KESLER[1]
    return _in_kelvin(anchor, float(a), float(b), float(c), float(d))


def riedel(anchor: Anchor, K: float = _RIEDEL_K) -> Dippr101:
    """Riedel's curve through a boiling point.

    Parameters
    ----------
    anchor : Anchor
    K : float
        Riedel's constant, 0.0838; Vetere's value replaces it for alcohols.

    Returns
    -------
    Dippr101

    Source
    ------
    Riedel, Chem. Ing. Tech. 26 (1954) 83; Poling, Prausnitz, O'Connell, The Properties of Gases
    and Liquids, 5th ed. (2001), eqs. 7-5.1 to 7-5.4.
    """
    Tr = anchor.reduced_boiling
    psi = -35.0 + 36.0 / Tr + 42.0 * np.log(Tr) - Tr**6
    ln_P = -anchor.ln_reduced_atmosphere
    alpha = (3.758 * K * psi + ln_P) / (K * psi - np.log(Tr))
    Q = float(K * (3.758 - alpha))
    return _in_kelvin(anchor, -35.0 * Q, 36.0 * Q, 42.0 * Q + float(alpha), -Q)


def vetere_alcohol_K(anchor: Anchor) -> float:
    """Vetere's constant of Riedel's equation for alcohols.

    Parameters
    ----------
    anchor : Anchor

    Returns
    -------
    float

    Source
    ------
    Vetere, Fluid Phase Equilib. 62 (1991) 1; Poling, Prausnitz, O'Connell, The Properties of Gases
    and Liquids, 5th ed. (2001), table 7-5.
    """
    return 0.373 - 0.030 * _giacalone(anchor)


def _giacalone(anchor: Anchor) -> float:
    """h = Tbr ln(Pc/atm) / (1 - Tbr)."""
    Tr = anchor.reduced_boiling
    return -Tr * anchor.ln_reduced_atmosphere / (1.0 - Tr)


def ambrose_walton(anchor: Anchor) -> Wagner:
    """The Ambrose-Walton curve through a boiling point.

    Parameters
    ----------
    anchor : Anchor

    Returns
    -------
    Wagner

    Source
    ------
    Ambrose & Walton, Pure Appl. Chem. 61 (1989) 1395.
    """
    tau = 1.0 - anchor.reduced_boiling
    powers = np.array([tau**e for e in _AMBROSE_WALTON_EXPONENTS]) / anchor.reduced_boiling
    f0, f1, f2 = _AMBROSE_WALTON @ powers
    omega = lee_kesler_acentric_factor(anchor)
    for _ in range(30):  # Newton on f0 + w f1 + w^2 f2 = ln(1 atm/Pc)
        miss = f0 + omega * (f1 + omega * f2) - anchor.ln_reduced_atmosphere
        omega -= miss / (f1 + 2.0 * omega * f2)
    terms = np.array([1.0, omega, omega**2]) @ _AMBROSE_WALTON
    return Wagner(
        tuple(terms.tolist()),
        _AMBROSE_WALTON_EXPONENTS,
        anchor.critical_temperature_K,
        anchor.critical_pressure_kPa,
    )


def _in_kelvin(anchor: Anchor, a: float, b: float, c: float, d: float) -> Dippr101:
    """ln(P/Pc) = a + b/Tr + c ln Tr + d Tr^6, rewritten in T and kPa."""
    Tc = anchor.critical_temperature_K
    first = a - c * float(np.log(Tc)) + float(np.log(anchor.critical_pressure_kPa))
    return Dippr101(first, b * Tc, c, d / Tc**6, 6.0)
