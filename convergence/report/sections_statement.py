"""The first page: what holds, for which quantity, on what conditions, and what is not covered."""

import math

from convergence.report import _trust, _words
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Heading,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.results import Findings, Quantity

HEAD = ("quantity", "value", "interval, best estimate", "unit", "uncertainty", "tolerance", "verdict")
HALVES = (
    "± beside a value: its uncertainty, the distance from the finest value to the far end of the interval,"
    " which is compared with the tolerance. ± beside a best estimate: half the interval."
)


def statement_section(findings: Findings, length: str) -> Section:
    """Return conclusion, table of verdicts, one quotable sentence each, limits of the statement."""
    quantities = findings.quantities
    sentences = [
        Paragraph(_words.statement(findings, one, length), "quote", findings.verdicts[one.name].word)
        for one in quantities
    ]
    rows = [_row(findings, quantity) for quantity in findings.quantities]
    blocks: list[Block] = [
        Paragraph(_words.overall(findings), "overall"),
        Heading("Not covered"),
        Bullets(_not_covered(findings)),
        Heading("Each quantity"),
        Table("Values on the finest mesh and best estimates of their limits", HEAD, rows, "statement"),
        Paragraph(HALVES, "tiny"),
        *sentences,
    ]
    return Section("statement", "Statement", "Statement", blocks)


def _row(findings: Findings, quantity: Quantity) -> list[Cell]:
    verdict = findings.verdicts[quantity.name]
    width, accepted = _words.precision_text(quantity, verdict)
    if verdict.word == "singular":
        width = "none"
    name = Words(quantity.name, to=f"#{_words.anchor(findings, quantity)}")
    both = (_words.interval_text(verdict), _trust.best_text(verdict))
    reach = tuple(dict.fromkeys(both))
    return [name, _words.value_text(verdict), reach, quantity.unit, width, accepted, mark(verdict.word)]


def _not_covered(findings: Findings) -> list[str]:
    """Return what a reader might take for granted and must not."""
    failed = [check for check in findings.checks if check.passed is False]
    items = [
        f"Failed check, {_words.plain(check.name)}: {_words.sentence(check.finding)}" for check in failed
    ]
    idle = [_words.plain(check.name) for check in findings.checks if check.passed is None]
    if idle:
        items.append(f"Checks that can make no statement here: {', '.join(idle)}.")
    remarks = [_words.sentence(remark) for remark in findings.ladder.remarks]
    return [*never_covered(findings), *items, *remarks]


def never_covered(findings: Findings) -> list[str]:
    """Return what is not covered whatever the numbers are."""
    items = [
        "Everything but the discretization error: the idealisation, loads, supports, material data and"
        " code checks are the analyst's."
    ]
    assumed = [quantity.name for quantity in findings.quantities if quantity.assumed_tolerance]
    if assumed:
        items.append(f"No tolerance was given for {', '.join(assumed)}: a common one was assumed.")
    lengths = [quantity.name for quantity in findings.quantities if quantity.assumed_kind]
    if lengths:
        items.append(f"No kind was given for {', '.join(lengths)}: by the unit it is taken as displacement.")
    bare = [
        name
        for name, verdict in findings.verdicts.items()
        if verdict.coverage is None and math.isfinite(verdict.low)
    ]
    if bare:
        items.append(f"No coverage was measured for intervals such as that of {', '.join(bare)}.")
    return items
