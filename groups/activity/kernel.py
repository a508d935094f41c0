"""The equations of the UNIFAC family, on whole arrays and without a loop over points.

Everything is written over MAIN groups. Interaction parameters are published per main group, so
the group contribution ln Gamma_k / Q_k is the same for all subgroups k of one main group, and the
subgroup sums of the papers collapse, exactly, into sums over the main groups that are present.

Symbols, with the equation numbers of Fredenslund, Jones & Prausnitz, AIChE J. 21 (1975) 1086:

======  ==================  =======================================================================
r, q    (C,)                r_i = sum_k nu_ik R_k, q_i = sum_k nu_ik Q_k              (eqs. 3, 4)
Z       (C, M)              surface of component i in main group m: sum of nu_ik Q_k over k in m
psi     (..., M, M)         psi_mn = exp(E_mn(T)), interaction of m with n            (eq. 9)
B       (..., C, M)         B_im = sum_k Z_ik psi_km
N       (..., M)            N_m = sum_i x_i Z_im
s       (...)               s = sum_i x_i q_i; theta_m = N_m / s                      (eq. 8)
D       (..., M)            D_m = sum_i x_i B_im; sum_n theta_n psi_nm = D_m / s
======  ==================  =======================================================================

With these the residual part (eqs. 5 to 8 there) loses its triple sum:

    ln gamma_i^R = sum_k nu_ik (ln Gamma_k - ln Gamma_k^(i))
                 = q_i - sum_m B_im N_m / D_m + sum_m Z_im (ln(B_im / q_i) - ln(D_m / s))

because the reference solution of pure i has N = Z_i, D = B_i, s = q_i. Its excess Gibbs energy,
n g^R = -sum_m N_m ln(D_m / s) + terms linear in n, gives all the derivatives below.

Block shapes: t temperatures, m compositions at each. `x` is (t, m, C), or (1, m, C) where all the
temperatures share the compositions; B is (t, C, M); results are (t, m, C).
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.parameters import PsiForm

COORDINATION_NUMBER = 10.0  # z of the lattice, the same in every published table
REFERENCE_TEMPERATURE_K = 298.15  # T0 of the logarithmic form, Larsen et al. 1987


@dataclass(frozen=True, slots=True)
class MixtureGroups:
    """What the equations need to know of one mixture and one published table.

    Parameters
    ----------
    volume : FloatArray of shape (C,)
        r, the relative van der Waals volumes of the molecules.
    area : FloatArray of shape (C,)
        q, the relative van der Waals surface areas of the molecules.
    surface : FloatArray of shape (C, M)
        Z, the part of q that belongs to each main group present.
    a, b, c : FloatArray of shape (M, M)
        Interaction parameters in K, 1 and 1/K (quadratic) or K, 1 and 1 (logarithmic).
    psi : str
        The form of psi(T).
    exponent : float
        Power of r in the combinatorial part.
    staverman_guggenheim : bool
        Whether the combinatorial part has the Staverman-Guggenheim correction.
    """

    volume: FloatArray
    area: FloatArray
    surface: FloatArray
    a: FloatArray
    b: FloatArray
    c: FloatArray
    psi: PsiForm
    exponent: float
    staverman_guggenheim: bool


def ln_psi(
    a: FloatArray, b: FloatArray, c: FloatArray, form: PsiForm, T: FloatArray, order: int = 0
) -> FloatArray:
    """Return E = ln psi, or its first or second temperature derivative.

    Parameters
    ----------
    a, b, c : FloatArray
        Interaction parameters, any shape that broadcasts with `T`.
    form : {"constant", "quadratic", "logarithmic"}
        The published form of psi(T).
    T : FloatArray
        Temperature, K, positive, any shape that broadcasts with the parameters.
    order : {0, 1, 2}
        Order of the temperature derivative.

    Returns
    -------
    FloatArray
        E in 1, dE/dT in 1/K or d2E/dT2 in 1/K^2, of the broadcast shape.

    Source
    ------
    Constant: Fredenslund et al. 1975, eq. 9. Quadratic: Gmehling, Li & Schiller, Ind. Eng. Chem.
    Res. 32 (1993) 178, -(a + bT + cT^2)/T. Logarithmic: Larsen, Rasmussen & Fredenslund, Ind. Eng.
    Chem. Res. 26 (1987) 2274, -(a + b(T - T0) + c(T ln(T0/T) + T - T0))/T, here with the terms in
    1/T collected.
    """
    T0 = REFERENCE_TEMPERATURE_K
    at_zero = a - (b + c) * T0 if form == "logarithmic" else a
    if order == 0:
        E = -at_zero / T
        if form == "quadratic":
            E = E - b - c * T
        elif form == "logarithmic":
            E = E - b - c * (np.log(T0 / T) + 1.0)
    elif order == 1:
        E = at_zero / T**2
        if form == "quadratic":
            E = E - c
        elif form == "logarithmic":
            E = E + c / T
    else:
        E = -2.0 * at_zero / T**3
        if form == "logarithmic":
            E = E - c / T**2
    return E


def group_fields(groups: MixtureGroups, T: FloatArray, order: int = 0) -> tuple[FloatArray, ...]:
    """Return B and, up to `order`, dB/dT and d2B/dT2; each (t, C, M) for T of shape (t,)."""
    # (M, t, M) with the summed group first makes Z psi one product instead of one a temperature.
    parameters = (groups.a[:, None], groups.b[:, None], groups.c[:, None], groups.psi)
    at = T[:, None]
    psi = np.exp(ln_psi(*parameters, at))
    weights = [psi]
    if order >= 1:
        slope = ln_psi(*parameters, at, 1)
        weights.append(psi * slope)
    if order >= 2:
        weights.append(psi * (slope**2 + ln_psi(*parameters, at, 2)))
    n, n_main = groups.surface.shape
    return tuple(
        (groups.surface @ weight.reshape(n_main, -1)).reshape(n, -1, n_main).swapaxes(0, 1)
        for weight in weights
    )


def _product(left: FloatArray, right: FloatArray) -> FloatArray:
    """left @ right, (t, m, K) by (t, K, L) or (K, L), without a library call for every row."""
    if right.ndim == 2:
        product = left.reshape(-1, left.shape[-1]) @ right
        return product.reshape(*left.shape[:-1], right.shape[-1])
    if left.shape[-2] == 1:
        single: FloatArray = np.einsum("...mk,...kl->...ml", left, right)
        return single
    return left @ right


def _with_pure(part: FloatArray, pure: FloatArray) -> FloatArray:
    """Add what the pure components give, (t, C), to each composition's answer, (t, m, C)."""
    # By component: numpy broadcasts over the long middle axis only if the short one is out.
    for i in range(pure.shape[1]):
        part[:, :, i] += pure[:, i, None]
    return part


