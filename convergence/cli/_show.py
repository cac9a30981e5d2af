"""Findings on the screen: a table of verdicts within 80 columns, or JSON."""

import json
from collections.abc import Sequence
from typing import TYPE_CHECKING

import click

from convergence.cli._judging import Judged, JudgedCases
from convergence.results import Findings, Verdict

if TYPE_CHECKING:
    from rich.console import Console
    from rich.table import Table

COLOURS = {"sound": "green", "refine": "yellow", "singular": "red", "unproven": "magenta"}
PLAIN_WIDTH = 80


def show_json(judged: Sequence[Judged | JudgedCases]) -> None:
    """Print one object for one ladder or one study with cases, an array for several."""
    from convergence.report.records import cases_object, judge_object

    objects = [
        judge_object(one.findings) if isinstance(one, Judged) else cases_object(one.findings)
        for one in judged
    ]
    show_object(objects[0] if len(objects) == 1 else objects)


def show_object(content: object) -> None:
    """Print anything as JSON."""
    click.echo(json.dumps(content, indent=2, ensure_ascii=False, allow_nan=False))


def show(judged: Judged | JudgedCases, *, methods: bool = False) -> None:
    """Print the verdicts of a ladder, with `methods` what each one says, or of all cases of a study."""
    if isinstance(judged, Judged):
        show_table(judged.findings, methods=methods)
    else:
        show_cases(judged)


def show_cases(judged: JudgedCases) -> None:
    """Print every quantity in every case and the largest value of all; why the worst one is not sound."""
    from rich.text import Text

    from convergence.envelope import worst_case
    from convergence.report._trust import coverage_lines
    from convergence.report._words import next_step, overall_cases
    from convergence.report.terminal import CASE_COLUMNS, case_rows

    screen, cases = terminal(), judged.findings
    table = columns(("quantity", *CASE_COLUMNS))
    quantities = next(iter(cases.values())).quantities
    for quantity in quantities:
        for number, (case, word, value) in enumerate(case_rows(cases, quantity.name)):
            name = "" if number else quantity.name
            table.add_row(Text(name), Text(case), Text(word, COLOURS[word]), Text(value))
    screen.print(Text(judged.title, "bold"))
    screen.print(table)
    for quantity in quantities:
        worst = worst_case(cases, quantity.name)
        verdict = cases[worst].verdicts[quantity.name]
        _show_reasons(screen, f"{quantity.name}, {worst}", verdict, next_step(verdict))
    screen.print(Text(overall_cases(cases)))
    lines = [line for one in cases.values() for line in [*coverage_lines(one), *_remarks(one)]]
    sources = {one.ladder.source for one in cases.values()}
    lines += [f"Ladder: {source}" for source in sources if len(sources) == 1]
    for line in dict.fromkeys(lines):
        screen.print(Text(line))


def _show_reasons(screen: "Console", what: str, verdict: Verdict, step: str) -> None:
    """Print why something is not sound and what to do, nothing where it is."""
    from rich.padding import Padding
    from rich.text import Text

    if verdict.word != "sound":
        screen.print(Text(f"{what}: {verdict.word}; next: {step}"))
        screen.print(Padding(Text("\n".join(verdict.reasons)), (0, 0, 0, 2)))


def _remarks(findings: Findings) -> list[str]:
    """Return the remarks on the ladder, and where a tolerance was not given."""
    return [*(f"Remark: {remark}." for remark in findings.ladder.remarks), *assumptions(findings)]


def terminal() -> "Console":
    """Return the terminal, or a page of fixed width where there is none."""
    from rich.console import Console

    screen = Console(highlight=False)
    return screen if screen.is_terminal else Console(highlight=False, width=PLAIN_WIDTH)


def columns(names: Sequence[str]) -> "Table":
    """Return a table without lines whose cells are folded where they are too long."""
    from rich.table import Table

    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in names:
        table.add_column(name, overflow="fold")
    return table


def show_table(findings: Findings, *, methods: bool = False) -> None:
    """Print the verdicts, and why some are not sound; no colour where this is no terminal.

    `methods` adds what each method says of each quantity.
    """
    from rich.text import Text

    from convergence.report._trust import coverage_lines
    from convergence.report.terminal import COLUMNS, summary_rows

    screen = terminal()
    table = columns(("quantity", "verdict", "value", "best estimate", "order / theory"))
    rows = [dict(zip(COLUMNS, row, strict=True)) for row in summary_rows(findings)]
    for row in rows:
        verdict = Text(row["verdict"], COLOURS.get(row["verdict"], ""))
        value = f"{row['value']} {row['unit']}".strip()
        cells = (value, row["best estimate"], row["order / theory"])
        table.add_row(Text(row["quantity"]), verdict, *(Text(cell) for cell in cells))
    screen.print(Text(findings.title, "bold"))
    screen.print(table)
    for row in rows:
        name = row["quantity"]
        _show_reasons(screen, name, findings.verdicts[name], row["next step"])
    if methods:
        for row in rows:
            _show_methods(screen, findings, row["quantity"])
    for line in [*coverage_lines(findings), *_remarks(findings), f"Ladder: {findings.ladder.source}"]:
        screen.print(Text(line))


def _show_methods(screen: "Console", findings: Findings, name: str) -> None:
    """Print what each method says of a quantity."""
    from rich.text import Text

    from convergence.report.terminal import METHOD_COLUMNS, method_rows

    found = method_rows(findings, name)
    if not found:
        screen.print(Text(f"\n{name}: no method has an answer"))
        return
    what = "published methods for comparison, half-width about the finest value"
    screen.print(Text(f"\n{name}: {what}"))
    table = columns(METHOD_COLUMNS)
    for row in found:
        table.add_row(*(Text(cell) for cell in row))
    screen.print(table)


def assumptions(findings: Findings) -> list[str]:
    """Say where a tolerance or a kind was not given."""
    loose = [quantity.name for quantity in findings.quantities if quantity.assumed_tolerance]
    lengths = [quantity.name for quantity in findings.quantities if quantity.assumed_kind]
    said = [f"Tolerance assumed, 5 % of the value: {', '.join(loose)}."] if loose else []
    return [*said, f"Taken as displacement by its unit: {', '.join(lengths)}."] if lengths else said
