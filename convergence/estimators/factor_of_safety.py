"""Factor-of-safety method: a factor on the Richardson error that grows as the order leaves the formal one.

Xing & Stern 2010, with FS0 = 2.45, FS1 = 1.6, FS2 = 14.8. Defined there for a constant ratio; at unequal
ratios r is that of the two finest levels and p the order of all three.
"""

import numpy as np

from convergence.estimators._triplet import (
    assumed,
    doubts,
    joined,
    oscillation,
    richardson_error,
    three_finest,
)
from convergence.results import Estimate

SOURCE = "T. Xing, F. Stern, Factors of safety for Richardson extrapolation, J. Fluids Eng. 132 (2010) 061403"
LEVELS = 3
FS0, FS1, FS2 = 2.45, 1.6, 14.8


def safety(relative_order: float) -> float:
    """Return the factor at P = observed / formal order, P > 0."""
    if relative_order <= 1.0:
        return FS1 * relative_order + FS0 * (1.0 - relative_order)
    return FS1 * relative_order + FS2 * (relative_order - 1.0)


def factor_of_safety(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return the Richardson limit and the factor times its error; half the range of oscillating values."""
    triplet = three_finest(h, f)
    if isinstance(triplet, Estimate):
        return triplet
    if triplet.oscillates:
        return oscillation(triplet)
    formal, remark = assumed(formal_order)
    error = richardson_error(triplet.f1, triplet.f2, triplet.ratio, triplet.order)
    remark = joined(remark, doubts(triplet, formal_order))
    width = safety(triplet.order / formal) * abs(error)
    return Estimate(triplet.f1 - error, triplet.order, width, remark)
