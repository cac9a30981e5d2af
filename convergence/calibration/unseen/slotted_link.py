"""Links with an eye and a slot, smooth: halves, pulled by a pin in the eye or bent."""

from typing import Any

import ngsolve as ng
from netgen.occ import Circle, Face, Rectangle, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)


def slotted_link() -> list[DrawnCase]:
    """Return a link pulled by its pin and a slim one pressed along its upper side."""
    normal = ng.specialcf.normal(2)
    pin = (70.0 * ng.IfPos(normal[0], 0.0, normal[0]) ** 2, 0.0)
    pressed = (0.0, -3.0 * (ng.x / 110.0) ** 2)
    return [
        _link("link pulled by its pin", (110.0, 22.0), 11.0, (36.0, 8.0), 8.0, "eye", pin),
        _link("slim link pressed from above", (110.0, 15.0), 6.0, (44.0, 4.0), 6.0, "top", pressed),
    ]


def _link(
    name: str,
    lengths: tuple[float, float],
    eye: float,
    slot: tuple[float, float],
    size: float,
    loaded: str,
    load: tuple[Any, Any],
) -> DrawnCase:
    """Return half a link above its axis; lengths: length, half-height; slot: middle, radius of its ends."""
    long, high = lengths
    middle, end = slot
    at, length = 0.78 * long, 0.24 * long
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=_face(lengths, (at, eye), (middle, end, length)),
        size=size,
        held={"wall": {"x": 0.0}, "low": {"y": 0.0}, "ligament": {"y": 0.0}, "tip": {"y": 0.0}},
        tractions={loaded: load},
        materials={"": Elastic(poisson=0.31)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("crown y", (at, eye), "y"),
            displacement("tip x", (long, 0.0), "x"),
            displacement("slot y", (middle, end), "y"),
            mean_displacement("end", "end", "x"),
            Reading("end turn", "rotation", "rotation", {"start": (long, 0.0), "end": (long, high)}),
            reaction("wall", "wall", "x"),
            section_force("wall force", "wall", "x"),
            section_force("ligament force", "ligament", "y"),
            stress("eye", (at, eye), "xx"),
            stress("slot", (middle, end), "xx", "direct"),
            stress("inside", (0.62 * long, 0.55 * high), "von_mises"),
            peak("eye nodal", "von_mises", near=(at, 0.0), radius=eye + 5.0),
            peak("eye gauss", "first_principal", "gauss", (at, 0.0), eye + 5.0),
            peak("slot direct", "first_principal", "direct", (middle, 0.0), 0.5 * length + end + 3.0),
            *linearised("net", (at, eye), (at, high), "xx"),
        ),
    )


def _face(lengths: tuple[float, float], eye: tuple[float, float], slot: tuple[float, float, float]) -> Any:
    """Return the drawing; eye: place, radius; slot: middle, radius of its ends, length between these."""
    long, high = lengths
    at, radius = eye
    middle, end, length = slot
    first, last = middle - 0.5 * length, middle + 0.5 * length
    pen = WorkPlane().MoveTo(last + end, 0.0).Direction(0.0, 1.0).Arc(end, 90.0)
    cut: Face = pen.LineTo(first, end).Direction(-1.0, 0.0).Arc(end, 90.0).Close().Face()
    face = Rectangle(long, high).Face() - cut - Circle((at, 0.0), radius).Face()
    places = {
        "wall": (0.0, 0.5 * high),
        "low": (0.5 * (first - end), 0.0),
        "ligament": (0.5 * (last + end + at - radius), 0.0),
        "tip": (0.5 * (at + radius + long), 0.0),
        "end": (long, 0.5 * high),
        "top": (0.5 * long, high),
        "eye": (at, radius),
    }
    name_edges(face, places)
    return face
