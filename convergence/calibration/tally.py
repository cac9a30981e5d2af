"""What the calibrated interval and the published rules did on the same sub-ladders, counted by groups.

Ours covers where the limit lies within its interval, a rule where it lies within its half-width U of the
finest value. U/e is a half-width over the true error of the finest value. The rules are told the formal order
of kind and degree.
"""

import math
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from convergence import rooms
from convergence.calibration.binomial import binomial_interval
from convergence.calibration.left_out import KNOWLEDGE, Outcome
from convergence.calibration.sub_ladders import SubLadder
from convergence.columns import formal_order
from convergence.coverage import Knowledge
from convergence.histories.width import MOST_LEVELS
from convergence.results import Estimate

OURS: dict[Knowledge, str] = {
    "nothing": "bare table",
    "kind": "kind known",
    "kind and degree": "kind and degree known",
}


@dataclass(frozen=True)
class Answer:
    """Whether the limit is covered, and U/e about the best estimate (`own`) and the finest value.

    `share`: signed error of the best estimate over the half-width about it.
    """

    covers: bool
    own: float
    finest: float
    share: float


@dataclass(frozen=True, eq=False)
class Judged:
    """A sub-ladder with a limit and the answers by method; a rule that gives none is missing."""

    sub: SubLadder
    answers: Mapping[str, Answer]

    @property
    def levels(self) -> int:
        """Return the number of levels, 5 for five and more."""
        return min(self.sub.levels, MOST_LEVELS)


Test = Callable[[Judged], bool]


@dataclass(frozen=True, eq=False)
class Tally:
    """One method on some sub-ladders: how many there are, and the answers that it gave."""

    cases: int
    answers: Sequence[Answer]

    @property
    def covered(self) -> int:
        return sum(answer.covers for answer in self.answers)

    @property
    def share(self) -> float:
        """Return the share of the answers that cover, NaN without an answer."""
        return self.covered / len(self.answers) if self.answers else math.nan

    @cached_property
    def bounds(self) -> tuple[float, float]:
        """Return the binomial interval of the share."""
        return binomial_interval(self.covered, len(self.answers))

    @property
    def own(self) -> float:
        """Return the median U/e about the best estimate, NaN without an answer."""
        return float(np.median([one.own for one in self.answers])) if self.answers else math.nan

    @property
    def finest(self) -> float:
        """Return the median U/e about the finest value, NaN without an answer."""
        return float(np.median([one.finest for one in self.answers])) if self.answers else math.nan


def rules() -> list[str]:
    """Return the names of the published rules."""
    return [_words(name) for name in rooms.names("estimators")]


def judged(outcomes: Mapping[Knowledge, Sequence[Outcome]]) -> list[Judged]:
    """Return every sub-ladder that has a limit with the answers of all methods."""
    estimators = {_words(name): rooms.find("estimators", name) for name in rooms.names("estimators")}
    found = []
    for of_one in zip(*(outcomes[known] for known in KNOWLEDGE), strict=True):
        sub = of_one[0].sub
        if not sub.of.singular:
            ours = {OURS[known]: ours_of(one) for known, one in zip(KNOWLEDGE, of_one, strict=True)}
            found.append(Judged(sub, {**ours, **_published(sub, estimators)}))
    return found


def tally(group: Iterable[Judged], method: str) -> Tally:
    """Return the count of one method over a group."""
    members = list(group)
    return Tally(len(members), [one.answers[method] for one in members if method in one.answers])


def ours_of(one: Outcome) -> Answer:
    """Return what the calibrated interval answers."""
    error, half = one.sub.error, one.half
    share = (one.best - one.sub.of.limit) / half
    return Answer(one.is_covered, half / error, one.about_finest / error, share)


def _published(sub: SubLadder, estimators: Mapping[str, Callable[..., Estimate]]) -> dict[str, Answer]:
    found = {}
    order = formal_order(sub.of.kind, sub.of.degree)
    for name, estimator in estimators.items():
        half = estimator(sub.h, sub.f, formal_order=order).uncertainty
        if math.isfinite(half) and half > 0.0:
            ratio = half / sub.error
            share = (float(sub.f[-1]) - sub.of.limit) / half
            found[name] = Answer(ratio >= 1.0, ratio, ratio, share)
    return found


def _words(name: str) -> str:
    return "Richardson" if name == "richardson" else name.replace("_", " ")
