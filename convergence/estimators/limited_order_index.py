"""Grid convergence index with an order limited to 0.5 ... formal, and factor 3 unless both agree.

Oberkampf & Roy 2010, chapter 8: the formal order and factor 1.25 where the observed order is within 10 %.
"""

import numpy as np

from convergence.estimators._triplet import (
    NEAR,
    assumed,
    doubts,
    joined,
    nothing,
    richardson_error,
    three_finest,
)
from convergence.results import Estimate

SOURCE = (
    "W. L. Oberkampf, C. J. Roy, Verification and Validation in Scientific Computing, "
    "Cambridge University Press 2010, chapter 8"
)
LEVELS = 3
LEAST_ORDER = 0.5
FACTOR = 1.25
DOUBTFUL_FACTOR = 3.0


def factor_and_order(observed: float, formal: float) -> tuple[float, float]:
    """Return the safety factor and the order to use it with."""
    if abs(observed - formal) <= NEAR * formal:
        return FACTOR, formal
    return DOUBTFUL_FACTOR, min(max(LEAST_ORDER, observed), formal)


def limited_order_index(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return the index; its limit is extrapolated with the limited order, its order is the observed one.

    It is cautious by a factor of two or more on good ladders whose observed order is not yet formal.
    """
    triplet = three_finest(h, f)
    if isinstance(triplet, Estimate):
        return triplet
    if triplet.oscillates:
        return nothing("the values oscillate: no order is observed that could be limited")
    formal, remark = assumed(formal_order)
    factor, order = factor_and_order(triplet.order, formal)
    error = richardson_error(triplet.f1, triplet.f2, triplet.ratio, order)
    remark = joined(remark, doubts(triplet, formal_order))
    return Estimate(triplet.f1 - error, triplet.order, factor * abs(error), remark)
