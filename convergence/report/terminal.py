"""The table of verdicts as plain strings; the command line decides how it looks."""

from convergence.report import _words
from convergence.results import Findings

COLUMNS = ("quantity", "value", "unit", "interval", "verdict", "order / theory", "next step")


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
                _words.interval_text(verdict),
                verdict.word,
                _words.order_text(verdict),
                _words.next_step(verdict),
            )
        )
    return rows
