"""Why a verdict is what it is: one step after the other, each with its numbers."""

import math
from collections.abc import Iterator

import numpy as np

from convergence import numbers
from convergence.report import _trust, _words
from convergence.report._level_words import level_values
from convergence.results import Findings, Quantity, Verdict


def explanation(findings: Findings, name: str) -> list[str]:
    """Return the steps that lead to the verdict on a quantity, in sentences."""
    quantity = next(each for each in findings.quantities if each.name == name)
    verdict = findings.verdicts[name]
    return [
        *_values(findings, quantity),
        *_laws(verdict),
        *_interval(quantity, verdict),
        *_places(findings, name),
        *_checks(findings, name),
        *map(_words.sentence, verdict.reasons),
        *_compared(quantity, verdict),
        f"Verdict: {verdict.word}; next: {_words.next_step(verdict, findings.ladder.h_unit)}.",
    ]


def _values(findings: Findings, quantity: Quantity) -> Iterator[str]:
    ladder = findings.ladder
    values = ladder.column(quantity.name)
    sizes = ", ".join(numbers.compact(float(h), 4) for h in ladder.h)
    shown = ", ".join(level_values(ladder, quantity, findings.verdicts[quantity.name].uncertainty))
    yield f"{numbers.several(len(values), 'level')}, h = {_words.with_unit(sizes, ladder.h_unit)}."
    yield f"Values: {_words.with_unit(shown, quantity.unit)}."
    if len(values) > 1:
        changes = ", ".join(numbers.significant(float(change), 3) for change in np.diff(values))
        yield f"Changes from level to level: {changes}."


def _laws(verdict: Verdict) -> Iterator[str]:
    if math.isfinite(verdict.order_low) and math.isfinite(verdict.order_high):
        low, high = numbers.order(verdict.order_low), numbers.order(verdict.order_high)
        yield f"Error laws that fit all levels have orders from {low} to {high} (95 % of the belief)."


def _interval(quantity: Quantity, verdict: Verdict) -> Iterator[str]:
    reach = _words.interval_text(verdict)
    if reach == numbers.NONE:
        yield "There is no interval."
        return
    known = f"kind {_words.plain(quantity.kind)}" if quantity.kind != "unknown" else "kind not known"
    known += " by its unit" if quantity.assumed_kind else ""
    known += f", degree {quantity.degree}" if quantity.degree else ", degree not known"
    best = _words.with_unit(_trust.best_text(verdict), quantity.unit)
    yield f"Interval ({known}): {_words.with_unit(reach, quantity.unit)}, best estimate {best}."
    if verdict.coverage:
        yield _trust.coverage_text(verdict)


def _compared(quantity: Quantity, verdict: Verdict) -> Iterator[str]:
    """Yield how far the interval reaches from the finest value, beside what is accepted."""
    if not (math.isfinite(verdict.uncertainty) and math.isfinite(verdict.tolerance)):
        return
    shown, accepted = numbers.both_sides(verdict.uncertainty, verdict.tolerance)
    finest, width, limit = (
        _words.with_unit(number, quantity.unit) for number in (_words.finest_text(verdict), shown, accepted)
    )
    side = "within" if verdict.uncertainty <= verdict.tolerance else "more than"
    reach = f"From {finest} on the finest mesh to the far end of the interval: {width}"
    yield f"{reach}, {side} the accepted {limit}."


def _places(findings: Findings, name: str) -> Iterator[str]:
    corners = findings.facts.corners
    if corners is None:
        yield "Corners of the model are not known: the levels alone tell whether there is a limit."
        return
    for corner in findings.facts.covered.get(name, ()):
        exponent = numbers.significant(corner.exponent, 4)
        yield f"Within its reach: the singular place {corner.name} {corner.where}, exponent λ = {exponent}."
    if not findings.facts.covered.get(name):
        yield "No singular place of the model is within its reach."


def _checks(findings: Findings, name: str) -> Iterator[str]:
    """Yield the checks that passed, and those that failed without concern to the quantity."""
    passed = [_words.plain(check.name) for check in findings.checks if check.passed]
    if passed:
        yield f"Checks passed: {', '.join(passed)}."
    for check in findings.checks:
        if check.passed is False and not {name, ""} & set(check.spoils):
            yield f"Check failed, but does not concern this quantity: {_words.plain(check.name)}."
