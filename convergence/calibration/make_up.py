"""What the bank is made of: its families, and what was left out of it."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.left_out import Outcome
from convergence.calibration.mapped_ladders import IRREGULAR, PERTURBED, RATIO_1_5, RATIO_2
from convergence.calibration.sub_ladders import BETTER_KNOWN

PLANS = (RATIO_2, RATIO_1_5, IRREGULAR, PERTURBED)


@dataclass(frozen=True)
class FamilyRow:
    """A family: its parts, counts of ladders and of judged sub-ladders, and what they are."""

    name: str
    parts: tuple[str, ...]
    ladders: int
    finite: int
    singular: int
    sources: tuple[str, ...]
    shapes: tuple[str, ...]
    degrees: tuple[str, ...]
    dimensions: tuple[str, ...]
    kinds: int
    exponents: str


@dataclass(frozen=True)
class LeftOut:
    """Ladders with a limit; those whose finest value is too good to be judged by it; those never judged."""

    with_limit: int
    too_good: int
    never: int


def family_rows(ladders: Sequence[KnownLadder], judged: Sequence[Outcome]) -> list[FamilyRow]:
    """Return a row per family, by name."""
    return [
        _row(name, [one for one in ladders if one.family == name], judged)
        for name in sorted({one.family for one in ladders})
    ]


def part_of(ladder: KnownLadder) -> str:
    """Return the name of the part, without that of the ladder."""
    name = ladder.case
    for plan in PLANS:
        name = name.removesuffix(f", {plan}")
    return name


def left_out(ladders: Sequence[KnownLadder], judged: Sequence[Outcome]) -> LeftOut:
    """Return how many ladders the rules for sub-ladders leave out."""
    finite = [one for one in ladders if not one.singular]
    seen = {_identity(one.sub.of) for one in judged}
    too_good = sum(abs(one.f[-1] - one.limit) < BETTER_KNOWN * one.bound for one in finite)
    return LeftOut(len(finite), too_good, sum(_identity(one) not in seen for one in ladders))


def counted(ladders: Sequence[KnownLadder], attribute: str) -> list[tuple[str, int]]:
    """Return how many ladders there are of every value of an attribute."""
    values, counts = np.unique([str(getattr(one, attribute)) for one in ladders], return_counts=True)
    return list(zip(values.tolist(), counts.tolist(), strict=True))


def _row(name: str, own: Sequence[KnownLadder], judged: Sequence[Outcome]) -> FamilyRow:
    of_family = [one.sub.of.singular for one in judged if one.sub.of.family == name]
    exponents = sorted({one.exponent for one in own if one.exponent is not None})
    ends = [f"{exponent:.2f}" for exponent in (exponents[:1] + exponents[-1:])]
    return FamilyRow(
        name=name.replace("_", " "),
        parts=tuple(dict.fromkeys(part_of(one) for one in own)),
        ladders=len(own),
        finite=of_family.count(False),
        singular=of_family.count(True),
        sources=_values(own, "source"),
        shapes=_values(own, "shape"),
        degrees=_values(own, "degree"),
        dimensions=_values(own, "dimension"),
        kinds=len(_values(own, "kind")),
        exponents=" to ".join(dict.fromkeys(ends)) or "none",
    )


def _values(own: Sequence[KnownLadder], attribute: str) -> tuple[str, ...]:
    return tuple(sorted({str(getattr(one, attribute)) for one in own}))


def _identity(one: KnownLadder) -> tuple[Any, ...]:
    return one.family, one.case, one.label, one.source, one.shape, one.degree, len(one.f), float(one.h[-1])
