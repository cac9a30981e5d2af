"""What the next mesh may be promised to do: measured by refining ladders of the bank as an analyst would.

The first levels of a long ladder are judged, then the same with one of the finer levels added, and with
levels between where the jump is large. Safety is the share BOUNDED of ratio · half-width left, over families
that count the same. It is measured on each family without it: every finer level is held against the tightest
tolerance for which it would have been promised.
"""

import itertools
from collections import defaultdict
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from convergence.calibration.binomial import binomial_interval
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.sub_ladders import RATIOS, STILL, family_weights
from convergence.histories.calibrated import FINEST_LEVELS, read
from convergence.histories.promise import ENOUGH, LEAST_RATIO, MOST_RATIO, ONE_STEP, Promise, promise_class
from convergence.histories.table import Table

BOUNDED = 0.94  # so that nine in ten hold where a family is new
LEVELS = (3, 4, 5)
STRIDES = (1, 2)
ASKED = (0.1, 0.9)  # tolerances, as shares of the present half-width, that the measure is taken on
MOST = 60  # histories of a family
TRIES = 40  # for each
SEED = 21
DIGITS = 4


@dataclass(frozen=True, eq=False)
class Step:
    """A finer level added to a ladder: ratio of sizes, and the half-width then as a share of that before."""

    family: str
    group: str
    ratio: float
    left: float


def promises(ladders: Iterable[KnownLadder], taught: Table) -> dict[str, Promise]:
    """Return the bound of every class, from intervals by the weights and stretches of a table."""
    groups = defaultdict(list)
    for ladder, levels in _starts(ladders):
        for step in _steps(ladder, levels, taught):
            groups[step.group].append(step)
    return {name: promise(group) for name, group in sorted(groups.items()) if len(group) >= ENOUGH}


def _starts(ladders: Iterable[KnownLadder]) -> Iterator[tuple[KnownLadder, np.ndarray]]:
    """Yield ladders with the levels an analyst has of them, evenly over the families."""
    random = np.random.default_rng(SEED)
    families = defaultdict(list)
    for ladder in ladders:
        if not ladder.singular and np.isfinite(ladder.f).all():
            families[ladder.family].append(ladder)
    for _, group in sorted(families.items()):
        found = (_start(group[random.integers(len(group))], random) for _ in range(TRIES * MOST))
        yield from itertools.islice((start for start in found if start is not None), MOST)


def _start(ladder: KnownLadder, random: np.random.Generator) -> tuple[KnownLadder, np.ndarray] | None:
    stride, count = int(random.choice(STRIDES)), int(random.choice(LEVELS))
    free = len(ladder.f) - 1 - (count - 1) * stride
    if free < 1:
        return None
    levels = int(random.integers(free)) + stride * np.arange(count)
    h, f = ladder.h[levels], ladder.f[levels]
    ratios = h[:-1] / h[1:]
    still = np.ptp(f) <= STILL * np.abs(f).max()
    return None if still or ratios.min() < RATIOS[0] or ratios.max() > RATIOS[1] else (ladder, levels)


def _steps(ladder: KnownLadder, levels: np.ndarray, taught: Table) -> Iterator[Step]:
    last, change = int(levels[-1]), abs(float(ladder.f[levels[-1]] - ladder.f[levels[-2]]))
    for kind, degree in (("unknown", None), (ladder.kind, ladder.degree)):
        before = _half_width(ladder, levels, kind, degree, taught)
        group = promise_class(kind, degree, before, change)
        for finer in range(last + 1, len(ladder.h)):
            ratio = float(ladder.h[last] / ladder.h[finer])
            if LEAST_RATIO <= ratio <= MOST_RATIO:
                more = np.append(levels, added(ladder.h, last, finer))
                after = _half_width(ladder, more, kind, degree, taught)
                yield Step(ladder.family, group, ratio, after / before)


def added(h: np.ndarray, last: int, finer: int) -> list[int]:
    """Return the levels up to a finer one, no more than are needed to bound the ratios."""
    added: list[int] = []
    while last < finer:
        near = [at for at in range(last + 1, finer + 1) if h[last] / h[at] <= ONE_STEP]
        last = max(near, default=last + 1)
        added.append(last)
    return added


def _half_width(
    ladder: KnownLadder, levels: np.ndarray, kind: str, degree: int | None, taught: Table
) -> float:
    """Return the half-width of the calibrated interval about the finest value."""
    h, f = ladder.h[levels][-FINEST_LEVELS:], ladder.f[levels][-FINEST_LEVELS:]
    return read(h, f, kind, degree, taught).about(float(f[-1]))


def promise(steps: Sequence[Step]) -> Promise:
    """Return the bound of some steps and how it was kept."""
    families = np.array([step.family for step in steps])
    ratios, left = np.array([(step.ratio, step.left) for step in steps]).T
    kept: list[bool] = []
    for family in np.unique(families):
        own = families == family
        told = _safety(families[~own], ratios[~own] * left[~own]) / ratios[own]
        promised = (told >= ASKED[0]) & (told <= ASKED[1])
        kept += (left[own] <= told)[promised].tolist()
    cases, held = len(kept), sum(kept)
    low, high = binomial_interval(held, cases)
    safety = _safety(families, ratios * left)
    return Promise(round(safety, DIGITS), cases, held, round(low, DIGITS), round(high, DIGITS))


def _safety(families: np.ndarray, products: np.ndarray) -> float:
    """Return the quantile of ratio times half-width left; families count the same."""
    order = np.argsort(products)
    shares = np.cumsum(family_weights(families)[order]) / len(families)
    return float(products[order[min(int(np.searchsorted(shares, BOUNDED)), len(order) - 1)]])
