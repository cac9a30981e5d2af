"""What was checked beside the convergence of the numbers, passed or not."""

from convergence import numbers
from convergence.report import _words
from convergence.report.content import Block, Details, Paragraph, Section, Table
from convergence.results import Check, Findings

OUTCOMES = {True: "passed", False: "FAILED", None: "no statement"}


def checks_section(findings: Findings) -> Section:
    """Return the table of checks and, on demand, their numbers on every level."""
    blocks: list[Block] = [Paragraph("No check was made on this ladder.")]
    if findings.checks:
        rows = [
            (_words.plain(check.name), OUTCOMES[check.passed], check.finding, _spoils(check))
            for check in findings.checks
        ]
        head = ("check", "outcome", "finding", "what it spoils")
        blocks = [Table("Checks on this ladder", head, rows, "words")]
        blocks += [_numbers(check) for check in findings.checks if check.values]
    return Section("checks", "Checks", "Checks", blocks)


def _spoils(check: Check) -> str:
    """Return the quantities concerned, each with its reason unless the finding says so already."""
    parts = []
    for name, reason in check.spoils.items():
        shown = name or "every quantity"
        parts.append(shown if reason in check.finding else f"{shown}: {reason}")
    return "; ".join(parts) or "no quantity"


def _numbers(check: Check) -> Details:
    """Return a check's numbers, one column a level."""
    count = max(len(row) for row in check.values.values())
    rows = [
        [name, *(numbers.significant(value, 4) for value in row), *[""] * (count - len(row))]
        for name, row in check.values.items()
    ]
    head = ("number", *(f"level {n}" for n in range(1, count + 1)))
    title = f"Numbers of the check: {_words.plain(check.name)}"
    return Details(title, [Table(title, head, rows)])
