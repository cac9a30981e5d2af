"""The calibrated interval of one ladder: its belief, stretched, and the coverage measured for its like."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from convergence.coverage import Coverage
from convergence.histories.belief import Belief, belief
from convergence.histories.table import CAUTION, Table, key, knowledge, table
from convergence.histories.width import facts, half_width, levels_key

ORDER_SHARES = (0.025, 0.975)
NEGLIGIBLE = 1e-6  # of the span of the values
LEAST_TO_SHOW = 4  # levels
FINEST_LEVELS = 7  # the finest ones count
Growth = Literal["shown", "possible", "excluded"]


@dataclass(frozen=True)
class Calibrated:
    """Best estimate of the limit and its interval; the order in 95 % of the belief; growth without limit.

    `odds`: logarithm of the odds of growth without limit.
    """

    limit: float
    low: float
    high: float
    order_low: float
    order_high: float
    growth: Growth
    odds: float
    coverage: Coverage | None

    def about(self, value: float) -> float:
        """Return the half-width about a value: the distance to the farther end."""
        return max(self.high - value, value - self.low)


def calibrated(
    h: np.ndarray, f: np.ndarray, *, kind: str = "unknown", degree: int | None = None, resolution: float = 0.0
) -> Calibrated:
    """Return what two or more different values over falling sizes say.

    `resolution` is how far rounding or the solver may have moved each value: the interval then spans those of
    the values moved so, up and down in turn, where changes from level to level are read worst.
    """
    h, f = h[-FINEST_LEVELS:], f[-FINEST_LEVELS:]
    taught = table()
    found = read(h, f, kind, degree, taught)
    if resolution <= NEGLIGIBLE * float(np.ptp(f)):
        return found
    turns = resolution * (-1.0) ** np.arange(len(f))
    both = [values for values in (f - turns, f + turns) if np.ptp(values) > 0.0]
    moved = [read(h, values, kind, degree, taught) for values in both]
    ends = [abs(end - found.limit) for one in (found, *moved) for end in (one.low, one.high)]
    half = max(*ends, resolution)
    return replace(found, low=found.limit - half, high=found.limit + half)


def read(h: np.ndarray, f: np.ndarray, kind: str, degree: int | None, taught: Table) -> Calibrated:
    """Return what a table teaches of exact values of at most FINEST_LEVELS levels."""
    kind = kind if kind in taught.weights else "unknown"
    finest, span = float(f[-1]), float(np.ptp(f))
    shifted = (f - finest) / span
    weights = taught.weights.get(key(kind, degree), taught.weights[""])
    found = belief(h, shifted, weights + taught.growing, caution=CAUTION)
    known, levels = knowledge(kind, degree), levels_key(len(f))
    half = span * half_width(facts(found, h, shifted, kind, degree), taught.stretch[known][levels])
    limit = finest + span * found.limit
    low, high = (found.order(share) for share in ORDER_SHARES)
    return Calibrated(
        limit=limit,
        low=limit - half,
        high=limit + half,
        order_low=low,
        order_high=high,
        growth=_growth(found, taught.growth[known], len(f)),
        odds=found.growth,
        coverage=taught.coverage[known][levels],
    )


def _growth(found: Belief, above: Mapping[str, float], levels: int) -> Growth:
    if found.growth >= above["shown"] and levels >= LEAST_TO_SHOW:
        return "shown"
    return "possible" if found.growth >= above["possible"] else "excluded"
