"""Error laws: how the error of a quantity may fall, or grow, from level to level.

A law is e = c h^p / (1 + (h / k)^p), scattered by a share τ of itself: order p, a knee k (in sizes of the
finest level) above which cells are too large to resolve the place and the error stands still, and scatter τ.
Laws with p < 0 have no limit: the value grows like h^p, or nearly like log h.
"""

import numpy as np

GROWING = (-1.5, -1.0, -0.75, -0.5, -0.25, -0.1)
FALLING = (
    *(0.1, 0.25, 0.4, 0.55, 0.7, 0.85, 1.0, 1.25, 1.5, 1.75, 2.0, 2.25, 2.5, 2.75, 3.0),
    *(3.5, 4.0, 4.5, 5.0, 5.5, 6.0),
)
KNEES = (np.inf, 6.0, 2.0)
LEAST_KNEED = 0.4
SCATTERS = np.array([0.03, 0.1, 0.25, 0.5, 1.0, 2.0])
COURSES = np.array([(p, k) for p in (*GROWING, *FALLING) for k in KNEES if k == np.inf or p >= LEAST_KNEED])
ORDERS, KNEE = COURSES.T
IS_GROWING = ORDERS < 0.0


def courses(h: np.ndarray) -> np.ndarray:
    """Return every law's error (courses, levels), 1 at the finest level, for sizes coarse to fine."""
    x, orders = h[None, :] / h[-1], ORDERS[:, None]
    still = np.where(np.isfinite(KNEE), KNEE, 1.0)[:, None]
    kneed = (1.0 + still**-orders) / (1.0 + (x / still) ** orders)
    return np.asarray(x**orders) * np.where(np.isfinite(KNEE)[:, None], kneed, 1.0)
