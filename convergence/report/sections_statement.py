"""The first page: what holds, for which quantity, on what conditions, and what is not covered."""

from convergence.report import _words, html
from convergence.report.html import Html, text
from convergence.results import Findings, Quantity

HEAD = ("quantity", "value", "unit", "interval", "half-width", "tolerance", "verdict")


def statement_section(findings: Findings, length: str) -> Html:
    """Return conclusion, table of verdicts, one quotable sentence each, limits of the statement."""
    sentences = [
        html.element("blockquote", {}, html.paragraph(_words.statement(findings, quantity, length)))
        for quantity in findings.quantities
    ]
    rows = [_row(findings, quantity) for quantity in findings.quantities]
    return html.section(
        "statement",
        "Statement",
        html.paragraph(_words.overall(findings), "overall"),
        html.element("h3", {}, text("Not covered")),
        html.bullets(_not_covered(findings)),
        html.element("h3", {}, text("Each quantity")),
        html.table("Values on the finest mesh", HEAD, rows, "statement"),
        *sentences,
    )


def _row(findings: Findings, quantity: Quantity) -> list[Html]:
    verdict = findings.verdicts[quantity.name]
    width, accepted = _words.precision_text(quantity, verdict)
    if verdict.word == "singular":
        width = "none"
    cells = (quantity.name, _words.value_text(verdict), quantity.unit, _words.interval_text(verdict))
    link = html.element("a", {"href": f"#{_words.anchor(findings, quantity)}"}, text(quantity.name))
    return [link, *(text(cell) for cell in cells[1:]), text(width), text(accepted), html.badge(verdict.word)]


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
    if any(verdict.coverage is None for verdict in findings.verdicts.values()):
        items.append("How often such an interval holds the answer: its coverage has not been calibrated.")
    return items
