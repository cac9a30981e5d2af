"""What is said of an interval: its own half-width, and how often such intervals hold."""

import math
from collections.abc import Mapping

from convergence import numbers
from convergence.coverage import WITH_COMPANION, Companion, Coverage, Knowledge
from convergence.histories.width import MOST_LEVELS
from convergence.results import Findings, Verdict

AIM = 0.95
KNOWN: Mapping[Knowledge | Companion, str] = {
    "nothing": "kind and degree not known",
    "kind": "kind known, degree not",
    "kind and degree": "kind and degree known",
    WITH_COMPANION: "kind and degree known, with a companion ladder",
}


def half_width(verdict: Verdict) -> float:
    """Return the half-width about the best estimate; NaN where there is no interval."""
    return 0.5 * (verdict.high - verdict.low)


def best_text(verdict: Verdict) -> str:
    """Return the best estimate, with its half-width where the interval is centred on it, or "none"."""
    half = half_width(verdict)
    if verdict.word == "singular" or not (math.isfinite(verdict.limit) and math.isfinite(half)):
        return numbers.NONE
    best = numbers.rounded(verdict.limit, half)
    if verdict.value in (verdict.low, verdict.high):  # the limit is on one side of the value by theory
        return best
    return f"{best} ± {numbers.significant(half, 2)}"


def levels_text(coverage: Coverage) -> str:
    """Return "4 levels", or "5 levels or more"."""
    return f"{coverage.levels} levels{' or more' if coverage.levels >= MOST_LEVELS else ''}"


def share_text(coverage: Coverage) -> str:
    """Return the share with its binomial interval, never rounded across 95 %."""
    low, high = numbers.outward(100.0 * coverage.low, 100.0 * coverage.high, 100.0 * coverage.share, 1.0)
    return f"{numbers.percent(coverage.share, AIM)} ({low} to {high} %)"


def measured(coverage: Coverage) -> str:
    """Return the measured coverage in words, to follow "Measured coverage of such intervals: "."""
    return (
        f"{share_text(coverage)} of {numbers.count(coverage.cases)} ladders of {levels_text(coverage)},"
        f" {KNOWN[coverage.knowledge]}, whole families left out"
    )


def coverage_text(verdict: Verdict) -> str:
    """Return the sentence on coverage, "" where there is no interval."""
    if verdict.coverage is None or math.isnan(verdict.low):
        return ""
    return f"Measured coverage of such intervals: {measured(verdict.coverage)}."


def by_coverage(findings: Findings) -> dict[Coverage, list[str]]:
    """Return the names of the quantities that share a measured coverage."""
    found: dict[Coverage, list[str]] = {}
    for quantity in findings.quantities:
        verdict = findings.verdicts[quantity.name]
        if verdict.coverage is not None and math.isfinite(verdict.low):
            found.setdefault(verdict.coverage, []).append(quantity.name)
    return found


def coverage_lines(findings: Findings) -> list[str]:
    """Return a sentence a line on the coverage of all intervals, naming quantities where they differ."""
    found = by_coverage(findings)
    lines = []
    for coverage, names in found.items():
        whose = f" ({', '.join(names)})" if len(found) > 1 else ""
        lines.append(f"Measured coverage of such intervals{whose}: {measured(coverage)}.")
    return lines
