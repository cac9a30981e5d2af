"""What several load cases say together: the worst one, and the largest absolute value of a quantity."""

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from convergence.results import Findings, Verdict, VerdictWord

SEVERITY: tuple[VerdictWord, ...] = ("sound", "refine", "unproven", "singular")


@dataclass(frozen=True)
class Envelope:
    """The case with the largest absolute value on the finest mesh, and that value with its sign.

    `low` and `high` hold the largest absolute value of all cases, NaN where a case has no proven interval.
    `word` is the worst of the cases that may have it.
    """

    case: str
    value: float
    low: float
    high: float
    word: VerdictWord


def envelope(cases: Mapping[str, Findings], name: str) -> Envelope:
    """Return the envelope of a quantity over all cases."""
    verdicts = {case: findings.verdicts[name] for case, findings in cases.items()}
    case = max(verdicts, key=lambda one: _size(verdicts[one].value))
    value = verdicts[case].value
    spans = [_span(verdict) for verdict in verdicts.values()]
    if any(math.isnan(high) for _, high in spans):
        return Envelope(case, value, math.nan, math.nan, _worst(verdicts.values()))
    low, high = max(low for low, _ in spans), max(high for _, high in spans)
    near = [v for v, span in zip(verdicts.values(), spans, strict=True) if span[1] >= low]
    return Envelope(case, value, low, high, _worst(near))


def worst_first(cases: Mapping[str, Findings]) -> list[str]:
    """Return the names of the cases by their worst verdicts; as in the study where these are the same."""

    def badness(case: str) -> list[int]:
        return sorted(-SEVERITY.index(verdict.word) for verdict in cases[case].verdicts.values())

    return sorted(cases, key=badness)


def worst_case(cases: Mapping[str, Findings], name: str) -> str:
    """Return the case with the worst verdict on a quantity, the first in the study of several."""
    return max(cases, key=lambda case: SEVERITY.index(cases[case].verdicts[name].word))


def _size(value: float) -> float:
    return -1.0 if math.isnan(value) else abs(value)


def _span(verdict: Verdict) -> tuple[float, float]:
    """Return the interval of the absolute value, NaN where it is not proven."""
    if verdict.word not in ("sound", "refine") or not math.isfinite(verdict.high - verdict.low):
        return math.nan, math.nan
    ends = sorted((abs(verdict.low), abs(verdict.high)))
    return (0.0 if verdict.low <= 0.0 <= verdict.high else ends[0]), ends[1]


def _worst(verdicts: Iterable[Verdict]) -> VerdictWord:
    return max((verdict.word for verdict in verdicts), key=SEVERITY.index)
