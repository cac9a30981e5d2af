"""The page of a comparison: which quantities of two ladders meet, and where they part."""

from collections.abc import Mapping, Sequence
from itertools import count
from pathlib import Path
from typing import Any

from convergence import numbers
from convergence.comparison import Compared, Comparison
from convergence.report import _trust, _words, records
from convergence.report._compared import LOOKS, apart_text, comparison_object, overall, remarks, sentence
from convergence.report._decimal_comma import DecimalComma, given_names
from convergence.report._picture import Picture
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Document,
    Figures,
    Heading,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.report.figures_comparison import comparison_figure
from convergence.report.forms import HTML, Forms, write_document
from convergence.report.pictures import stems
from convergence.report.sections_closing import caution_section, trace_section

HEAD = ("quantity", "outcome", "first", "second", "unit", "apart")
NOTE = (
    "Best estimates ± half their intervals. Apart: distance of the middles of both intervals over the sum of"
    " their half-widths; up to 1 they meet."
)
SIDES = ("ladder", "finest value", "interval", "best estimate", "levels", "verdict")


def write_comparisons(
    found: Mapping[str, Comparison], folder: Path, *, title: str, command: str, date: str, forms: Forms = HTML
) -> list[Path]:
    """Write the forms, comparison.json and figures/; return the paths of the forms.

    `found` is by load case, "" where there are none.
    """
    both = [findings for one in found.values() for findings in one.findings]
    names = given_names(both, "", [title, *found, *(name for one in found.values() for name in one.names)])
    comma = forms.comma(names)
    anchors = _anchors(found)
    parts = [block for case, one in found.items() for block in _case(case, one, anchors[case], comma)]
    first = next(iter(found.values()))
    facts = {"first": first.names[0], "second": first.names[1], "command": command, "date": date}
    sections = [
        _statement(found, anchors),
        Section("quantities", "Quantities", "Quantities", parts),
        caution_section(),
        trace_section(facts, ""),
    ]
    record = {**comparisons_object(found), "versions": records.versions()}
    document = Document(title, f"{' and '.join(first.names)} side by side. {date}", sections)
    return write_document(document, folder, ("comparison.json", record), date, forms, names)


def comparisons_object(found: Mapping[str, Comparison]) -> dict[str, Any]:
    """Return the comparison for JSON, by load case where there are some."""
    if "" in found:
        return comparison_object(found[""])
    return {
        "all_meet": all(one.all_meet for one in found.values()),
        "cases": {case: comparison_object(one) for case, one in found.items()},
    }


def compared_rows(found: Comparison) -> list[tuple[str, ...]]:
    """Return one row a quantity, as `HEAD`."""
    return [
        (one.first.name, one.word, *map(_trust.best_text, one.verdicts), one.unit, apart_text(one))
        for one in found.compared
    ]


def _anchors(found: Mapping[str, Comparison]) -> dict[str, list[str]]:
    """Return the ids of the parts of the quantities of each case."""
    numbered = count(1)
    return {case: [f"quantity-{next(numbered)}" for _ in one.compared] for case, one in found.items()}


def _statement(found: Mapping[str, Comparison], anchors: Mapping[str, list[str]]) -> Section:
    parts: list[Block] = []
    for case, comparison in found.items():
        rows: list[list[Cell]] = [
            [Words(name, to=f"#{anchor}"), mark(word, LOOKS[word]), *rest]
            for anchor, (name, word, *rest) in zip(anchors[case], compared_rows(comparison), strict=True)
        ]
        first, second = comparison.names
        parts += [
            *([Heading(case)] if case else []),
            Paragraph(overall(comparison), "overall"),
            Table(f"First: {first}; second: {second}", HEAD, rows, "statement"),
            Bullets(remarks(comparison)),
        ]
    return Section("statement", "Statement", "Statement", [*parts, Paragraph(NOTE, "tiny")])


def _case(case: str, found: Comparison, anchors: Sequence[str], comma: DecimalComma | None) -> list[Block]:
    """Return the evidence of one load case."""
    stem = stems([f"{case} {one.first.name}".strip() for one in found.compared])
    drawn = [
        comparison_figure(f"{name}-comparison", found, one, comma)
        for name, one in zip(stem.values(), found.compared, strict=True)
    ]
    blocks: list[Block] = []
    for anchor, one, picture in zip(anchors, found.compared, drawn, strict=True):
        title = f"{case}: {one.first.name}" if case else one.first.name
        blocks += [Heading(title, anchor, mark(one.word, LOOKS[one.word])), *_quantity(found, one, picture)]
    return blocks


def _quantity(found: Comparison, one: Compared, picture: Picture | None) -> list[Block]:
    return [
        Paragraph(sentence(one, found.revisions)),
        *([Figures([picture])] if picture else []),
        Table("What each ladder says", SIDES, _sides(found, one)),
    ]


def _sides(found: Comparison, one: Compared) -> Sequence[Sequence[Cell]]:
    rows: list[list[Cell]] = []
    quantities = (one.first, one.second)
    for name, findings, quantity, verdict in zip(
        found.names, found.findings, quantities, one.verdicts, strict=True
    ):
        levels = numbers.several(len(findings.ladder.levels), "level")
        cells = (
            _words.finest_text(verdict),
            _words.interval_text(verdict),
            _trust.best_text(verdict),
            levels,
        )
        source = name if quantity.name == one.first.name else f"{name}: {quantity.name}"
        rows.append([source, *cells, mark(verdict.word)])
    return rows