def combinatorial(groups: MixtureGroups, x: FloatArray) -> FloatArray:
    """Return the combinatorial part of ln gamma, the shape of `x`.

    Source
    ------
    ln gamma_i^C = 1 - V'_i + ln V'_i - (z/2) q_i (1 - V_i/F_i + ln(V_i/F_i)), with
    V'_i = r_i^p / sum_j x_j r_j^p, V_i = r_i / sum_j x_j r_j, F_i = q_i / sum_j x_j q_j. p = 1:
    Fredenslund et al. 1975, eq. 2, as phi_i/x_i = V_i and theta_i/x_i = F_i; p = 3/4: Weidlich &
    Gmehling, Ind. Eng. Chem. Res. 26 (1987) 1372; p = 2/3 without the correction in q: Larsen et
    al. 1987. Ratios only, so x_i = 0 needs no care.
    """
    r, q = groups.volume, groups.area
    rp = r**groups.exponent
    V = rp / (x @ rp)[..., None]
    part = 1.0 - V + np.log(V)
    if groups.staverman_guggenheim:
        V_F = (r / q) * ((x @ q) / (x @ r))[..., None]
        part -= 0.5 * COORDINATION_NUMBER * q * (1.0 - V_F + np.log(V_F))
    return part


def residual(groups: MixtureGroups, x: FloatArray, B: FloatArray) -> FloatArray:
    """Return the residual part of ln gamma, (t, m, C); the equation in the module's head."""
    Z, q = groups.surface, groups.area
    D = _product(x, B)
    N_D = _product(x, Z) / D
    part = _product(N_D, -B.swapaxes(1, 2))
    # ln s is the same for every group and sum_m Z_im = q_i, so it is added once a point.
    part -= _product(np.log(D, out=D), Z.T)
    part += q * np.log(x @ q)[..., None]
    return _with_pure(part, q + np.einsum("im,tim->ti", Z, np.log(B / q[:, None])))


