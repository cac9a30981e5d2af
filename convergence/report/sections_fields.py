"""Meshes, stress and error as pictures, with the singular corners of the model."""

from collections.abc import Sequence

from convergence import numbers
from convergence.report import html
from convergence.report._picture import Picture
from convergence.report.html import Html, text
from convergence.results import Findings

SIDES = {
    ("point", "force"): "a force on the point",
    ("point", "support"): "a support on the point",
    ("bonded", "bonded"): "none, materials meet",
}


def meshes_section(picture: Picture) -> Html:
    """Return the mesh series."""
    return html.section("meshes", "Meshes", html.figure(picture))


def stress_section(findings: Findings, picture: Picture) -> Html:
    """Return the deformed part with its stress, and the corners where stress has no limit."""
    return html.section(
        "stress", "Deformation and stress", html.figure(picture), _corners(findings), _unexamined(findings)
    )


def error_section(pictures: Sequence[Picture]) -> Html:
    """Return where the error sits and how it falls."""
    return html.section("error", "Error in the energy norm", *(html.figure(picture) for picture in pictures))


def _unexamined(findings: Findings) -> Html:
    places = "; ".join(f"{corner.name} {corner.where}" for corner in findings.facts.unexamined)
    why = "their equations, of orthotropic materials or of cones on the axis of a ring, are not solved here"
    return html.paragraph(f"Not examined: {places}; {why}.", "tiny") if places else text("")


def _corners(findings: Findings) -> Html:
    corners = findings.facts.corners
    if corners is None:
        return html.paragraph("The corners of this model were not examined for singular stress.", "tiny")
    if not corners:
        which = "No corner that was examined" if findings.facts.unexamined else "No corner of this model"
        return html.paragraph(f"{which} makes the stress singular.", "tiny")
    rows = [
        [
            text(corner.name),
            text(corner.where),
            text(f"{numbers.significant(corner.opening, 4)}°" if corner.opening else "none"),
            text(SIDES.get(corner.sides, " and ".join(corner.sides))),
            text(numbers.significant(corner.exponent, 4)),
        ]
        for corner in corners
    ]
    head = ("corner", "place", "opening", "its two sides", "exponent λ")
    caption = "Singular corners: stress grows like r^(λ-1) (Williams 1952)"
    return html.table(caption, head, rows)
