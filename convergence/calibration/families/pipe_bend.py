"""Thick quarter bends of the hydraulic line, solid and smooth everywhere: under pressure, and squeezed.

The half above their plane of symmetry, z = 0, between two more planes of symmetry at their ends.
"""

from typing import Any

import ngsolve as ng
from netgen.occ import Axes, Axis, Pnt, Revolve, WorkPlane, X, Y, Z

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def pipe_bend() -> list[DrawnCase]:
    """Return a thick bend under pressure and a thinner one that is squeezed across its plane."""
    normal = ng.specialcf.normal(3)
    pressure = (-40.0 * normal[0], -40.0 * normal[1], -40.0 * normal[2])
    squeezed = (0.0, 0.0, -6.0 * (ng.z / 15.0) ** 2)
    return [
        _bend("bend under pressure", (36.0, 16.0, 9.0), 9.0, {"inside": pressure}, Elastic()),
        _bend("squeezed bend", (30.0, 15.0, 10.0), 8.0, {"outside": squeezed}, Elastic(110_000.0, 0.34)),
    ]


def _bend(
    name: str,
    radii: tuple[float, float, float],
    size: float,
    load: dict[str, tuple[Any, ...]],
    material: Elastic,
) -> DrawnCase:
    """Return a bend; radii: of its middle line about the z axis, of the pipe outside and inside."""
    middle, outer, inner = radii
    inside = (middle - inner, 0.0, 0.0)
    crown, bore = (middle, 0.0, outer), (middle, 0.0, inner)
    wall = 0.5 * (inner + outer)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=_solid(radii),
        size=size,
        held={"flat": {"z": 0.0}, "start": {"y": 0.0}, "end": {"x": 0.0}},
        tractions=load,
        materials={"": material},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("outer side", (middle + outer, 0.0, 0.0), "x"),
            displacement("crown", crown, "z"),
            mean_displacement("end lifts", "end", "z"),
            mean_displacement("start moves", "start", "x"),
            section_force("end force", "end", "x"),
            section_force("flat force", "flat", "z"),
            section_force("start shear", "start", "x"),
            stress("inner side", inside, "yy"),
            stress("bore", bore, "zz", "direct"),
            stress("crown stress", crown, "first_principal"),
            stress("wall", (middle + wall, 0.0, 1.0), "von_mises", "direct"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "von_mises", "gauss"),
            *linearised("side", (middle + inner, 0.0, 0.0), (middle + outer, 0.0, 0.0), "yy"),
        ),
    )


def _solid(radii: tuple[float, float, float]) -> Any:
    """Return the drawing."""
    middle, outer, inner = radii
    pen = WorkPlane(Axes((0, 0, 0), -Y, X)).MoveTo(middle + outer, 0.0).Direction(0.0, 1.0)
    pen.Arc(outer, 90.0).Arc(outer, 90.0).LineTo(middle - inner, 0.0).Direction(0.0, 1.0)
    face = pen.Arc(inner, -90.0).Arc(inner, -90.0).Close().Face()
    shape = Revolve(face, Axis(Pnt(0, 0, 0), Z), 90)
    slant = 0.5**0.5
    for way in (-1.0, 1.0):
        for radius, side in ((outer, "outside"), (inner, "inside")):
            along = middle + way * radius * slant
            shape.faces.Nearest((along * slant, along * slant, radius * slant)).name = side
        along = middle + way * 0.5 * (outer + inner)
        shape.faces.Nearest((along * slant, along * slant, 0.0)).name = "flat"
    shape.faces.Min(Y).name, shape.faces.Min(X).name = "start", "end"
    return shape
