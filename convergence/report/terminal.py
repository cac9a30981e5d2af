"""The tables of verdicts and of methods as plain strings; the command line decides how they look."""

import math
from collections.abc import Mapping

from convergence.envelope import envelope, worst_first
from convergence.numbers import order, percent, significant
from convergence.report import _trust, _words
from convergence.results import Findings

CASE_COLUMNS = ("case", "verdict", "value")
METHOD_COLUMNS = ("method", "order", "limit", "half-width", "of the value")
COLUMNS = ("quantity", "value", "unit", "best estimate", "interval", "verdict", "order / theory", "next step")


def summary_rows(findings: Findings) -> list[tuple[str, ...]]:
    """Return one row a quantity, in the order of `COLUMNS`."""
    rows: list[tuple[str, ...]] = []
    for quantity in findings.quantities:
        verdict = findings.verdicts[quantity.name]
        rows.append(
            (
                quantity.name,
                _words.value_text(verdict),
                quantity.unit,
                _trust.best_text(verdict),
                _words.interval_text(verdict),
                verdict.word,
                _words.order_text(verdict),
                _words.next_step(verdict),
            )
        )
    return rows


def case_rows(cases: Mapping[str, Findings], name: str) -> list[tuple[str, ...]]:
    """Return one row a case, the worst first, then one of the largest absolute value, as `CASE_COLUMNS`."""
    (unit,) = {quantity.unit for quantity in next(iter(cases.values())).quantities if quantity.name == name}
    rows: list[tuple[str, ...]] = []
    for case in worst_first(cases):
        verdict = cases[case].verdicts[name]
        rows.append((case, verdict.word, _words.with_unit(_words.value_text(verdict), unit)))
    found = envelope(cases, name)
    span = _words.with_unit(_words.span_text(found), unit)
    return [*rows, (f"largest: {found.case}", found.word, span)]


def method_rows(findings: Findings, name: str) -> list[tuple[str, ...]]:
    """Return one row a method that has an answer for a quantity, in the order of `METHOD_COLUMNS`."""
    value = findings.verdicts[name].value
    rows: list[tuple[str, ...]] = []
    for method, estimate in findings.estimates[name].items():
        if not math.isfinite(estimate.uncertainty):
            continue
        share = percent(estimate.uncertainty / abs(value)) if value else "none"
        rows.append(
            (
                _words.plain(method),
                order(estimate.order),
                significant(estimate.limit, 6),
                significant(estimate.uncertainty),
                share,
            )
        )
    return rows
