"""Meshes, stress and error as pictures, with the places of peaks and the singular corners of the model."""

from collections.abc import Sequence

from convergence import numbers
from convergence.report import _words
from convergence.report._marks import peaks
from convergence.report._picture import Picture
from convergence.report.content import Block, Figures, Paragraph, Section, Table, Words
from convergence.results import Findings

SIDES = {
    ("point", "force"): "a force on the point",
    ("point", "support"): "a support on the point",
    ("bonded", "bonded"): "none, materials meet",
}


def meshes_section(picture: Picture) -> Section:
    """Return the mesh series."""
    return Section("meshes", "Meshes", "Meshes", [Figures([picture])])


def stress_section(findings: Findings, picture: Picture) -> Section:
    """Return the deformed part with its stress, and the corners where stress has no limit."""
    blocks = [Figures([picture]), *_peaks(findings), _corners(findings), *_unexamined(findings)]
    return Section("stress", "Stress", "Deformation and stress", blocks)


def error_section(pictures: Sequence[Picture]) -> Section:
    """Return where the error sits and how it falls."""
    return Section("error", "Error", "Error in the energy norm", [Figures([picture]) for picture in pictures])


def _unexamined(findings: Findings) -> list[Block]:
    places = "; ".join(f"{corner.name} {corner.where}" for corner in findings.facts.unexamined)
    why = "their equations, of orthotropic materials or of cones on the axis of a ring, are not solved here"
    return [Paragraph(f"Not examined: {places}; {why}.", "tiny")] if places else []


def _peaks(findings: Findings) -> list[Block]:
    """Return the table of the places that are numbered in the figure, nothing without any."""
    quantities = {quantity.name: quantity for quantity in findings.quantities}
    rows = []
    for peak in peaks(findings, max(findings.facts.dimension, 2)):
        of = [quantities[name] for name in peak.names]
        values = tuple(
            _words.with_unit(_words.finest_text(findings.verdicts[q.name]), q.unit) or numbers.NONE
            for q in of
        )
        names = tuple(Words(q.name, to=f"#{_words.anchor(findings, q)}") for q in of)
        place = ", ".join(numbers.compact(x, 4) for x in peak.place)
        rows.append((str(peak.number), names, f"({place})", values))
    head = ("number", "quantity", "place", "on the finest mesh")
    return [Table("Places of peak quantities, numbered as in the figure", head, rows)] if rows else []


def _corners(findings: Findings) -> Block:
    corners = findings.facts.corners
    if corners is None:
        return Paragraph("The corners of this model were not examined for singular stress.", "tiny")
    if not corners:
        which = "No corner that was examined" if findings.facts.unexamined else "No corner of this model"
        known = "" if findings.facts.all_corners else " Where supports end is not known, nor examined."
        return Paragraph(f"{which} makes the stress singular.{known}", "tiny")
    rows = [
        (
            corner.name,
            corner.where,
            f"{numbers.significant(corner.opening, 4)}°" if corner.opening else "none",
            SIDES.get(corner.sides, " and ".join(corner.sides)),
            numbers.significant(corner.exponent, 4),
        )
        for corner in corners
    ]
    head = ("corner", "place", "opening", "its two sides", "exponent λ")
    caption = "Singular corners: stress grows like r^(λ-1) (Williams 1952)"
    return Table(caption, head, rows)
