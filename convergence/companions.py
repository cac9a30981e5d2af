"""The interval of a quantity where a companion ladder, of another degree or other cells, was climbed as well.

Both ladders go to one limit, so their intervals must meet: where they do not, at least one is wrong. Where
they do, that of the companion stands for both if it is narrower even after it was widened by the factor that
the bank demands of such a choice. Adding up the evidence of both ladders for every candidate limit, with a
stretch of its own, was about a twentieth narrower on the bank at best.
"""

import math
from collections.abc import Mapping
from dataclasses import replace

from convergence import numbers
from convergence.coverage import WITH_COMPANION, Coverage
from convergence.histories.table import Table
from convergence.histories.width import levels_key
from convergence.intervals import Interval


def together(main: Interval, other: Interval, taught: Table) -> Interval:
    """Return the interval of the main ladder with what its companion says of the same quantity."""
    if main.flaw:
        return main
    if other.flaw:
        return replace(main, companion=f"The companion ladder is not used: {other.flaw}.")
    if main.high < other.low or other.high < main.low:
        flaw = f"the two ladders do not meet: {_both(main, other)}"
        nan = math.nan
        return replace(main, limit=nan, low=nan, high=nan, half_width=nan, coverage=None, flaw=flaw)
    levels = levels_key(min(main.levels, other.levels))
    measured: Mapping[str, Coverage] = taught.coverage.get(WITH_COMPANION, {})
    said = f"The two ladders meet: {_both(main, other)}."
    known = {found.coverage.knowledge if found.coverage else "" for found in (main, other)}
    if known != {"kind and degree"} or levels not in measured:
        return replace(main, companion=said)
    half = 0.5 * (other.high - other.low) * math.exp(taught.stretch[WITH_COMPANION][levels]["always"])
    if half >= 0.5 * (main.high - main.low):
        return replace(main, companion=said, coverage=measured[levels])
    low, high = other.limit - half, other.limit + half
    return replace(
        main,
        limit=other.limit,
        low=low,
        high=high,
        half_width=max(high - main.value, main.value - low),
        coverage=measured[levels],
        companion=f"{said} The interval is that of the companion, the narrower one.",
    )


def _both(main: Interval, other: Interval) -> str:
    return f"{_reach(main)} on this ladder, {_reach(other)} on its companion"


def _reach(found: Interval) -> str:
    low, high = numbers.outward(found.low, found.high, found.limit, 0.5 * (found.high - found.low))
    return f"{low} to {high}"
