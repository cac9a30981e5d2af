"""The page of a study with load cases: one matrix of all verdicts, the largest values, the cases' reports."""

import json
from collections.abc import Mapping
from pathlib import Path
from urllib.parse import quote

from convergence.envelope import Envelope, envelope, worst_first
from convergence.report import _words, html, records
from convergence.report.html import Html, text
from convergence.report.sections_closing import caution_section, trace_section
from convergence.report.sections_statement import never_covered
from convergence.results import Findings, Quantity
from convergence.textfile import write_text

ENVELOPE = ("quantity", "largest", "unit", "in case", "interval of the absolute value", "verdict")
NOTE = (
    "Worst case first: value on the finest mesh and half-width. All cases were solved on the same meshes,"
    " each was judged by itself; a value leads to its evidence."
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
) -> Path:
    """Write report.html and findings.json of all cases; return the path of the page.

    The report of a case stands in the folder of its name beside them; `loads` says what they differ in.
    """
    quantities = next(iter(cases.values())).quantities
    largest = {quantity.name: envelope(cases, quantity.name) for quantity in quantities}
    facts = {"study": study_name, "command": command, "date": date}
    sections = [
        ("statement", "Statement", _statement(cases, quantities)),
        ("largest", "Largest values", _largest(cases, quantities, largest)),
        ("cases", "Cases", _cases(cases, loads)),
        ("caution", "Caution", caution_section()),
        ("trace", "Traceability", trace_section(facts, study_text)),
    ]
    page = html.page(
        title,
        [(anchor, name) for anchor, name, _ in sections],
        html.header(title, f"Discretization error of {study_name}. {date}"),
        *(part for _, _, part in sections),
    )
    record = {"title": title, **records.cases_object(cases), "versions": records.versions()}
    text_of = json.dumps(record, indent=2, ensure_ascii=False, allow_nan=False)
    write_text(folder / "findings.json", f"{text_of}\n")
    path = folder / "report.html"
    write_text(path, page)
    return path


def _statement(cases: Mapping[str, Findings], quantities: tuple[Quantity, ...]) -> Html:
    order = worst_first(cases)
    rows = [
        [text(q.name), text(q.unit), *(_cell(case, cases[case], q) for case in order)] for q in quantities
    ]
    return html.section(
        "statement",
        "Statement",
        html.paragraph(_words.overall_cases(cases), "overall"),
        html.table("Every quantity in every case", ("quantity", "unit", *order), rows, "matrix"),
        html.paragraph(NOTE, "tiny"),
        html.element("h3", {}, text("Not covered")),
        html.bullets(_not_covered({case: cases[case] for case in order})),
    )


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


def _cell(case: str, findings: Findings, quantity: Quantity) -> Html:
    verdict = findings.verdicts[quantity.name]
    address = _page(case, _words.anchor(findings, quantity))
    value = html.element("a", {"href": address}, text(_words.value_text(verdict)))
    return html.join(html.element("div", {}, html.badge(verdict.word)), html.element("div", {}, value))


def _largest(
    cases: Mapping[str, Findings], quantities: tuple[Quantity, ...], largest: Mapping[str, Envelope]
) -> Html:
    rows = []
    for quantity in quantities:
        found = largest[quantity.name]
        verdict = cases[found.case].verdicts[quantity.name]
        cells = (
            _words.value_text(verdict),
            quantity.unit,
            found.case,
            _words.span_text(found),
        )
        rows.append([text(quantity.name), *(text(cell) for cell in cells), html.badge(found.word)])
    return html.section(
        "largest",
        "Largest values",
        html.table("Envelope of all cases", ENVELOPE, rows, "statement"),
        html.paragraph(LARGEST, "tiny"),
    )


def _cases(cases: Mapping[str, Findings], loads: Mapping[str, str]) -> Html:
    rows = []
    for case in worst_first(cases):
        link = html.element("a", {"href": _page(case, "statement")}, text(case))
        rows.append([link, text(loads[case]), text(_words.overall(cases[case]))])
    return html.section(
        "cases",
        "Cases",
        html.table("The reports of the cases", ("case", "loads", "conclusion"), rows, "words"),
    )


def _page(case: str, anchor: str) -> str:
    return f"{quote(case)}/report.html#{anchor}"
