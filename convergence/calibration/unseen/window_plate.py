"""Plates with a square window whose corners are rounded, pulled one or both ways; quarters."""

from typing import Any

import ngsolve as ng
from netgen.occ import Rectangle, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def window_plate() -> list[DrawnCase]:
    """Return a quarter that is pulled both ways and one with a tight corner, pulled unevenly."""
    share = ng.y / 50.0
    return [
        _quarter("window pulled both ways", (60.0, 60.0), (26.0, 26.0), 6.0, 11.0, 50.0, 25.0),
        _quarter("tight window pulled unevenly", (80.0, 50.0), (30.0, 18.0), 2.0, 9.0, 60.0 * share, 0.0),
    ]


def _quarter(
    name: str,
    plate: tuple[float, float],
    window: tuple[float, float],
    radius: float,
    size: float,
    along: Any,
    up: float,
) -> DrawnCase:
    """Return a quarter; plate, window: half-widths and half-heights; loads on its right side and top."""
    (wide, high), (a, b) = plate, window
    reach = radius * (1.0 - 0.5**0.5)
    corner = (a - reach, b - reach)
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=_face(plate, window, radius),
        size=size,
        held={"low": {"y": 0.0}, "left": {"x": 0.0}},
        tractions={"right": (along, 0.0), "top": (0.0, up)},
        materials={"": Elastic(71_000.0, 0.32)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sill y", (0.0, b), "y"),
            displacement("jamb x", (a, 0.0), "x"),
            mean_displacement("right", "right", "x"),
            Reading("edge turn", "rotation", "rotation", {"start": (wide, 0.0), "end": (wide, high)}),
            section_force("left force", "left", "x"),
            section_force("low force", "low", "y"),
            stress("corner", corner, "first_principal"),
            stress("jamb", (a, 0.0), "yy", "direct"),
            stress("sill", (0.0, b), "xx"),
            stress("inside", (0.5 * (a + wide), 0.6 * high), "von_mises", "direct"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "von_mises", "gauss"),
            *linearised("lintel", (0.0, b), (0.0, high), "xx"),
        ),
    )


def _face(plate: tuple[float, float], window: tuple[float, float], radius: float) -> Any:
    """Return the drawing."""
    (wide, high), (a, b) = plate, window
    pen = WorkPlane().LineTo(a, 0.0).LineTo(a, b - radius).Direction(0.0, 1.0)
    hole = pen.Arc(radius, 45.0).Arc(radius, 45.0).LineTo(0.0, b).Close().Face()
    face = Rectangle(wide, high).Face() - hole
    name_edges(
        face,
        {
            "low": (0.5 * (a + wide), 0.0),
            "left": (0.0, 0.5 * (b + high)),
            "right": (wide, 0.5 * high),
            "top": (0.5 * wide, high),
            "sill": (0.4 * a, b),
        },
    )
    return face
