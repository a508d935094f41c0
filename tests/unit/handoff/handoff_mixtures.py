"""Synthetic binaries with known parameters for the tests of fits and comparisons."""

import numpy as np

from groups.equilibrium import System, bubble_pressure
from groups.handoff.correlations import CorrelativeModel, correlative_model
from tests.unit.equilibrium.equilibrium_mixtures import ACETONE, METHANOL

# Of the size that acetone / methanol has; only the recovery of them is tested.
TRUE_TAU = (0.55, 0.25)
LINES = (ACETONE, METHANOL)
SIZES = (np.array([2.5735, 1.4311]), np.array([2.336, 1.432]))


def nrtl(tau_12: float, tau_21: float, alpha: float = 0.3) -> CorrelativeModel:
    return correlative_model("nrtl", "a", [[[0.0, tau_12], [tau_21, 0.0]]], alpha=alpha)


def nrtl_b(b_12: float, b_21: float, alpha: float = 0.3) -> CorrelativeModel:
    return correlative_model("nrtl", "b/T", [[[0.0, b_12], [b_21, 0.0]]], alpha=alpha)


def records(
    model: CorrelativeModel,
    *,
    temperature_K: float = 323.15,
    x1: np.ndarray | None = None,
    noise: np.random.Generator | None = None,
    u_pressure: float = 0.05,
    u_y1: float = 0.003,
) -> list[dict[str, float]]:
    """Isothermal P-x-y points with stated, normal errors of pressure and vapour."""
    x1 = np.linspace(0.05, 0.95, 15) if x1 is None else x1
    states = bubble_pressure(System(model, LINES), temperature_K, np.stack([x1, 1 - x1], -1))
    P, y = states.pressure_kPa.copy(), states.vapour[:, 0].copy()
    if noise is not None:
        P += noise.normal(size=len(P)) * u_pressure
        y += noise.normal(size=len(y)) * u_y1
    return [
        {
            "temperature": temperature_K,
            "pressure": float(p),
            "x1": float(a),
            "y1": float(b),
            "u_temperature": 1e-6,
            "u_pressure": u_pressure,
            "u_x1": 1e-8,
            "u_y1": u_y1,
        }
        for p, a, b in zip(P, x1, y, strict=True)
    ]
