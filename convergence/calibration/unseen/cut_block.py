"""Solid blocks with a sharp notch: an inner edge of 300 or 270 degrees along their depth (Williams 1952)."""

import math
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
from convergence.calibration.exponents import weakest


def cut_block() -> list[DrawnCase]:
    """Return halves of blocks, above a notch of 60 and one of 90 degrees."""
    return [
        _block("notched block, pulled unevenly", (44.0, 36.0, 20.0), 16.0, 30.0, 10.0, 40.0),
        _block("flat block, blunt notch", (50.0, 30.0, 12.0), 12.0, 45.0, 9.0, 25.0),
    ]


def _block(
    name: str, lengths: tuple[float, float, float], cut: float, lean: float, size: float, pull: float
) -> DrawnCase:
    """Return half a block above its notch; cut: depth of the notch; lean: half its angle in degrees."""
    wide, high, deep = lengths
    mouth = cut * math.tan(math.radians(lean))
    material = Elastic(70_000.0, 0.33)
    share = ng.z / deep
    tip = (cut, 0.0, 0.0)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=_solid(lengths, cut, mouth),
        size=size,
        held={"min_y": {"y": 0.0}, "min_z": {"z": 0.0}, "max_x": {"x": 0.0}},
        tractions={"max_y": (0.0, pull * (1.0 - 0.4 * share * share), 0.0)},
        materials={"": material},
        corners=((cut, 0.0, deep),),
        edges=("sharp",),
        exponent=weakest("solid", ((material, 360.0 - 2.0 * lean),)),
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("mouth x", (0.0, mouth, deep), "x"),
            displacement("mouth y", (0.0, mouth, 0.0), "y"),
            displacement("top", (0.0, high, deep), "y"),
            mean_displacement("back mean", "max_x", "y"),
            reaction("hold", "max_x", "x"),
            section_force("ligament", "min_y", "y"),
            section_force("ligament shear", "min_z", "z"),
            stress("back", (wide, 0.0, 0.0), "yy"),
            stress("side", (wide, 0.5 * high, deep), "von_mises", "direct"),
            stress("inside", (0.7 * wide, 0.5 * high, 0.4 * deep), "first_principal"),
            *linearised("net", (0.6 * wide, 0.2 * high, 0.0), (wide, 0.2 * high, 0.0), "yy"),
            stress("edge", tip, "yy", singular=True),
            peak("nodal", "von_mises", singular=True),
            peak("direct", "first_principal", "direct", singular=True),
            peak("gauss", "von_mises", "gauss", tip, 10.0, singular=True),
        ),
    )


def _solid(lengths: tuple[float, float, float], cut: float, mouth: float) -> Any:
    """Return the drawing; mouth: half the height of the notch where it opens."""
    wide, high, deep = lengths
    pen = WorkPlane().MoveTo(cut, 0.0).LineTo(wide, 0.0).LineTo(wide, high).LineTo(0.0, high)
    solid = pen.LineTo(0.0, mouth).Close().Face().Extrude(deep)
    name_sides(solid, rest="flank")
    for edge in solid.edges:
        if math.dist((edge.center.x, edge.center.y), (cut, 0.0)) < 1e-6:
            edge.name = "sharp"
    return solid
