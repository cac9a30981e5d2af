"""Rails of the davit's trolley: head, web and foot with fillets between them, pressed on the head."""

from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)


def crane_rail() -> list[DrawnCase]:
    """Return a low rail on a bed, pressed and pushed aside, and a slim one that is pushed alone."""
    return [
        _rail("low rail", (50.0, 9.0), (16.0, 30.0), (34.0, 16.0), 7.0, 7.0, (9.0, -40.0)),
        _rail("slim rail pushed aside", (60.0, 7.0), (8.0, 45.0), (26.0, 14.0), 2.5, 6.5, (6.0, 0.0)),
    ]


def _rail(
    name: str,
    foot: tuple[float, float],
    web: tuple[float, float],
    head: tuple[float, float],
    radius: float,
    size: float,
    load: tuple[float, float],
) -> DrawnCase:
    """Return a rail; foot, web, head: width and height; load: on the middle of its top, sideways and up."""
    (foot_wide, low), (web_wide, rise), (head_wide, high) = foot, web, head
    a, b, c = 0.5 * foot_wide, 0.5 * web_wide, 0.5 * head_wide
    under, top = low + rise, low + rise + high
    share = ng.x / c
    bump = (1.0 - share * share) * (1.0 - share * share)
    reach = radius * (1.0 - 0.5**0.5)
    root, neck = (b + reach, low + reach), (b + reach, under - reach)
    middle = low + 0.5 * rise
    return DrawnCase(
        name=name,
        kind="plane_strain",
        shape=_face((a, b, c), (low, under, top), radius),
        size=size,
        held={"bed": {"y": 0.0}, "side": {"x": 0.0}},
        tractions={"top": (load[0] * bump, load[1] * bump)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("head x", (c, top), "x"),
            displacement("head y", (c, top), "y"),
            mean_displacement("cheek", "cheek", "x"),
            Reading("head turn", "rotation", "rotation", {"start": (-c, top), "end": (c, top)}),
            reaction("side push", "side", "x"),
            section_force("bed force", "bed", "y"),
            stress("root", root, "first_principal"),
            stress("neck", neck, "yy", "direct"),
            stress("web", (0.37 * b, middle), "yy"),
            peak("root nodal", "von_mises", near=root, radius=2.0 * radius + 3.0),
            peak("root direct", "first_principal", "direct", root, 2.0 * radius + 3.0),
            peak("root gauss", "von_mises", "gauss", root, 2.0 * radius + 3.0),
            *linearised("web", (-b, middle), (b, middle), "yy"),
        ),
    )


def _face(halves: tuple[float, float, float], heights: tuple[float, float, float], radius: float) -> Any:
    """Return the drawing; halves: half-widths of foot, web, head; heights: where each of them ends."""
    a, b, c = halves
    low, under, top = heights
    pen = WorkPlane().MoveTo(-a, 0.0).LineTo(a, 0.0).LineTo(a, low).LineTo(b + radius, low)
    pen.Direction(-1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(b, under - radius)
    pen.Direction(0.0, 1.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(c, under).LineTo(c, top)
    pen.LineTo(-c, top).LineTo(-c, under).LineTo(-b - radius, under)
    pen.Direction(1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(-b, low + radius)
    pen.Direction(0.0, -1.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(-a, low)
    face = pen.Close().Face()
    name_edges(face, {"bed": (0.0, 0.0), "side": (a, 0.5 * low), "top": (0.0, top), "cheek": (c, top - 1.0)})
    return face
