"""Sub-ladders of the bank: what an analyst may have solved of each long ladder.

Neighbouring levels, every second, every third, and irregular choices; two to seven levels whose ratios lie
between 1.2 and 2.6. A sub-ladder is left out where its limit is not known 20 times better than its own finest
error, or where the values hardly move. Of every family, kinds of quantity and numbers of levels come in equal
parts, as far as there are enough.
"""

import itertools
from collections import defaultdict
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from convergence.calibration.known_ladder import KnownLadder

LEVELS = (2, 3, 4, 5, 6, 7)
STRIDES = (1, 2, 3)
RATIOS = (1.2, 2.6)
IRREGULAR = 4
BETTER_KNOWN = 20.0
STILL = 1e-7
SEED = 20


@dataclass(frozen=True, eq=False)
class SubLadder:
    """Some levels of a known ladder, coarse to fine."""

    of: KnownLadder
    h: np.ndarray
    f: np.ndarray

    @property
    def error(self) -> float:
        """Return the true error of the finest value; NaN where there is no limit."""
        return abs(float(self.f[-1]) - self.of.limit)

    @property
    def levels(self) -> int:
        return len(self.f)


def sub_ladders(ladders: Iterable[KnownLadder], most: int) -> list[SubLadder]:
    """Return at most `most` sub-ladders of every family, the same ones at every call."""
    random = np.random.default_rng(SEED)
    found: dict[str, dict[tuple[str, bool, int], list[SubLadder]]] = defaultdict(lambda: defaultdict(list))
    for ladder in ladders:
        for levels in _choices(len(ladder.f), random):
            sub = SubLadder(ladder, ladder.h[levels], ladder.f[levels])
            if _is_usable(sub):
                found[ladder.family][ladder.kind, ladder.singular, min(sub.levels, 5)].append(sub)
    chosen: list[SubLadder] = []
    for groups in found.values():
        for group in groups.values():
            random.shuffle(group)
        chosen += itertools.islice(_in_turn(groups.values()), most)
    return chosen


def family_weights(families: Sequence[str] | np.ndarray) -> np.ndarray:
    """Return a weight per sub-ladder by its family: families count the same, the mean is one."""
    _, index, counts = np.unique(families, return_inverse=True, return_counts=True)
    return np.asarray(len(families) / len(counts) / counts[index])


def _in_turn(groups: Iterable[list[SubLadder]]) -> Iterator[SubLadder]:
    """Yield one of each group, then the next of each."""
    rounds = itertools.zip_longest(*groups)
    return (sub for one in rounds for sub in one if sub is not None)


def _choices(count: int, random: np.random.Generator) -> list[np.ndarray]:
    regular = [
        np.arange(end - (n - 1) * stride, end + 1, stride)
        for n in LEVELS
        for stride in STRIDES
        for end in range((n - 1) * stride, count)
    ]
    sizes = random.integers(3, max(4, min(count, 6)), IRREGULAR)
    irregular = [np.sort(random.choice(count, n, replace=False)) for n in sizes if n <= count]
    return regular + irregular


def _is_usable(sub: SubLadder) -> bool:
    ratios = sub.h[:-1] / sub.h[1:]
    if not np.isfinite(sub.f).all() or ratios.min() < RATIOS[0] or ratios.max() > RATIOS[1]:
        return False
    scale = float(np.abs(sub.f).max())
    if np.ptp(sub.f) <= STILL * scale:
        return False
    return sub.of.singular or sub.error >= max(BETTER_KNOWN * sub.of.bound, STILL * scale)
