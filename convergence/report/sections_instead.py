"""What to report instead of a singular stress: a table with intervals, and what the model does not allow."""

import math
from typing import Any

from convergence import numbers
from convergence.checks._instead import Instead, instead, missing
from convergence.report.content import Block, Cell, Paragraph, Table, mark
from convergence.results import Findings, Quantity

TOLERANCE = 0.05  # where the quantity has none relative to its value
HEAD = ("instead", "finest mesh", "best estimate", "interval", "verdict")


def instead_part(findings: Findings, quantity: Quantity) -> list[Block]:
    """Return the table of a quantity that stands on a singular corner, nothing for others."""
    found = instead(findings.ladder, findings.facts, quantity.name)
    absent = missing(findings.ladder, findings.facts, quantity.name)
    accepted = tolerance(quantity)
    caption = f"What to report instead (verdict at a tolerance of {numbers.plain_percent(accepted)})"
    rows = [_row(one, accepted) for one in found]
    table: list[Block] = [Table(caption, HEAD, rows)] if rows else []
    return [*table, *(Paragraph(sentence, "tiny") for sentence in absent)]


def tolerance(quantity: Quantity) -> float:
    """Return the share of a value that is accepted of what is reported instead of a quantity."""
    return TOLERANCE if quantity.relative is None else quantity.relative


def instead_objects(findings: Findings, quantity: Quantity) -> list[dict[str, Any]]:
    """Return the rows of the table for JSON; numbers that are not known as NaN."""
    return [
        {
            "what": one.label,
            "unit": one.unit,
            "value": one.value,
            "limit": one.limit,
            "low": one.low,
            "high": one.high,
            "verdict": one.word(tolerance(quantity)),
        }
        for one in instead(findings.ladder, findings.facts, quantity.name)
    ]


def _row(one: Instead, accepted: float) -> list[Cell]:
    finest, best = (
        numbers.NONE
        if math.isnan(number)
        else f"{numbers.rounded(number, one.half_width)} {one.unit}".strip()
        for number in (one.value, one.limit)
    )
    low, high = numbers.outward(one.low, one.high, one.limit, one.half_width)
    reach = numbers.NONE if low == numbers.NONE else f"{low} to {high}"
    return [one.label, finest, best, reach, mark(one.word(accepted))]
