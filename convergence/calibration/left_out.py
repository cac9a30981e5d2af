"""Every sub-ladder judged by a table that its family had no part in: what the measured coverage rests on."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import get_args

import numpy as np

from convergence.calibration.fit import Weighed, fitted_growth, fitted_weights
from convergence.calibration.stretches import Told, stretches
from convergence.calibration.sub_ladders import SubLadder
from convergence.coverage import Knowledge
from convergence.histories.belief import Belief
from convergence.histories.table import key
from convergence.histories.width import facts, half_width, levels_key

LEAST = 40  # sub-ladders with weights of their own
KNOWLEDGE: tuple[Knowledge, ...] = get_args(Knowledge)


@dataclass(frozen=True, eq=False)
class Outcome:
    """A sub-ladder with its interval and the logarithm of the odds of growth, its family left out."""

    sub: SubLadder
    low: float
    high: float
    growth: float

    @property
    def is_covered(self) -> bool:
        return self.low <= self.sub.of.limit <= self.high

    @property
    def best(self) -> float:
        """Return the best estimate of the limit."""
        return 0.5 * (self.low + self.high)

    @property
    def half(self) -> float:
        """Return the half-width about the best estimate."""
        return 0.5 * (self.high - self.low)

    @property
    def about_finest(self) -> float:
        """Return the half-width about the finest value."""
        return max(self.high - float(self.sub.f[-1]), float(self.sub.f[-1]) - self.low)


def finite(judged: Sequence[Outcome]) -> list[Outcome]:
    """Return the outcomes of ladders that have a limit."""
    return [one for one in judged if not one.sub.of.singular]


def told_as(known: Knowledge, sub: SubLadder) -> tuple[str, int | None]:
    """Return the kind and degree that a state of knowledge tells of a sub-ladder."""
    if known == "nothing":
        return "unknown", None
    return sub.of.kind, sub.of.degree if known == "kind and degree" else None


def all_weights(bank: Sequence[Weighed], known: Knowledge) -> tuple[dict[str, np.ndarray], np.ndarray]:
    """Return the weights by key, "" among them, and those of the growing laws."""
    finite = [one for one in bank if not one.sub.of.singular]
    shared = fitted_weights(finite)
    keys = [key(*told_as(known, one.sub)) for one in finite]
    weights = {"": shared}
    for name in sorted(set(keys) - {""}):
        own = [one for one, of in zip(finite, keys, strict=True) if of == name]
        weights[name] = fitted_weights(own, shared) if len(own) >= LEAST else shared
    return weights, fitted_growth([one for one in bank if one.sub.of.singular])


def told_left_out(
    bank: Sequence[Weighed], known: Knowledge, say: Callable[[str], None]
) -> list[tuple[Told, float]]:
    """Return facts and growth of every sub-ladder, from weights fitted without its family."""
    found: list[tuple[Told, float]] = []
    for family in sorted({one.sub.of.family for one in bank}):
        weights, growing = all_weights([one for one in bank if one.sub.of.family != family], known)
        found += [_told(one, weights, growing, known) for one in bank if one.sub.of.family == family]
        say(f"{known}: without {family}")
    return found


def _told(
    one: Weighed, weights: dict[str, np.ndarray], growing: np.ndarray, known: Knowledge
) -> tuple[Told, float]:
    kind, degree = told_as(known, one.sub)
    laws = weights.get(key(kind, degree), weights[""]) + growing
    shape = (len(one.limits), *laws.shape)
    belief = Belief(one.limits, one.likely.reshape(shape) * laws)
    return Told(one.sub, facts(belief, one.sub.h, one.sub.f, kind, degree), belief.limit), belief.growth


def outcomes(told: Sequence[tuple[Told, float]], known: Knowledge) -> list[Outcome]:
    """Return the interval of every sub-ladder by stretches fitted without its family."""
    found = []
    for family in sorted({one.sub.of.family for one, _ in told}):
        others = [one for one, _ in told if one.sub.of.family != family and not one.sub.of.singular]
        fitted = stretches(others, known)
        for one, growth in told:
            if one.sub.of.family == family:
                half = half_width(one.facts, fitted[levels_key(one.sub.levels)])
                found.append(Outcome(one.sub, one.limit - half, one.limit + half, growth))
    return found
