"""Groups that are covered below 95 % or wider than aimed, each with what the numbers say of the reason."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence import numbers
from convergence.calibration.groups import AIM, AIMED, WIDTHS, Group
from convergence.calibration.tally import OURS, Judged, Tally, tally

COVERED = (
    "group",
    "known",
    "cases",
    "covers",
    "95 % is",
    "most misses",
    "without them",
    "a miss, half-widths",
)
FEW = 5  # below, no family is called the widest
DRAWS = 500  # of families
WIDE = (
    *("group", "known", "U/e best", "of other families", "U/e finest", "aim", "covers"),
    *("error best / finest", "widest", "U/e there"),
)


@dataclass(frozen=True, eq=False)
class Shortfall:
    """One state of knowledge in a group that falls short; `row` stands in a table under COVERED or WIDE."""

    group: Group
    method: str
    row: Sequence[str]

    @property
    def is_of_the_aim(self) -> bool:
        """Return whether the aim was set for this group: by source and levels, kind and dimension."""
        return self.group.table in AIMED and "(" not in self.group.name


def covered_less(of: Sequence[Group]) -> list[Shortfall]:
    """Return what is covered below 95 %."""
    found = []
    for group, method, count in _counts(of):
        if count.share < AIM:
            low, high = (numbers.percent(bound, AIM) for bound in count.bounds)
            chance = "within chance" if count.bounds[1] >= AIM else "beyond chance"
            share = f"{numbers.percent(count.share, AIM)} ({low} to {high})"
            row = [_name(group), method, f"{count.cases:,}", share, chance, *_misses(group, method)]
            found.append(Shortfall(group, method, row))
    return found


def wider(of: Sequence[Group]) -> list[Shortfall]:
    """Return what is wider than aimed, about the best estimate or the finest value, from three levels."""
    found = []
    for group, method, count in _counts(of):
        aim = WIDTHS[method]
        if not group.is_of_two_levels and max(count.own, count.finest) > aim:
            widths = [numbers.beside_limit(width, aim, 2) for width in (count.own, count.finest)]
            share = numbers.percent(count.share, AIM)
            row = [_name(group), method, widths[0], _drawn(group, method), widths[1], str(aim), share]
            row += _widest(group, method)
            found.append(Shortfall(group, method, row))
    return found


def summary(short: Sequence[Shortfall], of: Sequence[Group], what: str) -> str:
    """Return how many of the groups that the aim was set for fall short, by state of knowledge."""
    aimed = [group for group in of if group.table in AIMED and "(" not in group.name]
    counts = Counter(one.method for one in short if one.is_of_the_aim)
    said = ", ".join(f"{counts[method]} with {known}" for known, method in OURS.items())
    return f"Of the {len(aimed)} groups by source and levels, kind and dimension {what}: {said} known."


def _counts(of: Sequence[Group]) -> list[tuple[Group, str, Tally]]:
    return [(group, method, tally(group.members, method)) for group in of for method in OURS.values()]


def _name(group: Group) -> str:
    return group.name if "," in group.name else f"{group.table.lower()} {group.name}"


def _misses(group: Group, method: str) -> list[str]:
    """Return who has most misses, coverage without them, and the median distance of a miss."""
    missed = [one for one in group.members if not one.answers[method].covers]
    (worst, number), *_ = Counter(_part(group, one) for one in missed).most_common(1)
    rest = tally([one for one in group.members if _part(group, one) != worst], method)
    without = numbers.percent(rest.share, AIM) if rest.cases else "none"
    off = np.median([abs(one.answers[method].share) for one in missed])
    return [f"{worst}, {number} of {len(missed)}", without, f"{off:.1f}"]


def _drawn(group: Group, method: str) -> str:
    """Return the central 95 % of the median U/e where as many families are drawn with replacement."""
    ratios = dict[str, list[float]]()
    for one in group.members:
        ratios.setdefault(one.sub.of.family, []).append(one.answers[method].own)
    if len(ratios) < FEW:
        return "too few"
    families, random = [np.array(own) for own in ratios.values()], np.random.default_rng(len(ratios))
    draws = random.integers(len(families), size=(DRAWS, len(families)))
    medians = [np.median(np.concatenate([families[of] for of in draw])) for draw in draws]
    low, high = np.quantile(medians, (0.025, 0.975))
    return f"{low:.1f} to {high:.1f}"


def _widest(group: Group, method: str) -> list[str]:
    """Return the error of the best estimate over that of the finest value, and who is widest."""
    errors, ratios = [], dict[str, list[float]]()
    for one in group.members:
        answer = one.answers[method]
        errors.append(abs(answer.share) * answer.own)
        ratios.setdefault(_part(group, one), []).append(answer.own)
    several = {name: widths for name, widths in ratios.items() if len(widths) >= FEW} or ratios
    worst = max(several, key=lambda name: float(np.median(several[name])))
    return [f"{np.median(errors):.2f}", worst, f"{np.median(ratios[worst]):.1f}"]


def _part(group: Group, one: Judged) -> str:
    """Return the family of a member, in a group that is a family its kind."""
    of = one.sub.of
    return (of.kind if group.table == "Family" else of.family).replace("_", " ")
