"""Stretch of the interval: quantile regression of true errors on the facts of belief and ladder.

Koenker & Bassett 1978, Econometrica 46:33; Hunter & Lange 2000, J. Comput. Graph. Stat. 9:60, for the way to
its minimum. Then one factor so that every source of meshes, kind of quantity and dimension is covered (split
conformal: Vovk, Gammerman & Shafer 2005, Algorithmic Learning in a Random World, section 4.1).
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from convergence.calibration.sub_ladders import SubLadder, family_weights
from convergence.coverage import Knowledge
from convergence.histories.width import UNIT, half_width, levels_key

ASKED = 0.96  # a point more than is claimed: leaving out knows only the families that were thought of
REGRESSED = 0.955
STEPS = 80
NEAR = 1e-3
RIDGE = 20.0  # ladders that would stand for facts without effect
LEAST_RIDGE = 1e-9  # keeps the effect of a fact that no ladder of a fold has at zero
FOLDS = 6
LEAST_LEVELS = "2"  # they cannot show an order, and have a constant of their own
LEAST_ERROR = 1e-4
FEW = 50
MANY = 150  # in fewer ladders of a kind or dimension a handful of one family would decide
SIMILAR = {"similar": "nested"}
Facts = Mapping[str, float]
Stretch = dict[str, float]


@dataclass(frozen=True, eq=False)
class Told:
    """A sub-ladder with the facts of a belief that its family had no part in, and that best estimate."""

    sub: SubLadder
    facts: Facts
    limit: float

    @property
    def miss(self) -> float:
        """Return the true error of the best estimate."""
        return abs(self.limit - self.sub.of.limit)


def stretches(told: Sequence[Told], known: Knowledge) -> dict[str, Stretch]:
    """Return β by number of levels in a state of knowledge.

    Their constants make sure that all ladders of three levels and more, and apart from them those of two, are
    covered as asked: every source of meshes with every number of levels, every kind of quantity and every
    dimension. They come from errors of families that had no part in the β they are held against.
    """
    levels = np.array([levels_key(one.sub.levels) for one in told])
    found: dict[str, Stretch] = {}
    over = np.empty(len(told))
    for number in np.unique(levels).tolist():
        at = np.flatnonzero(levels == number)
        of_these = [told[place] for place in at.tolist()]
        names = _names(of_these, known)
        found[number] = _regressed(of_these, names)
        over[at] = _left_over(of_these, names)
    for numbers in ({LEAST_LEVELS}, set(found) - {LEAST_LEVELS}):
        at = np.flatnonzero(np.isin(levels, sorted(numbers)))
        if len(at):
            needed = _needed([told[place] for place in at.tolist()], over[at])
            for number in numbers:
                found[number]["always"] += needed
    return found


def _left_over(known: Sequence[Told], names: Sequence[str]) -> np.ndarray:
    """Return the logarithm of error over half-width of each, by β of other families."""
    families = np.array([one.sub.of.family for one in known])
    fold = np.unique(families, return_inverse=True)[1] % FOLDS
    over = np.empty(len(known))
    for number in range(FOLDS):
        others = _regressed([one for one, at in zip(known, fold, strict=True) if at != number], names)
        for place in np.flatnonzero(fold == number).tolist():
            over[place] = np.log(known[place].miss / half_width(known[place].facts, others))
    return over


def _needed(known: Sequence[Told], over: np.ndarray) -> float:
    """Return the least constant by which every group with ladders enough is covered."""
    levels = [levels_key(one.sub.levels) for one in known]
    sources = [
        f"{SIMILAR.get(one.sub.of.source, one.sub.of.source)} {of}"
        for one, of in zip(known, levels, strict=True)
    ]
    kinds = [one.sub.of.kind for one in known]
    dimensions = [str(one.sub.of.dimension) for one in known]
    needed = []
    for labels, few in ((levels, FEW), (sources, FEW), (kinds, MANY), (dimensions, MANY)):
        groups = [over[np.array(labels) == label] for label in sorted(set(labels))]
        needed += [conformal(group, ASKED) for group in groups if len(group) >= few]
    return max(needed, default=conformal(over, ASKED))


def _regressed(known: Sequence[Told], names: Sequence[str]) -> Stretch:
    rows = np.array([[one.facts.get(name, 0.0) for name in names] for one in known])
    ratios = np.array([one.miss / one.facts[UNIT] for one in known])
    found = quantile_regression(rows, np.log(np.maximum(ratios, LEAST_ERROR)), _weights(known))
    return dict(zip(names, found.tolist(), strict=True))


def _weights(known: Sequence[Told]) -> np.ndarray:
    """Return weights by which families count the same, and so do kinds of quantity with ladders enough."""
    weights = family_weights([one.sub.of.family for one in known])
    kinds, of, number = np.unique([one.sub.of.kind for one in known], return_inverse=True, return_counts=True)
    shares = np.bincount(of, weights)
    enough = number >= MANY
    factors = np.ones(len(kinds))
    if enough.any():
        factors[enough] = shares[enough].mean() / shares[enough]
    return np.asarray(weights * factors[of])


def _names(told: Sequence[Told], known: Knowledge) -> list[str]:
    """Return the facts that vary among some ladders, with those of kind and degree where they are told."""
    usual = [name for name in told[0].facts if not name.startswith(("is ", "degree ")) and name != UNIT]
    usual = [n for n in usual if n != "always" and np.ptp([one.facts[n] for one in told]) > 0.0]
    present = sorted({name for one in told for name in one.facts})
    if known != "nothing":
        usual += [name for name in present if name.startswith("is ")][1:]
    if known == "kind and degree":
        usual += [name for name in present if name.startswith("degree ")][1:]
    return ["always", *usual]


def conformal(over: np.ndarray, asked: float) -> float:
    """Return the value that a share of all, the next one included, does not exceed."""
    rank = int(np.ceil(asked * (len(over) + 1)))
    return float(np.sort(over)[min(rank, len(over)) - 1])


def quantile_regression(rows: np.ndarray, y: np.ndarray, weights: np.ndarray) -> np.ndarray:
    """Return β by majorisation (Hunter & Lange 2000), drawn a little towards a constant alone."""
    weights = weights * len(y) / weights.sum()
    drawn = np.diag(RIDGE * rows.var(axis=0) + LEAST_RIDGE)
    found = np.zeros(rows.shape[1])
    found[0] = np.quantile(y, REGRESSED)
    for _ in range(STEPS):
        rest = y - rows @ found
        scaled = weights / (NEAR + np.abs(rest))
        normal = (rows * scaled[:, None]).T @ rows + drawn
        found = np.linalg.solve(normal, rows.T @ (scaled * y + (2.0 * REGRESSED - 1.0) * weights))
    return np.asarray(found)
