"""The page of a printout: whether loads and reactions balance, case by case."""

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from convergence.report import records
from convergence.report._decimal_comma import given_names
from convergence.report._picture import Picture
from convergence.report._words import sentence
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Document,
    Heading,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.report.figures_balance import balance_figure
from convergence.report.forms import HTML, Forms, write_document
from convergence.report.pictures import stems
from convergence.report.sections_balance import LOOKS, balance_part
from convergence.report.sections_closing import caution_section, trace_section
from convergence.statics import SEVERITY, Balance, finding

CASE = "case-"  # what the id of a case's part begins with


def write_balances(
    found: Mapping[str, Balance], folder: Path, *, name: str, command: str, date: str, forms: Forms = HTML
) -> list[Path]:
    """Write the forms, balance.json and figures/ into the folder; return the paths of the forms."""
    names = _given(found, name)
    stem = stems([f"{case or name} balance" for case in found])
    drawn = {
        case: balance_figure(one, balance, forms.comma(names))
        for one, (case, balance) in zip(stem.values(), found.items(), strict=True)
    }
    order = worst_first(found)
    source = next(iter(found.values())).printout.source
    sections = [
        _statement(found, order),
        Section("cases", "Balance", "Balance", _parts(found, order, drawn)),
        caution_section(),
        trace_section({"table": source, "command": command, "date": date}, ""),
    ]
    title = f"Equilibrium of {name}"
    record = {**balances_object(found), "versions": records.versions()}
    document = Document(title, f"Loads and reactions of {source}. {date}", sections)
    return write_document(document, folder, ("balance.json", record), date, forms, names)


def _given(found: Mapping[str, Balance], name: str) -> frozenset[str]:
    """Return what the table names: itself, load cases, loads and reactions."""
    rows = {row for balance in found.values() for row in balance.actions.names}
    return given_names([], "", [name, next(iter(found.values())).printout.source, *found, *rows])


def balances_object(found: Mapping[str, Balance]) -> dict[str, Any]:
    """Return the balance of every case for JSON."""
    printout = next(iter(found.values())).printout
    return {
        "table": printout.source,
        "all_balanced": all(balance.passed is True for balance in found.values()),
        "cases": {case: records.balance_object(balance) for case, balance in found.items()},
        "remarks": list(printout.remarks),
    }


def worst_first(found: Mapping[str, Balance]) -> list[str]:
    """Return the cases by their worst component; as in the table where these are alike."""
    return sorted(found, key=lambda case: -SEVERITY.index(found[case].worst.word))


def overall(found: Mapping[str, Balance]) -> str:
    """Return the conclusion on all cases together."""
    good = sum(balance.passed is True for balance in found.values())
    if len(found) == 1:
        return finding(next(iter(found.values())))
    if good == len(found):
        return f"Loads and reactions balance in all {good} load cases."
    left = ", ".join(
        f"{case} ({found[case].worst.word})" for case in worst_first(found) if not found[case].passed
    )
    return f"{good} of {len(found)} load cases {'is' if good == 1 else 'are'} balanced. Not settled: {left}."


def _statement(found: Mapping[str, Balance], order: list[str]) -> Section:
    rows: list[list[Cell]] = [
        [_to(case, order), mark(word, LOOKS[word]), finding(found[case])]
        for case, word in ((case, found[case].worst.word) for case in order)
    ]
    remarks = next(iter(found.values())).printout.remarks
    blocks: list[Block] = [
        Paragraph(overall(found), "overall"),
        Table("Balance of every load case", ("case", "outcome", "finding"), rows, "words"),
        Bullets([sentence(remark) for remark in remarks]),
    ]
    return Section("statement", "Statement", "Statement", blocks)


def _parts(
    found: Mapping[str, Balance], order: list[str], drawn: Mapping[str, Picture | None]
) -> list[Block]:
    parts: list[Block] = []
    for number, case in enumerate(order, start=1):
        if case:
            word = found[case].worst.word
            parts.append(Heading(case, f"{CASE}{number}", mark(word, LOOKS[word])))
        parts += balance_part(found[case], drawn[case])
    return parts


def _to(case: str, order: list[str]) -> Cell:
    """Return the name of a case, which leads to its part."""
    return Words(case, to=f"#{CASE}{1 + order.index(case)}") if case else "all rows"
