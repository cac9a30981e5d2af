"""Companion ladders of the bank: two ladders of one quantity, of another degree or other cells.

From outcomes of single ladders of three levels or more, each judged with its family left out. Where both
intervals meet, that of the second stands for both if it is narrower even after a factor: the one with which
the narrower interval is covered as asked for this number of levels, for every source of meshes, and for the
same degree as for another (split conformal, as in `stretches`).
"""

import itertools
from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence.calibration.left_out import Outcome
from convergence.calibration.stretches import ASKED, FEW, SIMILAR, conformal
from convergence.histories.width import levels_key

LEAST_LEVELS = 3
ALIKE = 1.5  # finest sizes of two ladders differ by no more than this ratio


@dataclass(frozen=True, eq=False)
class Pair:
    """Outcomes of one quantity on a ladder and on its companion."""

    main: Outcome
    other: Outcome

    @property
    def meets(self) -> bool:
        """Return whether the intervals have a limit in common."""
        return self.main.low <= self.other.high and self.other.low <= self.main.high

    @property
    def levels(self) -> str:
        return levels_key(self.main.sub.levels)

    @property
    def over(self) -> float:
        """Return the logarithm of true error over half-width of the narrower interval."""
        one = min(self.main, self.other, key=lambda outcome: outcome.half)
        return float(np.log(abs(one.best - one.sub.of.limit) / one.half))

    @property
    def groups(self) -> tuple[str, str]:
        """Return the source of the meshes, and whether the degrees differ."""
        of = self.main.sub.of
        mixed = of.degree != self.other.sub.of.degree
        return SIMILAR.get(of.source, of.source), "degrees differ" if mixed else "same degree"


def companion_pairs(judged: Sequence[Outcome]) -> list[Pair]:
    """Return every pair once."""
    alike = defaultdict(list)
    for one in judged:
        of = one.sub.of
        if not of.singular and one.sub.levels >= LEAST_LEVELS:
            alike[of.family, of.case, of.label, of.source, levels_key(one.sub.levels)].append(one)
    both = (pair for group in alike.values() for pair in itertools.combinations(group, 2))
    return [Pair(main, other) for main, other in both if _are_companions(main, other)]


def companion_factors(pairs: Sequence[Pair]) -> dict[str, float]:
    """Return the factor, one at least, by number of levels."""
    groups: dict[str, list[float]] = defaultdict(list)
    for pair in pairs:
        for group in (pair.levels, *pair.groups) if pair.meets else ():
            groups[group].append(pair.over)
    enough = {group: np.array(over) for group, over in groups.items() if len(over) >= FEW}
    over = {group: max(0.0, conformal(values, ASKED)) for group, values in enough.items()}
    levels = sorted({pair.levels for pair in pairs})
    whatever = max([0.0, *(needed for group, needed in over.items() if group not in levels)])
    return {number: float(np.exp(max(whatever, over.get(number, 0.0)))) for number in levels}


def companion_outcomes(pairs: Sequence[Pair]) -> list[Outcome]:
    """Return the interval of every pair that meets, by a factor of the other families.

    It is held against the ladder whose finest value is the better one.
    """
    found = []
    for family in sorted({pair.main.sub.of.family for pair in pairs}):
        factors = companion_factors([pair for pair in pairs if pair.main.sub.of.family != family])
        mine = [pair for pair in pairs if pair.main.sub.of.family == family and pair.meets]
        found += [_together(pair, factors.get(pair.levels, 1.0)) for pair in mine]
    return found


def _together(pair: Pair, factor: float) -> Outcome:
    better = min(pair.main.sub, pair.other.sub, key=lambda sub: sub.error)
    main, other = pair.main, pair.other
    half = other.half * factor
    if half >= main.half:
        return Outcome(better, main.low, main.high, main.growth)
    return Outcome(better, other.best - half, other.best + half, main.growth)


def _are_companions(main: Outcome, other: Outcome) -> bool:
    differ = (main.sub.of.degree, main.sub.of.shape) != (other.sub.of.degree, other.sub.of.shape)
    return differ and 1.0 / ALIKE <= float(main.sub.h[-1] / other.sub.h[-1]) <= ALIKE
