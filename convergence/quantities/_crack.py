"""Fields at the tip of a crack along the negative first axis, of a stress intensity factor of one.

Williams 1957, J. Appl. Mech. 24:109; in this form Anderson, Fracture Mechanics, tables 2.1 and 2.2 (from
memory).
"""

from typing import Literal

import numpy as np

Mode = Literal["I", "II"]


def interaction(
    stress: np.ndarray,
    slopes: np.ndarray,
    mode: Mode,
    r: np.ndarray,
    angle: np.ndarray,
    shear: float,
    kappa: float,
) -> np.ndarray:
    """Return s_ij U_i,1 + S_ij u_i,1 − S_ik u_i,k δ_1j (2, ...), capitals the field of the crack tip.

    Stress and slopes du_i/dx_j (2, 2, ...) are by the axes of the crack.
    """
    tip, slope = tip_stress(mode, r, angle), tip_slope(mode, r, angle, shear, kappa)
    flow = (stress * slope[:, None] + tip * slopes[:, :1]).sum(axis=0)
    flow[0] -= (tip * slopes).sum(axis=(0, 1))
    return np.asarray(flow)


def tip_stress(mode: Mode, r: np.ndarray, angle: np.ndarray) -> np.ndarray:
    """Return the stress tensor (2, 2, ...) at distance and angle from the tip."""
    c, s = np.cos(0.5 * angle), np.sin(0.5 * angle)
    c3, s3 = np.cos(1.5 * angle), np.sin(1.5 * angle)
    if mode == "I":
        xx, yy, xy = c * (1.0 - s * s3), c * (1.0 + s * s3), s * c * c3
    else:
        xx, yy, xy = -s * (2.0 + c * c3), s * c * c3, c * (1.0 - s * s3)
    return np.array([[xx, xy], [xy, yy]]) / np.sqrt(2.0 * np.pi * r)


def tip_slope(mode: Mode, r: np.ndarray, angle: np.ndarray, shear: float, kappa: float) -> np.ndarray:
    """Return the derivative (2, ...) of the displacement by the first coordinate.

    The displacement is r^(1/2) f(angle) / (2 shear (2 pi)^(1/2)).
    """
    c, s = np.cos(0.5 * angle), np.sin(0.5 * angle)
    ahead, aside = np.cos(angle), np.sin(angle)
    if mode == "I":
        shape = np.array([c, s]) * (kappa - ahead)
        change = 0.5 * np.array([-s, c]) * (kappa - ahead) + np.array([c, s]) * aside
    else:
        shape = np.array([s * (kappa + 2.0 + ahead), -c * (kappa - 2.0 + ahead)])
        change = np.array(
            [0.5 * c * (kappa + 2.0 + ahead) - s * aside, 0.5 * s * (kappa - 2.0 + ahead) + c * aside]
        )
    return np.asarray((0.5 * ahead * shape - aside * change) / (2.0 * shear * np.sqrt(2.0 * np.pi * r)))
