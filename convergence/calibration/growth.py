"""How often growth without limit is told from convergence, on the bank's sub-ladders of stresses and others.

As verdicts have it for a bare table, where no model says what the corners are: growth that is shown makes a
value singular; growth that is possible makes a stress unproven, unless its interval is narrow.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from convergence.calibration.left_out import Outcome, finite
from convergence.checks._corner import STRESS_KINDS
from convergence.coverage import Knowledge
from convergence.histories.calibrated import FINEST_LEVELS, LEAST_TO_SHOW
from convergence.verdicts import SETTLED

SIZES = {"3 levels": (3, 3), f"{LEAST_TO_SHOW} levels and more": (LEAST_TO_SHOW, FINEST_LEVELS)}


@dataclass(frozen=True)
class Called:
    """Counts over some sub-ladders: called singular, called unproven, neither."""

    cases: int
    singular: int
    unproven: int

    @property
    def neither(self) -> int:
        return self.cases - self.singular - self.unproven


def called(
    known: Knowledge, judged: Sequence[Outcome], above: Mapping[str, float]
) -> dict[tuple[str, str], Called]:
    """Return the counts by what the ladders are and by number of levels.

    Quantities that are known to be no stresses are never called so.
    """
    sorts = {
        "singular stresses": [one for one in judged if one.sub.of.singular],
        "stresses with a limit": [one for one in finite(judged) if one.sub.of.kind in STRESS_KINDS],
    }
    if known == "nothing":
        sorts["all quantities with a limit"] = finite(judged)
    return {
        (sort, levels): _count([one for one in members if low <= one.sub.levels <= high], above)
        for sort, members in sorts.items()
        for levels, (low, high) in SIZES.items()
    }


def _count(members: Sequence[Outcome], above: Mapping[str, float]) -> Called:
    shown = [one.sub.levels >= LEAST_TO_SHOW and one.growth >= above["shown"] for one in members]
    open_ones = [one for one, is_shown in zip(members, shown, strict=True) if not is_shown]
    unproven = [one for one in open_ones if one.growth >= above["possible"] and not is_settled(one)]
    return Called(len(members), sum(shown), len(unproven))


def is_settled(one: Outcome) -> bool:
    """Return whether an interval is so narrow that growth which is possible does not count."""
    return one.about_finest <= SETTLED * abs(float(one.sub.f[-1]))
