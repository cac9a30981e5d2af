"""The evidence for each quantity: figures, reasons, levels, and what every method says."""

import math
from collections.abc import Mapping

import numpy as np

from convergence import numbers
from convergence.report import _trust, _words
from convergence.report._level_words import level_values
from convergence.report._picture import Picture
from convergence.report.content import (
    Block,
    Bullets,
    Figures,
    Heading,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.report.sections_instead import instead_part
from convergence.results import Estimate, Findings, Ladder, Quantity, Verdict


def quantities_section(findings: Findings, pictures: Mapping[str, list[Picture]], length: str) -> Section:
    """Return one part a quantity; `pictures` by its name."""
    parts = [_part(findings, quantity, pictures[quantity.name], length) for quantity in findings.quantities]
    return Section("quantities", "Quantities", "Quantities", [block for part in parts for block in part])


def _part(findings: Findings, quantity: Quantity, pictures: list[Picture], length: str) -> list[Block]:
    verdict = findings.verdicts[quantity.name]
    nothing = Paragraph("No level has a value: there is nothing to draw.")
    return [
        Heading(quantity.name, _words.anchor(findings, quantity), mark(verdict.word)),
        *([Paragraph(quantity.description, "tiny")] if quantity.description else []),
        *_interval(verdict, quantity),
        Bullets([_words.sentence(reason) for reason in verdict.reasons]),
        *instead_part(findings, quantity),
        Figures(pictures) if pictures else nothing,
        _levels(findings.ladder, quantity, verdict, length),
        *_estimates(findings.estimates.get(quantity.name, {}), quantity),
    ]


def _interval(verdict: Verdict, quantity: Quantity) -> list[Block]:
    """Return value, interval, best estimate, order and coverage in words, nothing without an interval."""
    reach = _words.interval_text(verdict)
    if reach == numbers.NONE:
        return []
    value, best, low_high = (
        _words.with_unit(number, quantity.unit)
        for number in (_words.value_text(verdict), _trust.best_text(verdict), reach)
    )
    said = f"{value} on the finest mesh; interval {low_high}, best estimate {best}."
    if math.isfinite(verdict.order_low) and math.isfinite(verdict.order_high):
        low, high = numbers.order(verdict.order_low), numbers.order(verdict.order_high)
        below = "; below zero it would grow without limit" if verdict.order_low < 0 else ""
        said += f" The error falls with an order between {low} and {high} (95 % of the belief{below})."
    return [Paragraph(f"{said} {_trust.coverage_text(verdict)}".rstrip())]


def _levels(ladder: Ladder, quantity: Quantity, verdict: Verdict, length: str) -> Table:
    """Return the table of levels; cells and unknowns only where they are known."""
    values = ladder.column(quantity.name)
    changes = np.diff(values, prepend=np.nan)
    unit = f" [{quantity.unit}]" if quantity.unit else ""
    columns = {
        "level": [str(number) for number in range(1, len(values) + 1)],
        f"h [{length}]" if length else "h": [numbers.significant(level.h, 4) for level in ladder.levels],
        "cells": [numbers.count(level.cells) if level.cells > 0 else "" for level in ladder.levels],
        "unknowns": [numbers.count(level.dofs) if level.dofs > 0 else "" for level in ladder.levels],
        f"value{unit}": level_values(ladder, quantity, verdict.uncertainty),
        f"change{unit}": [numbers.significant(change, 3) for change in changes],
        "relative change": [
            numbers.percent(abs(change / value) if value else math.nan)
            for change, value in zip(changes, values, strict=True)
        ],
    }
    known = {name: cells for name, cells in columns.items() if any(cells)}
    rows = list(zip(*known.values(), strict=True))
    return Table("Levels from coarse to fine", list(known), rows)


def _estimates(estimates: Mapping[str, Estimate], quantity: Quantity) -> list[Block]:
    """Return what each method says; its name leads to its source."""
    if not estimates:
        return []
    unit = f" [{quantity.unit}]" if quantity.unit else ""
    rows = [
        (
            Words(_words.plain(name), to=f"#method-{name}"),
            numbers.rounded(estimate.limit, estimate.uncertainty),
            numbers.significant(estimate.uncertainty, 3),
            numbers.order(estimate.order),
            estimate.remark or "its conditions hold",
        )
        for name, estimate in estimates.items()
    ]
    head = ("method", f"limit{unit}", f"uncertainty{unit}", "order", "remark")
    caption = (
        "Published methods, for comparison: the interval is not made from them"
        " (uncertainty: half-width about the finest value)"
    )
    return [Table(caption, head, rows, "methods")]
