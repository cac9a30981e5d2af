"""Grid convergence index of the finest level, as an absolute half-width.

Roache 1994; procedure and oscillating values after Celik et al. 2008, steps 3 to 5. The "asymptotic ratio"
GCI32 / (r^p GCI21) often printed beside it is f1/f2 identically at constant ratio, so it is not used.
"""

import math

import numpy as np

from convergence.estimators._triplet import (
    assumed,
    doubts,
    joined,
    nothing,
    richardson_error,
    three_finest,
)
from convergence.results import Estimate
from convergence.sequences import noise_floor, unusable

SOURCE = (
    "P. J. Roache, Perspective: a method for uniform reporting of grid refinement studies, "
    "J. Fluids Eng. 116 (1994) 405-413; I. B. Celik, U. Ghia, P. J. Roache, C. J. Freitas, H. Coleman, "
    "P. E. Raad, Procedure for estimation and reporting of uncertainty due to discretization in CFD "
    "applications, J. Fluids Eng. 130 (2008) 078001"
)
LEVELS = 2
FACTOR = 1.25
TWO_LEVEL_FACTOR = 3.0


def grid_convergence_index(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return 1.25 |e| with the observed order of three levels, 3 |e| with the formal order of two.

    Where the values oscillate but settle, the order is that of Celik et al. for s = -1. Their absolute
    value, which turns growing differences into a positive order, is not taken: there is no index then.
    """
    if len(f) < 3:
        return _of_two(h, f, formal_order)
    triplet = three_finest(h, f)
    if isinstance(triplet, Estimate):
        return triplet
    error = richardson_error(triplet.f1, triplet.f2, triplet.ratio, triplet.order)
    return Estimate(triplet.f1 - error, triplet.order, FACTOR * abs(error), doubts(triplet, formal_order))


def _of_two(h: np.ndarray, f: np.ndarray, formal_order: float | None) -> Estimate:
    reason = unusable(h, f, 2)
    if reason:
        return nothing(reason)
    coarse, fine = float(f[-2]), float(f[-1])
    if abs(coarse - fine) <= noise_floor(f):
        return nothing("the two values are equal to round-off: nothing is known of the error")
    order, remark = assumed(formal_order)
    error = richardson_error(fine, coarse, float(h[-2]) / float(h[-1]), order)
    remark = joined("two levels show no order: the formal one is taken on trust, with factor 3", remark)
    return Estimate(fine - error, math.nan, TWO_LEVEL_FACTOR * abs(error), remark)