def residual_slope(
    groups: MixtureGroups, x: FloatArray, B: FloatArray, dB: FloatArray
) -> FloatArray:
    """Return d ln gamma / dT at constant composition, (t, m, C), 1/K.

    The combinatorial part does not depend on temperature, so this is the whole slope.
    """
    Z = groups.surface
    D, dD = _product(x, B), _product(x, dB)
    N_D, dD_D = _product(x, Z) / D, dD / D
    # (B/D)' = B'/D - B D'/D^2
    slope = _product(N_D * dD_D, B.swapaxes(1, 2))
    slope -= _product(N_D, dB.swapaxes(1, 2))
    slope -= _product(dD_D, Z.T)
    return _with_pure(slope, np.einsum("im,tim->ti", Z, dB / B))


def residual_curvature(
    groups: MixtureGroups, x: FloatArray, B: FloatArray, dB: FloatArray, ddB: FloatArray
) -> FloatArray:
    """Return d2 ln gamma / dT2 at constant composition, (t, m, C), 1/K^2."""
    Z = groups.surface
    D, dD, ddD = _product(x, B), _product(x, dB), _product(x, ddB)
    N_D, dD_D, ddD_D = _product(x, Z) / D, dD / D, ddD / D
    # (B/D)'' = B''/D - 2 B' D'/D^2 + B (2 D'^2/D - D'')/D^2
    curvature = _product(2.0 * N_D * dD_D, dB.swapaxes(1, 2))
    curvature -= _product(N_D, ddB.swapaxes(1, 2))
    curvature -= _product(N_D * (2.0 * dD_D**2 - ddD_D), B.swapaxes(1, 2))
    curvature -= _product(ddD_D - dD_D**2, Z.T)
    return _with_pure(curvature, np.einsum("im,tim->ti", Z, ddB / B - (dB / B) ** 2))


def combinatorial_mole_derivatives(groups: MixtureGroups, x: FloatArray) -> FloatArray:
    """Return d ln gamma_i^C / dn_j for one mole in all, (..., C, C) with i before j."""
    r, q = groups.volume, groups.area
    rp = r**groups.exponent
    lack = 1.0 - rp / (x @ rp)[..., None]
    derivative: FloatArray = lack[..., :, None] * lack[..., None, :]
    if groups.staverman_guggenheim:
        mean_q = (x @ q)[..., None]
        F_V = q / mean_q - r / (x @ r)[..., None]
        factor = 0.5 * COORDINATION_NUMBER * mean_q[..., None]
        derivative -= factor * F_V[..., :, None] * F_V[..., None, :]
    return derivative


def residual_mole_derivatives(groups: MixtureGroups, x: FloatArray, B: FloatArray) -> FloatArray:
    """Return d ln gamma_i^R / dn_j for one mole in all, (t, m, C, C) with i before j.

    The second derivative of n g^R: q_i q_j / s - sum_m (Z_im B_jm + Z_jm B_im) / D_m
    + sum_m N_m B_im B_jm / D_m^2.
    """
    Z, q = groups.surface, groups.area
    D = x @ B
    N, s = x @ Z, (x @ q)[..., None, None]
    scaled = B[:, None] / D[..., None, :]
    cross = Z @ scaled.swapaxes(-1, -2)
    derivative: FloatArray = (scaled * N[..., None, :]) @ scaled.swapaxes(-1, -2)
    derivative -= cross
    derivative -= cross.swapaxes(-1, -2)
    derivative += q[:, None] * q / s
    return derivative
