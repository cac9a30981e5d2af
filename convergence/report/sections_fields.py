"""Meshes, stress and error as pictures, with the singular corners of the model."""

from collections.abc import Sequence

from convergence import numbers
from convergence.report import html
from convergence.report._picture import Picture
from convergence.report.html import Html, text
from convergence.results import Findings


def meshes_section(picture: Picture) -> Html:
    """Return the mesh series."""
    return html.section("meshes", "Meshes", html.figure(picture))


def stress_section(findings: Findings, picture: Picture) -> Html:
    """Return the deformed part with its stress, and the corners where stress has no limit."""
    return html.section("stress", "Deformation and stress", html.figure(picture), _corners(findings))


def error_section(pictures: Sequence[Picture]) -> Html:
    """Return where the error sits and how it falls."""
    return html.section("error", "Error in the energy norm", *(html.figure(picture) for picture in pictures))


def _corners(findings: Findings) -> Html:
    corners = findings.facts.corners
    if corners is None:
        return html.paragraph("The corners of this model were not examined for singular stress.", "tiny")
    if not corners:
        return html.paragraph("No corner of this model makes the stress singular.", "tiny")
    rows = [
        [
            text(corner.name),
            text(corner.where),
            text(f"{numbers.significant(corner.opening, 4)}°"),
            text(" and ".join(corner.sides)),
            text(numbers.significant(corner.exponent, 4)),
        ]
        for corner in corners
    ]
    head = ("corner", "place", "opening", "its two sides", "exponent λ")
    caption = "Singular corners: stress grows like r^(λ-1) (Williams 1952)"
    return html.table(caption, head, rows)
