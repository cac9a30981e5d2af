"""Correction-factor method: the Richardson error weighted by how far the order is from the formal one.

Stern et al. 2001, Wilson et al. 2004; formulas as in ITTC 7.5-03-01-01 (2008, 2017). Defined there for a
constant ratio; at unequal ratios r is that of the two finest levels and p the order of all three.
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

SOURCE = (
    "F. Stern, R. V. Wilson, H. W. Coleman, E. G. Paterson, Comprehensive approach to verification and "
    "validation of CFD simulations - part 1, J. Fluids Eng. 123 (2001) 793-802; R. Wilson, J. Shao, "
    "F. Stern, Discussion: criticisms of the correction factor verification method, J. Fluids Eng. 126 "
    "(2004) 704-706; ITTC Recommended Procedure 7.5-03-01-01 (2017)"
)
LEVELS = 3


def correction(ratio: float, order: float, formal: float) -> float:
    """Return C = (r^p - 1) / (r^p_formal - 1): 1 in the asymptotic range."""
    return richardson_error(0.0, 1.0, ratio, formal) / richardson_error(0.0, 1.0, ratio, order)


def uncertainty_uncorrected(factor: float, error: float) -> float:
    """Return the half-width about the finest value; `error` is the Richardson error, `factor` is C."""
    away = abs(1.0 - factor)
    return (9.6 * away**2 + 1.1 if away < 0.125 else 2.0 * away + 1.0) * abs(error)


def uncertainty_corrected(factor: float, error: float) -> float:
    """Return the half-width about the corrected value f1 - C error."""
    away = abs(1.0 - factor)
    return (2.4 * away**2 + 0.1 if away < 0.25 else away) * abs(error)


def correction_factor(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return the uncorrected half-width; the limit is the corrected value f1 - C error.

    That limit is an extrapolation with the formal order. Oscillating values have half their range.
    """
    triplet = three_finest(h, f)
    if isinstance(triplet, Estimate):
        return triplet
    if triplet.oscillates:
        return oscillation(triplet)
    formal, remark = assumed(formal_order)
    error = richardson_error(triplet.f1, triplet.f2, triplet.ratio, triplet.order)
    factor = correction(triplet.ratio, triplet.order, formal)
    limit = triplet.f1 - factor * error
    remark = joined(remark, doubts(triplet, formal_order))
    return Estimate(limit, triplet.order, uncertainty_uncorrected(factor, error), remark)
