"""Solid blocks with a half-round groove across their top, smooth: quarters, bent or pulled unevenly."""

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


def grooved_block() -> list[DrawnCase]:
    """Return a block that is bent and one that is pulled unevenly over its depth."""
    bent = (30.0 * (2.0 * ng.y / 28.0 - 1.0), 0.0, 0.0)
    pulled = (45.0 * (1.0 - 0.8 * (ng.z / 11.0) ** 2), 0.0, 0.0)
    return [
        _block("block bent over its groove", (40.0, 28.0, 18.0), 8.0, 8.5, bent),
        _block("flat block pulled unevenly", (34.0, 22.0, 11.0), 5.0, 6.5, pulled),
    ]


def _block(
    name: str, lengths: tuple[float, float, float], radius: float, size: float, load: tuple[Any, Any, Any]
) -> DrawnCase:
    """Return a quarter, cut at x = 0 through the groove and at z = 0; it rests on y = 0 at its far end."""
    wide, high, deep = lengths
    pen = WorkPlane().LineTo(wide, 0.0).LineTo(wide, high).LineTo(radius, high).Direction(0.0, -1.0)
    solid = pen.Arc(radius, -45.0).Arc(radius, -45.0).Close().Face().Extrude(deep)
    name_sides(solid, rest="groove")
    root, below = (0.0, high - radius, 0.0), (0.0, 0.0, 0.0)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=solid,
        size=size,
        held={"min_x": {"x": 0.0}, "min_z": {"z": 0.0}, "min_y": {"y": 0.0}},
        tractions={"max_x": load},
        materials={"": Elastic(120_000.0, 0.33)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("lip y", (radius, high, 0.0), "y"),
            displacement("lip x", (radius, high, deep), "x"),
            displacement("side z", (0.5 * wide, 0.5 * high, deep), "z"),
            mean_displacement("end", "max_x", "x"),
            reaction("cut", "min_x", "x"),
            section_force("cut force", "min_x", "x"),
            section_force("cut shear", "min_x", "y"),
            section_force("rest", "min_y", "y"),
            stress("root", root, "xx"),
            stress("root side", (0.0, high - radius, deep), "first_principal", "direct"),
            stress("below", below, "xx"),
            stress("inside", (0.6 * wide, 0.5 * high, 0.4 * deep), "von_mises"),
            peak("nodal", "von_mises", near=root, radius=radius + 4.0),
            peak("direct", "first_principal", "direct", root, radius + 4.0),
            peak("gauss", "von_mises", "gauss", root, radius + 4.0),
            *linearised("net", root, below, "xx"),
        ),
    )
