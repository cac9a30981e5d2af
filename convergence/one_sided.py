"""The interval of a quantity whose limit theory has on one side of the value on any mesh, such as an energy.

The side without the limit is cut off: an interval that held the limit does not lose it. Nothing is cut where
the ladder itself moves against theory, or where the whole interval lies on the other side.
"""

from dataclasses import replace

import numpy as np

from convergence.intervals import Interval


def one_sided(found: Interval, f: np.ndarray, side: int) -> Interval:
    """Return the interval above the finest value for side 1, below it for -1; as it is for 0.

    `f` are the values of the ladder, NaN where there is none.
    """
    value = found.value
    against = np.any(side * (f - value) > 0.0)
    if side == 0 or against or found.coverage is None or not found.low < value < found.high:
        return found
    which = "above" if side > 0 else "below"
    low, high = (value, found.high) if side > 0 else (found.low, value)
    return replace(
        found,
        low=low,
        high=high,
        limit=min(max(found.limit, low), high),
        half_width=high - low,
        side=f"By theory the limit is {which} the value on any mesh: the interval ends at the finest value.",
    )
