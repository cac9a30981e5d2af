"""Findings on the screen: a table of verdicts within 80 columns, or JSON."""

import json
from collections.abc import Sequence
from typing import TYPE_CHECKING

import click

from convergence.cli._judging import Judged, JudgedCases
from convergence.results import Findings

if TYPE_CHECKING:
    from rich.console import Console

COLOURS = {"sound": "green", "refine": "yellow", "singular": "red", "unproven": "magenta"}
PLAIN_WIDTH = 80


def show_json(judged: Sequence[Judged | JudgedCases]) -> None:
    """Print one object for one ladder or one study with cases, an array for several."""
    from convergence.report.records import cases_object, judge_object

    objects = [
        judge_object(one.findings) if isinstance(one, Judged) else cases_object(one.findings)
        for one in judged
    ]
    content = objects[0] if len(objects) == 1 else objects
    click.echo(json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False))


def show(judged: Judged | JudgedCases, *, methods: bool = False) -> None:
    """Print the verdicts of a ladder, with `methods` what each one says, or of all cases of a study."""
    if isinstance(judged, Judged):
        show_table(judged.findings, methods=methods)
    else:
        show_cases(judged)


def show_cases(judged: JudgedCases) -> None:
    """Print every quantity in every case and the largest value of all; each step that is left to do."""
    from rich.table import Table
    from rich.text import Text

    from convergence.report._words import overall_cases
    from convergence.report.terminal import CASE_COLUMNS, case_rows

    screen = _screen()
    table = Table(box=None, pad_edge=False, header_style="bold")
    for column in CASE_COLUMNS:
        table.add_column(column, overflow="fold")
    for quantity, case, word, value, step in case_rows(judged.findings):
        table.add_row(Text(quantity), Text(case), Text(word, COLOURS[word]), Text(value), Text(step))
    screen.print(Text(judged.title, "bold"))
    screen.print(table)
    screen.print(Text(overall_cases(judged.findings)))
    remarks = dict.fromkeys(
        line
        for findings in judged.findings.values()
        for line in (*(f"Remark: {remark}." for remark in findings.ladder.remarks), *assumptions(findings))
    )
    for line in remarks:
        screen.print(Text(line))


def _screen() -> "Console":
    """Return the terminal, or a page of fixed width where there is none."""
    from rich.console import Console

    screen = Console(highlight=False)
    return screen if screen.is_terminal else Console(highlight=False, width=PLAIN_WIDTH)


def show_table(findings: Findings, *, methods: bool = False) -> None:
    """Print the verdicts, and why some are not sound; no colour where this is no terminal.

    `methods` adds what each method says of each quantity.
    """
    from rich.padding import Padding
    from rich.table import Table
    from rich.text import Text

    from convergence.report.terminal import COLUMNS, summary_rows

    screen = _screen()
    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in ("quantity", "verdict", "value", "order / theory"):
        table.add_column(name, overflow="fold")
    rows = [dict(zip(COLUMNS, row, strict=True)) for row in summary_rows(findings)]
    for row in rows:
        verdict = Text(row["verdict"], COLOURS.get(row["verdict"], ""))
        value = f"{row['value']} {row['unit']}".strip()
        table.add_row(Text(row["quantity"]), verdict, Text(value), Text(row["order / theory"]))
    screen.print(Text(findings.title, "bold"))
    screen.print(table)
    for row in rows:
        verdict_of = findings.verdicts[row["quantity"]]
        if verdict_of.word != "sound":
            screen.print(Text(f"{row['quantity']}: {row['verdict']}; next: {row['next step']}"))
            screen.print(Padding(Text("\n".join(verdict_of.reasons)), (0, 0, 0, 2)))
    if methods:
        for row in rows:
            _show_methods(screen, findings, row["quantity"])
    for line in (*(f"Remark: {remark}." for remark in findings.ladder.remarks), *assumptions(findings)):
        screen.print(Text(line))


def _show_methods(screen: "Console", findings: Findings, name: str) -> None:
    """Print what each method says of a quantity."""
    from rich.table import Table
    from rich.text import Text

    from convergence.report.terminal import METHOD_COLUMNS, method_rows

    found = method_rows(findings, name)
    if not found:
        screen.print(Text(f"\n{name}: no method has an answer"))
        return
    screen.print(Text(f"\n{name}: each method, half-width about the finest value"))
    table = Table(box=None, pad_edge=False)
    for column in METHOD_COLUMNS:
        table.add_column(column, overflow="fold")
    for row in found:
        table.add_row(*(Text(cell) for cell in row))
    screen.print(table)


def assumptions(findings: Findings) -> list[str]:
    """Say where a tolerance was not given."""
    names = [quantity.name for quantity in findings.quantities if quantity.assumed_tolerance]
    return [f"Tolerance assumed, 5 % of the value: {', '.join(names)}."] if names else []
