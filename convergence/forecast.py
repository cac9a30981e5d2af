"""What the next level will cost, from the levels so far: seconds and peak memory.

A cost is taken as a + b·n^e in the number of unknowns n: a is what does not grow (the interpreter, loaded
packages, fixed work). The exponent is the slope of the last two levels in logarithms, kept between 1 and
the steepest known one: 2 for the time and 1.5 for the memory of a sparse factorization in space
(Lipton, Rose & Tarjan 1979, SIAM J. Numer. Anal. 16:346, from memory: n^2 and n^(4/3); lower in a plane).

Measured on ladders to 1.3 million unknowns: from two levels on, the seconds of plane parts are foretold
within a factor of 2, of solids 4. Memory is foretold at most a quarter too low; up to 2.7 times too high
where working buffers of fixed size have just been filled. Where multigrid fails on a solid and it is
factorized, 2.5 times the memory foretold was needed. One level tells little, so constants help.
"""

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence import numbers
from convergence.results import Level

STEEPEST_TIME = 2.0
STEEPEST_MEMORY = 1.5
SECONDS_PER_UNKNOWN = 2e-5
MB_PER_UNKNOWN = 2e-3
MB_AT_START = 75.0
DOUBT = 2.0


@dataclass(frozen=True)
class Forecast:
    """What a level is expected to need; memory in MB, the peak of the whole process."""

    seconds: float
    memory: float


@dataclass(frozen=True)
class Budget:
    """What a run may use: seconds of solving, and MB of memory."""

    seconds: float = math.inf
    memory: float = math.inf


def forecast(levels: Sequence[Level], dofs: float) -> Forecast:
    """Return the cost of a level of `dofs` unknowns, finer than the levels so far."""
    counts = [level.dofs for level in levels]
    seconds, memory = [level.seconds for level in levels], [level.memory for level in levels]
    return Forecast(
        grown(counts, seconds, dofs, steepest=STEEPEST_TIME, slope=SECONDS_PER_UNKNOWN),
        grown(counts, memory, dofs, steepest=STEEPEST_MEMORY, slope=MB_PER_UNKNOWN, start=MB_AT_START),
    )


def grown(
    counts: Sequence[float],
    costs: Sequence[float],
    ahead: float,
    *,
    steepest: float,
    slope: float = math.nan,
    start: float = 0.0,
) -> float:
    """Return the cost at a count `ahead`; costs that are not known (NaN) are left out.

    Where two levels show no growth, the cost grows by `slope` a count, but not faster than in proportion.
    With no cost known it is start + slope × ahead: NaN where there is no slope either.
    """
    known = [(n, cost) for n, cost in zip(counts, costs, strict=True) if n > 0.0 and cost > 0.0]
    if not known:
        return start + slope * ahead
    fine, last = known[-1]
    coarse, before = known[-2] if len(known) > 1 else (fine, last)
    if fine <= coarse or last <= before:
        return last + float(np.fmin(slope, last / fine)) * (ahead - fine)
    exponent = float(np.clip(math.log(last / before) / math.log(fine / coarse), 1.0, steepest))
    share = 1.0 - (coarse / fine) ** exponent
    return float(last + (last - before) / share * ((ahead / fine) ** exponent - 1.0))


def shortage(levels: Sequence[Level], dofs: int, budget: Budget, spent: float = 0.0) -> str:
    """Return what a level lacks in a budget of which `spent` seconds are gone, "" where it fits.

    Before the third level the forecast has little to rest on: only what exceeds twice the budget is refused.
    """
    ahead = forecast(levels, dofs)
    doubt = DOUBT if len(levels) < 2 else 1.0
    left = max(budget.seconds - spent, 0.0)
    lacking = []
    if ahead.memory > doubt * budget.memory:
        needed, allowed = numbers.amounts(ahead.memory, budget.memory, numbers.MEMORY)
        lacking.append(f"about {needed} of memory where {allowed} are available")
    if ahead.seconds > doubt * left:
        needed, allowed = numbers.amounts(ahead.seconds, left, numbers.TIME)
        lacking.append(f"about {needed} where {allowed} are left")
    return f"it would need {' and '.join(lacking)}" if lacking else ""
