"""Two judged ladders side by side: whether their intervals meet, how far apart, what both say together.

Two ladders of one model go to one limit, so their intervals must meet; where they do, the interval is that of
the first ladder with the second as its companion. Two revisions of a part have limits of their own: their
difference lies between the farthest ends of both intervals, wherever both intervals hold.
"""

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from convergence.coverage import WITH_COMPANION
from convergence.errors import Fault, InputError, listing, nearest
from convergence.judgement import judge
from convergence.results import Companion, Findings, Ladder, Quantity, Verdict

Word = Literal["meet", "part", "cannot be compared"]


@dataclass(frozen=True)
class Compared:
    """One quantity of both ladders; NaN where they cannot be compared.

    `distance` is that of the middles of both intervals over the sum of their half-widths: up to 1 they meet.
    `gap` lies between their near ends, 0 where they meet. `difference` is the second best estimate less the
    first, from `low` to `high`. `joint` is what the first ladder says with the second as its companion, None
    where no coverage was measured for that.
    """

    first: Quantity
    second: Quantity
    word: Word
    verdicts: tuple[Verdict, Verdict]
    distance: float
    gap: float
    difference: float
    low: float
    high: float
    joint: Verdict | None
    reasons: tuple[str, ...]

    @property
    def unit(self) -> str:
        return self.first.unit or self.second.unit


@dataclass(frozen=True)
class Comparison:
    """All quantities of two ladders that have a partner, and the names of those that have none."""

    names: tuple[str, str]
    findings: tuple[Findings, Findings]
    revisions: bool
    compared: tuple[Compared, ...]
    alone: tuple[tuple[str, ...], tuple[str, ...]]

    @property
    def all_meet(self) -> bool:
        return all(one.word == "meet" for one in self.compared)


def compare(
    first: Findings,
    second: Findings,
    *,
    names: tuple[str, str],
    match: Mapping[str, str],
    revisions: bool = False,
) -> Comparison:
    """Compare quantities of one name, or as `match` has them, first to second.

    Raises `InputError` where units differ, a name is not there or nothing can be matched.
    """
    pairs = _pairs(first.quantities, second.quantities, names, match)
    compared = tuple(_compared(first, second, a, b, revisions) for a, b in pairs)
    alone = tuple(
        tuple(q.name for q in findings.quantities if q not in [pair[side] for pair in pairs])
        for side, findings in enumerate((first, second))
    )
    return Comparison(names, (first, second), revisions, compared, (alone[0], alone[1]))


def _pairs(
    first: Sequence[Quantity], second: Sequence[Quantity], names: tuple[str, str], match: Mapping[str, str]
) -> list[tuple[Quantity, Quantity]]:
    ours, theirs = ({quantity.name: quantity for quantity in of} for of in (first, second))
    faults = list(_unknown(match, ours, theirs, names))
    wanted = {name: match.get(name, name) for name in ours if name in match or name not in match.values()}
    pairs = [(ours[a], theirs[b]) for a, b in wanted.items() if b in theirs]
    if not pairs and not faults:
        right = f'match them, e.g. --match "{next(iter(ours))}={next(iter(theirs))}"'
        has = f"{listing(list(ours))} in {names[0]}, {listing(list(theirs))} in {names[1]}"
        faults.append(Fault(names[1], f"no quantity has the name of one in {names[0]} ({has})", right))
    for a, b in pairs:
        if a.unit and b.unit and a.unit != b.unit:
            where = f"{names[1]}: {b.name!r}"
            faults.append(Fault(where, "another unit", f"{a.unit}, as {a.name!r} in {names[0]}", b.unit))
    if faults:
        raise InputError(faults)
    return pairs


def _unknown(
    match: Mapping[str, str],
    ours: Mapping[str, Quantity],
    theirs: Mapping[str, Quantity],
    names: tuple[str, str],
) -> Iterator[Fault]:
    for a, b in match.items():
        for name, known, where in ((a, ours, names[0]), (b, theirs, names[1])):
            if name not in known:
                yield Fault(f"--match {a}={b}", f"{where} has no such quantity", nearest(name, known), name)


def _compared(first: Findings, second: Findings, a: Quantity, b: Quantity, revisions: bool) -> Compared:
    one, two = first.verdicts[a.name], second.verdicts[b.name]
    barrier = _barrier(a, b, one, two)
    nan = math.nan
    if barrier:
        return Compared(a, b, "cannot be compared", (one, two), nan, nan, nan, nan, nan, None, barrier)
    half = 0.5 * (one.high - one.low) + 0.5 * (two.high - two.low)
    middles = 0.5 * (two.low + two.high) - 0.5 * (one.low + one.high)
    gap = max(two.low - one.high, one.low - two.high, 0.0)
    word: Word = "part" if gap > 0.0 else "meet"
    joint = _joint(first, second, a, b) if word == "meet" and not revisions else None
    return Compared(
        first=a,
        second=b,
        word=word,
        verdicts=(one, two),
        distance=abs(middles) / half if half > 0.0 else (math.inf if gap > 0.0 else 0.0),
        gap=gap,
        difference=two.limit - one.limit,
        low=two.low - one.high,
        high=two.high - one.low,
        joint=joint,
        reasons=tuple(_doubts(one, two)),
    )


def _barrier(a: Quantity, b: Quantity, one: Verdict, two: Verdict) -> tuple[str, ...]:
    """Return why two quantities cannot be compared, nothing where they can."""
    reasons = []
    if "unknown" not in (a.kind, b.kind) and a.kind != b.kind:
        reasons.append(f"The first is a {_plain(a.kind)}, the second a {_plain(b.kind)}.")
    for which, verdict in (("first", one), ("second", two)):
        if verdict.word == "singular":
            reasons.append(f"The {which} has no limit (singular).")
        elif not math.isfinite(verdict.high - verdict.low):
            reasons.append(f"The {which} has no interval. {' '.join(verdict.reasons[:1])}".rstrip())
    return tuple(reasons)


def _plain(kind: str) -> str:
    return kind.replace("_", " ")


def _doubts(one: Verdict, two: Verdict) -> Iterator[str]:
    for which, verdict in (("first", one), ("second", two)):
        if verdict.word == "unproven":
            yield f"The {which} is unproven. {' '.join(verdict.reasons[:1])}".rstrip()


def _joint(first: Findings, second: Findings, a: Quantity, b: Quantity) -> Verdict | None:
    """Return the verdict of the first ladder with the second as its companion."""
    if first.companion or second.companion:
        return None
    renamed = Companion(_renamed(second.ladder, b.name, a.name), (replace(b, name=a.name),), "")
    found = judge(first.ladder, (a,), first.facts, first.title, renamed).verdicts[a.name]
    measured = found.coverage is not None and found.coverage.knowledge == WITH_COMPANION
    return found if measured else None


def _renamed(ladder: Ladder, old: str, new: str) -> Ladder:
    levels = tuple(
        replace(level, values={new if name == old else name: v for name, v in level.values.items()})
        for level in ladder.levels
    )
    fine = {new: ladder.resolution[old]} if old in ladder.resolution else {}
    return replace(ladder, levels=levels, resolution={**ladder.resolution, **fine})
