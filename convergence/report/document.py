"""The report folder: one page that stands alone, the findings as JSON, every figure as SVG and PNG."""

import json
import re
from collections.abc import Sequence
from pathlib import Path

from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.histories.table import outcomes, table
from convergence.report import _scene, html, records, sections_fields
from convergence.report._picture import Picture
from convergence.report.figures_error import error_map, norm_figure
from convergence.report.figures_growth import field_figure, growth_figure
from convergence.report.figures_mesh import mesh_figure
from convergence.report.figures_order import error_figure
from convergence.report.figures_standing import standing_figure
from convergence.report.figures_stress import stress_figure
from convergence.report.figures_value import value_figure
from convergence.report.sections_checks import checks_section
from convergence.report.sections_closing import caution_section, trace_section
from convergence.report.sections_method import found_section
from convergence.report.sections_quantity import quantities_section
from convergence.report.sections_statement import statement_section
from convergence.results import Findings, Quantity
from convergence.textfile import write_bytes, write_text

ROUND_OFF = 1e-7  # an energy-norm error below this share is no error to draw


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
) -> Path:
    """Write report.html, findings.json and figures/ into the folder; return the path of the page.

    `fields` belong to the coarsest levels, all that can be drawn, in the ladder's order; none for a table.
    Each file is replaced as a whole, the page last; figures of an earlier run that are not drawn any more go.
    The same input gives the same bytes.
    """
    by_quantity = _quantity_pictures(findings, findings.ladder.h_unit)
    field_parts, field_pictures = _field_parts(findings, fields, units)
    facts = {"study": study_name, "command": command, "date": date, "ladder": findings.ladder.source}
    if findings.ladder.fingerprint:
        facts["fingerprint"] = findings.ladder.fingerprint
    sections = [
        ("statement", "Statement", statement_section(findings, findings.ladder.h_unit)),
        ("quantities", "Quantities", quantities_section(findings, by_quantity, findings.ladder.h_unit)),
        ("checks", "Checks", checks_section(findings)),
        *field_parts,
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
    _write_figures(folder / "figures", [p for group in by_quantity.values() for p in group] + field_pictures)
    record = json.dumps(records.findings_object(findings), indent=2, ensure_ascii=False, allow_nan=False)
    write_text(folder / "findings.json", f"{record}\n")
    path = folder / "report.html"
    write_text(path, page)
    return path


def stems(names: Sequence[str]) -> dict[str, str]:
    """Return a file stem for every name: plain characters, not longer than 48, no two alike."""
    found: dict[str, str] = {}
    for name in names:
        plain = re.sub(r"[^a-z0-9]+", "-", name.lower()).strip("-")[:48] or "quantity"
        number = 2
        stem = plain
        while stem in found.values():
            stem, number = f"{plain}-{number}", number + 1
        found[name] = stem
    return found


def _quantity_pictures(findings: Findings, length: str) -> dict[str, list[Picture]]:
    stem = stems([quantity.name for quantity in findings.quantities])
    return {q.name: _pictures(findings, q, stem[q.name], length) for q in findings.quantities}


def _pictures(findings: Findings, quantity: Quantity, stem: str, length: str) -> list[Picture]:
    ladder, verdict = findings.ladder, findings.verdicts[quantity.name]
    if verdict.word == "singular":
        drawn = [
            growth_figure(f"{stem}-growth", quantity, ladder, length, _exponent(findings, quantity)),
            field_figure(f"{stem}-field", quantity, ladder, findings.facts),
        ]
    else:
        drawn = [
            value_figure(f"{stem}-value", quantity, verdict, ladder, length, findings.companion),
            error_figure(f"{stem}-order", quantity, verdict, ladder, length),
            standing_figure(f"{stem}-standing", quantity, verdict, ladder, outcomes()),
        ]
    return [picture for picture in drawn if picture is not None]


def _exponent(findings: Findings, quantity: Quantity) -> float | None:
    """Return the weakest exponent within the quantity's reach, of the whole model where that is unknown."""
    covered = findings.facts.covered.get(quantity.name, ())
    return min((corner.exponent for corner in covered), default=findings.facts.exponent)


def _field_parts(
    findings: Findings, fields: Sequence[Fields], units: Units
) -> tuple[list[tuple[str, str, html.Html]], list[Picture]]:
    """Return the sections that need a mesh, with anchor and title, and their pictures."""
    parts, pictures = [], []
    exact = findings.ladder.column("energy_norm.estimated")[-1] < ROUND_OFF
    errors = [] if exact else [norm_figure(findings.ladder, findings.facts, findings.ladder.h_unit)]
    if fields:
        turned = _scene.turn(fields[-1])
        drawn_mesh = _mesh_name(len(fields), len(findings.ladder.levels))
        meshes = mesh_figure(fields, turned, findings.ladder, findings.ladder.h_unit)
        stress = stress_figure(fields[-1], turned, findings, units.stress, drawn_mesh)
        parts.append(("meshes", "Meshes", sections_fields.meshes_section(meshes)))
        parts.append(("stress", "Stress", sections_fields.stress_section(findings, stress)))
        pictures += [meshes, stress]
        if not exact:
            errors.insert(0, error_map(fields[-1], turned, units, drawn_mesh))
    drawn = [picture for picture in errors if picture is not None]
    if drawn:
        parts.append(("error", "Error", sections_fields.error_section(drawn)))
    return parts, pictures + drawn


def _mesh_name(drawn: int, levels: int) -> str:
    """Return what the mesh of the pictures is called."""
    if drawn >= levels:
        return "the finest mesh"
    return f"level {drawn} of {levels}, the finest that can be drawn"


def _write_figures(folder: Path, pictures: Sequence[Picture]) -> None:
    folder.mkdir(parents=True, exist_ok=True)
    for picture in pictures:
        write_text(folder / f"{picture.name}.svg", picture.svg)
        write_bytes(folder / f"{picture.name}.png", picture.png)
    kept = {picture.name for picture in pictures}
    for path in folder.iterdir():
        if path.suffix in (".svg", ".png") and path.stem not in kept:
            path.unlink()
