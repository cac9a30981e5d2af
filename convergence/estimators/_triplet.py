"""The three finest levels as the papers number them, and what every three-level method asks of them.

Index 1 is the finest. Ratios: r >= 1.1 at least (NPARC Alliance tutorial "Examining Spatial (Grid)
Convergence"), r > 1.3 wanted (Celik et al. 2008, J. Fluids Eng. 130, 078001, step 2).
"""

import math
from dataclasses import dataclass

import numpy as np

from convergence.results import Estimate
from convergence.sequences import noise_floor, observed_order, unusable

ASSUMED_ORDER = 2.0
FAR_BELOW = 0.5
NEAR = 0.1
SMALLEST_RATIO = 1.1
WANTED_RATIO = 1.3
LARGEST_EXPONENT = 700.0
NOT_YET = "the levels are not yet asymptotic"


@dataclass(frozen=True)
class Triplet:
    """Values whose differences fall (order > 0) and exceed round-off; `least_ratio` is min(r21, r32)."""

    f1: float
    f2: float
    f3: float
    ratio: float
    least_ratio: float
    order: float
    oscillates: bool


def three_finest(h: np.ndarray, f: np.ndarray) -> Triplet | Estimate:
    """Return the triplet, or the empty estimate that says why there is none."""
    reason = unusable(h, f, 3)
    if reason:
        return nothing(reason)
    h3, h2, h1 = (float(size) for size in h[-3:])
    f3, f2, f1 = (float(value) for value in f[-3:])
    if min(abs(f2 - f1), abs(f3 - f2)) <= noise_floor(f[-3:]):
        return nothing("neighbours among the three finest values are equal to round-off: no order is defined")
    order = observed_order(h, f)
    if not order > 0.0:
        grows = f"the differences do not fall with h (observed order {order:.2f})"
        return nothing(f"{grows}: no limit can be extrapolated", order)
    oscillates = (f2 > f1) != (f3 > f2)
    return Triplet(f1, f2, f3, h2 / h1, min(h2 / h1, h3 / h2), order, oscillates)


def richardson_error(fine: float, coarse: float, ratio: float, order: float) -> float:
    """Return the signed error of the finer value, (coarse - fine) / (ratio^order - 1)."""
    return (coarse - fine) / math.expm1(min(order * math.log(ratio), LARGEST_EXPONENT))


def nothing(remark: str, order: float = math.nan) -> Estimate:
    """Return the estimate of a method whose conditions do not hold."""
    return Estimate(math.nan, order, math.nan, remark)


def assumed(formal_order: float | None) -> tuple[float, str]:
    """Return the formal order to work with, and the remark where it had to be assumed."""
    if formal_order is None:
        return ASSUMED_ORDER, f"no formal order is given, {ASSUMED_ORDER:g} is assumed"
    return formal_order, ""


def doubts(triplet: Triplet, formal_order: float | None) -> str:
    """Return what speaks against the triplet, "" where nothing does.

    An order above an assumed one is no doubt: the elements may well be better than that.
    """
    formal, _ = assumed(formal_order)
    formal_name = f"the {'assumed' if formal_order is None else 'formal'} {formal:g}"
    order = f"observed order {triplet.order:.2f}"
    ratio = f"ratio {triplet.least_ratio:.3f} of sizes is below"
    said = []
    if triplet.oscillates:
        said.append("the values oscillate: the observed order is formal only")
    if triplet.order < FAR_BELOW * formal:
        said.append(f"{order} is far below {formal_name}: {NOT_YET}, or a singularity limits it")
    if formal_order is not None and triplet.order > (1.0 + NEAR) * formal:
        said.append(f"{order} is above {formal_name}: {NOT_YET}")
    if round(triplet.least_ratio, 6) < SMALLEST_RATIO:
        said.append(f"{ratio} {SMALLEST_RATIO}: noise governs the order")
    elif round(triplet.least_ratio, 6) < WANTED_RATIO:
        said.append(f"{ratio} the {WANTED_RATIO} wanted by Celik et al.")
    return joined(*said)


def joined(*remarks: str) -> str:
    """Join remarks, leaving out empty ones."""
    return "; ".join(remark for remark in remarks if remark)


def oscillation(triplet: Triplet) -> Estimate:
    """Return half the range of the values, ITTC 7.5-03-01-01 for oscillatory convergence; no limit."""
    values = (triplet.f1, triplet.f2, triplet.f3)
    remark = "the values oscillate: half their range is taken, no limit can be extrapolated"
    return Estimate(math.nan, math.nan, 0.5 * (max(values) - min(values)), remark)
