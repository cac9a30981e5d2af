"""The report folder: one page that stands alone, the findings as JSON, every figure as SVG and PNG."""

import json
from collections.abc import Sequence
from pathlib import Path

from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.histories.table import table
from convergence.report import html, records, sections_fields
from convergence.report._picture import Picture
from convergence.report.pictures import Draw, Pictures, one_by_one, pictures
from convergence.report.sections_checks import checks_section
from convergence.report.sections_closing import caution_section, trace_section
from convergence.report.sections_method import found_section
from convergence.report.sections_quantity import quantities_section
from convergence.report.sections_statement import statement_section
from convergence.results import Findings
from convergence.textfile import write_bytes, write_text


def write_report(
    findings: Findings,
    folder: Path,
    *,
    fields: Sequence[Fields],
    units: Units,
    study_text: str,
    study_name: str,
    command: str,
    date: str,
    draw_all: Draw = one_by_one,
) -> Path:
    """Write report.html, findings.json and figures/ into the folder; return the path of the page.

    `fields` belong to the coarsest levels, all that can be drawn, in the ladder's order; none for a table.
    `draw_all` may let another process draw some of the figures.
    Each file is replaced as a whole, the page last; figures of an earlier run that are not drawn any more go.
    The same input gives the same bytes.
    """
    drawn = pictures(findings, fields, units, draw_all)
    facts = {"study": study_name, "command": command, "date": date, "ladder": findings.ladder.source}
    if findings.ladder.fingerprint:
        facts["fingerprint"] = findings.ladder.fingerprint
    sections = [
        ("statement", "Statement", statement_section(findings, findings.ladder.h_unit)),
        ("quantities", "Quantities", quantities_section(findings, drawn.by_quantity, findings.ladder.h_unit)),
        ("checks", "Checks", checks_section(findings)),
        *_field_parts(findings, drawn),
        ("interval", "Interval", found_section(findings, table())),
        ("caution", "Caution", caution_section()),
        ("trace", "Traceability", trace_section(facts, study_text)),
    ]
    title = findings.title or study_name
    page = html.page(
        title,
        [(anchor, name) for anchor, name, _ in sections],
        html.header(title, f"Discretization error of {study_name}. {date}"),
        *(part for _, _, part in sections),
    )
    _write_figures(folder / "figures", drawn.all)
    record = json.dumps(records.findings_object(findings), indent=2, ensure_ascii=False, allow_nan=False)
    write_text(folder / "findings.json", f"{record}\n")
    path = folder / "report.html"
    write_text(path, page)
    return path


def _field_parts(findings: Findings, found: Pictures) -> list[tuple[str, str, html.Html]]:
    """Return the sections that need a mesh, with anchor and title."""
    parts = []
    if found.fields:
        meshes, stress = found.fields
        parts.append(("meshes", "Meshes", sections_fields.meshes_section(meshes)))
        parts.append(("stress", "Stress", sections_fields.stress_section(findings, stress)))
    if found.errors:
        parts.append(("error", "Error", sections_fields.error_section(found.errors)))
    return parts


def _write_figures(folder: Path, pictures: Sequence[Picture]) -> None:
    folder.mkdir(parents=True, exist_ok=True)
    for picture in pictures:
        write_text(folder / f"{picture.name}.svg", picture.svg)
        write_bytes(folder / f"{picture.name}.png", picture.png)
    kept = {picture.name for picture in pictures}
    for path in folder.iterdir():
        if path.suffix in (".svg", ".png") and path.stem not in kept:
            path.unlink()
