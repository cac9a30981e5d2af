"""The page of a study with load cases: one matrix of all verdicts, the largest values, the cases' reports."""

from collections.abc import Mapping, Sequence
from pathlib import Path
from urllib.parse import quote

from convergence.case_folders import case_folders
from convergence.envelope import Envelope, envelope, worst_first
from convergence.record import NOTHING, Record
from convergence.report import _words, records
from convergence.report._decimal_comma import given_names
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
from convergence.report.forms import HTML, Forms, write_document
from convergence.report.sections_closing import caution_section, digests, trace_section
from convergence.report.sections_record import record_section
from convergence.report.sections_statement import never_covered
from convergence.results import Findings, Quantity

ENVELOPE = ("quantity", "largest", "unit", "in case", "interval of the absolute value", "verdict")
NOTE = (
    "Worst case first: value on the finest mesh and half-width. Each case was judged by itself; a value leads"
    " to its evidence."
)
LARGEST = (
    "The largest absolute value of all cases, with its sign. The interval holds it whichever case it belongs"
    " to; there is none as long as one case has none that is proven."
)


def write_cases(
    cases: Mapping[str, Findings],
    folder: Path,
    *,
    title: str,
    loads: Mapping[str, str],
    study_text: str,
    study_name: str,
    command: str,
    date: str,
    record: Record = NOTHING,
    inputs: Sequence[Path] = (),
    forms: Forms = HTML,
) -> list[Path]:
    """Write the forms and findings.json of all cases; return the paths of the forms.

    The report of a case stands in its folder (`case_folders`) beside them; `loads` says what they differ in.
    `record` is what the analyst states, `inputs` are the files that were read.
    """
    quantities = next(iter(cases.values())).quantities
    largest = {quantity.name: envelope(cases, quantity.name) for quantity in quantities}
    facts = {"study": study_name, "command": command, "date": date}
    sources = {findings.ladder.source for findings in cases.values()}
    if len(sources) == 1:
        facts["ladder"] = sources.pop()
    facts |= digests(study_text, inputs)
    sections = [
        _statement(cases, quantities),
        _largest(cases, quantities, largest),
        _cases(cases, loads),
        caution_section(),
        trace_section(facts, study_text),
    ]
    sections.insert(
        1, record_section(record, sections, Words("The reports of the cases", to="#cases", paged=True))
    )
    content = {"title": title, **records.cases_object(cases), "versions": records.versions()}
    document = Document(title, f"Discretization error of {study_name}. {date}", sections)
    names = given_names(cases.values(), study_text, [title, study_name, *cases])
    return write_document(document, folder, ("findings.json", content), date, forms, names)


def _statement(cases: Mapping[str, Findings], quantities: tuple[Quantity, ...]) -> Section:
    order, places = worst_first(cases), case_folders(cases)
    rows = [[q.name, q.unit, *(_cell(places[case], cases[case], q) for case in order)] for q in quantities]
    blocks: list[Block] = [
        Paragraph(_words.overall_cases(cases), "overall"),
        Table("Every quantity in every case", ("quantity", "unit", *order), rows, "matrix"),
        Paragraph(NOTE, "tiny"),
        Heading("Not covered"),
        Bullets(_not_covered({case: cases[case] for case in order})),
    ]
    return Section("statement", "Statement", "Statement", blocks)


def _not_covered(cases: Mapping[str, Findings]) -> list[str]:
    """Return what no case covers, the checks that failed in some and the remarks on the ladders."""
    items = dict.fromkeys(item for findings in cases.values() for item in never_covered(findings))
    failed: dict[str, list[str]] = {}
    for case, findings in cases.items():
        for check in findings.checks:
            if check.passed is False:
                failed.setdefault(_words.plain(check.name), []).append(case)
    checks = [f"Failed check, {name}: see {', '.join(where)}." for name, where in failed.items()]
    remarks = dict.fromkeys(_words.sentence(r) for one in cases.values() for r in one.ladder.remarks)
    return [*items, *checks, *remarks]


def _cell(place: str, findings: Findings, quantity: Quantity) -> Cell:
    verdict = findings.verdicts[quantity.name]
    address = _page(place, _words.anchor(findings, quantity))
    return (mark(verdict.word), Words(_words.value_text(verdict), to=address))


def _largest(
    cases: Mapping[str, Findings], quantities: tuple[Quantity, ...], largest: Mapping[str, Envelope]
) -> Section:
    rows: list[list[Cell]] = []
    for quantity in quantities:
        found = largest[quantity.name]
        verdict = cases[found.case].verdicts[quantity.name]
        cells = (
            _words.value_text(verdict),
            quantity.unit,
            found.case,
            _words.span_text(found),
        )
        rows.append([quantity.name, *cells, mark(found.word)])
    blocks: list[Block] = [
        Table("Envelope of all cases", ENVELOPE, rows, "statement"),
        Paragraph(LARGEST, "tiny"),
    ]
    return Section("largest", "Largest values", "Largest values", blocks)


def _cases(cases: Mapping[str, Findings], loads: Mapping[str, str]) -> Section:
    rows: list[list[Cell]] = []
    places = case_folders(cases)
    for case in worst_first(cases):
        link = Words(case, to=_page(places[case], "statement"))
        rows.append([link, loads[case], _words.overall(cases[case])])
    table = Table("The reports of the cases", ("case", "loads", "conclusion"), rows, "words")
    return Section("cases", "Cases", "Cases", [table])


def _page(place: str, anchor: str) -> str:
    return f"{quote(place)}/report.html#{anchor}"
