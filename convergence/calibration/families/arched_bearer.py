"""Solid bearers with an arched underside on two feet, smooth: half or a quarter, pressed on top."""

from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)


def arched_bearer() -> list[DrawnCase]:
    """Return a wide bearer pressed along its middle, and a slim one pushed along."""
    share = ng.z / 16.0
    return [
        _bearer("wide bearer", (40.0, 34.0, 16.0), 20.0, 10.5, (0.0, -12.0 * (1.0 - 0.6 * share), 0.0)),
        _bearer("slim bearer pushed along", (30.0, 26.0, 9.0), 15.0, 8.0, (0.0, 0.0, 5.0 * ng.y / 26.0)),
    ]


def _bearer(
    name: str, lengths: tuple[float, float, float], radius: float, size: float, load: tuple[Any, ...]
) -> DrawnCase:
    """Return half a bearer, cut at x = 0; z = 0 is a plane of symmetry where the load is, else held."""
    wide, high, deep = lengths
    pen = WorkPlane().MoveTo(0.0, radius).Direction(1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0)
    face = pen.LineTo(wide, 0.0).LineTo(wide, high).LineTo(0.0, high).Close().Face()
    shape = face.Extrude(deep)
    name_sides(shape, rest="arch")
    crown, haunch = (0.0, radius, 0.0), (radius * 0.5**0.5, radius * 0.5**0.5, deep)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=shape,
        size=size,
        held={"min_x": {"x": 0.0}, "min_y": {"y": 0.0}, "min_z": {"z": 0.0}},
        tractions={"max_y": load},
        materials={"": Elastic(poisson=0.28)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sag", (0.0, high, deep), "y"),
            displacement("foot", (wide, 0.0, deep), "x"),
            mean_displacement("end", "max_x", "x"),
            reaction("feet", "min_z", "z"),
            section_force("middle force", "min_x", "x"),
            section_force("feet force", "min_y", "y"),
            section_force("middle shear", "min_x", "z"),
            stress("crown", crown, "xx"),
            stress("haunch", haunch, "first_principal"),
            stress("top", (0.0, high, 0.0), "xx", "direct"),
            stress("inside", (0.7 * wide, 0.5 * high, 0.4 * deep), "von_mises", "direct"),
            peak("nodal", "xx"),
            peak("direct", "first_principal", "direct", crown, radius),
            peak("gauss", "von_mises", "gauss"),
            *linearised("crown", crown, (0.0, high, 0.0), "xx"),
        ),
    )
