"""What was checked beside the convergence of the numbers, passed or not."""

from convergence import numbers
from convergence.report import _words, html
from convergence.report.html import Html, text
from convergence.results import Check, Findings

OUTCOMES = {True: "passed", False: "FAILED", None: "no statement"}


def checks_section(findings: Findings) -> Html:
    """Return the table of checks and, on demand, their numbers on every level."""
    if not findings.checks:
        return html.section("checks", "Checks", html.paragraph("No check was made on this ladder."))
    rows = [
        [
            text(_words.plain(check.name)),
            text(OUTCOMES[check.passed]),
            text(check.finding),
            text(_spoils(check)),
        ]
        for check in findings.checks
    ]
    head = ("check", "outcome", "finding", "what it spoils")
    return html.section(
        "checks",
        "Checks",
        html.table("Checks on this ladder", head, rows, "words"),
        *(_numbers(check) for check in findings.checks if check.values),
    )


def _spoils(check: Check) -> str:
    """Return the quantities concerned, each with its reason unless the finding says so already."""
    parts = []
    for name, reason in check.spoils.items():
        shown = name or "every quantity"
        parts.append(shown if reason in check.finding else f"{shown}: {reason}")
    return "; ".join(parts) or "no quantity"


def _numbers(check: Check) -> Html:
    """Return a check's numbers, one column a level."""
    count = max(len(row) for row in check.values.values())
    rows = [
        [text(name), *(text(numbers.significant(value, 4)) for value in row)]
        + [text("")] * (count - len(row))
        for name, row in check.values.items()
    ]
    head = ("number", *(f"level {n}" for n in range(1, count + 1)))
    title = f"Numbers of the check: {_words.plain(check.name)}"
    return html.details(title, html.table(title, head, rows))
