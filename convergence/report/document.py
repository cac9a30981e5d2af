"""The report folder: one page that stands alone, the findings as JSON, every figure as SVG and PNG."""

from collections.abc import Sequence
from pathlib import Path

from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.histories.table import table
from convergence.record import NOTHING, Record
from convergence.report import records, sections_fields
from convergence.report._acting import acting_object
from convergence.report._decimal_comma import given_names
from convergence.report.content import Document, Section
from convergence.report.forms import HTML, Forms, write_document
from convergence.report.pictures import Draw, Pictures, one_by_one, pictures
from convergence.report.sections_balance import balance_section
from convergence.report.sections_checks import checks_section
from convergence.report.sections_closing import caution_section, digests, trace_section
from convergence.report.sections_equilibrium import equilibrium_section
from convergence.report.sections_hot_spots import hot_spots, hot_spots_section
from convergence.report.sections_map import map_section
from convergence.report.sections_method import found_section
from convergence.report.sections_quantity import quantities_section
from convergence.report.sections_record import record_section
from convergence.report.sections_statement import statement_section
from convergence.results import Findings


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
    record: Record = NOTHING,
    inputs: Sequence[Path] = (),
    forms: Forms = HTML,
    up: str = "",
) -> list[Path]:
    """Write the forms, findings.json and figures/ into the folder; return the paths of the forms.

    `fields` belong to the coarsest levels, all that can be drawn, in the ladder's order; none for a table.
    `record` is what the analyst states, `inputs` are the files that were read. `draw_all` may let another
    process draw some of the figures. `up` is the address of the report of all load cases, if this is one.
    Each file is replaced as a whole, the page last; figures of an earlier run that are not drawn any more go.
    The same input gives the same bytes.
    """
    names = given_names([findings], study_text, [study_name, *(path.name for path in inputs)])
    drawn = pictures(findings, fields, units, draw_all, forms.comma(names))
    facts = {"study": study_name, "command": command, "date": date, "ladder": findings.ladder.source}
    if findings.ladder.fingerprint:
        facts["fingerprint"] = findings.ladder.fingerprint
    facts |= digests(study_text, inputs)
    sections = [
        statement_section(findings, findings.ladder.h_unit),
        quantities_section(findings, drawn.by_quantity, findings.ladder.h_unit),
        checks_section(findings),
        *_balance_part(findings, drawn, fields, units),
        *_field_parts(findings, drawn),
        found_section(findings, table()),
        caution_section(),
        trace_section(facts, study_text),
    ]
    sections.insert(1, record_section(record, sections))
    title = findings.title or study_name
    document = Document(title, f"Discretization error of {study_name}. {date}", sections, up)
    content = ("findings.json", records.findings_object(findings, acting_object(fields, units)))
    return write_document(document, folder, content, date, forms, names)


def _balance_part(
    findings: Findings, found: Pictures, fields: Sequence[Fields], units: Units
) -> list[Section]:
    """Return the section on loads and reactions that another solver printed, or on our own."""
    balance = findings.facts.balance
    if balance is not None:
        return [balance_section(balance, found.balance[0] if found.balance else None)]
    return [equilibrium_section(findings, fields[-1], units, picture) for picture in found.balance]


def _field_parts(findings: Findings, found: Pictures) -> list[Section]:
    """Return the sections that need a mesh, with anchor and title."""
    parts = []
    if found.fields:
        meshes, stress = found.fields
        parts.append(sections_fields.meshes_section(meshes))
        parts.append(sections_fields.stress_section(findings, stress))
    if hot_spots(findings):
        parts.append(hot_spots_section(findings))
    if found.errors:
        parts.append(sections_fields.error_section(found.errors))
    if findings.mapped:
        parts.append(map_section(findings.mapped, found.maps))
    return parts
