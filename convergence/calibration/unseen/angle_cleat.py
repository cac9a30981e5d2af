"""Solid cleats of angle section, sharp along their inner edge, that sit flat and are loaded on the leg."""

from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    reaction,
    section_force,
    sharp_readings,
    stress,
)
from convergence.calibration.exponents import weakest


def angle_cleat() -> list[DrawnCase]:
    """Return a stout cleat pulled on its leg and a thin one pushed aside."""
    share = ng.z / 20.0
    return [
        _cleat("stout cleat pulled", (32.0, 30.0, 20.0), 12.0, 8.5, (6.0 * (1.0 - 0.5 * share), 0.0, 0.0)),
        _cleat("thin cleat pushed", (28.0, 24.0, 14.0), 7.0, 6.5, (-2.0, 4.0 * ng.z / 14.0, 0.0)),
    ]


def _cleat(
    name: str, lengths: tuple[float, float, float], thick: float, size: float, load: tuple[Any, Any, Any]
) -> DrawnCase:
    """Return half a cleat, cut at z = 0; it rests on y = 0 and against x = 0."""
    wide, high, deep = lengths
    material = Elastic(poisson=0.3)
    pen = WorkPlane().LineTo(wide, 0.0).LineTo(wide, thick).LineTo(thick, thick).LineTo(thick, high)
    solid = pen.LineTo(0.0, high).Close().Face().Extrude(deep)
    name_sides(solid, rest="inner")
    for edge in solid.edges:
        if abs(edge.center.x - thick) + abs(edge.center.y - thick) < 1e-6:
            edge.name = "sharp"
    tip = (thick, thick, 0.0)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=solid,
        size=size,
        held={"min_y": {"y": 0.0}, "max_x": {"x": 0.0}, "min_z": {"z": 0.0}},
        tractions={"max_y": load},
        materials={"": material},
        corners=((thick, thick, deep),),
        edges=("sharp",),
        exponent=weakest("solid", ((material, 270.0),)),
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("tip x", (0.0, high, deep), "x"),
            displacement("tip y", (thick, high, 0.0), "y"),
            displacement("side z", (0.0, 0.5 * high, deep), "z"),
            mean_displacement("top", "max_y", "x"),
            section_force("seat", "min_y", "y"),
            reaction("stop", "max_x", "x"),
            section_force("stop force", "max_x", "x"),
            section_force("cut force", "min_z", "z"),
            stress("back", (0.0, 0.5 * high, 0.0), "yy"),
            stress("sole", (0.5 * (thick + wide), 0.0, 0.5 * deep), "xx", "direct"),
            stress("inside", (0.5 * thick, 0.6 * high, 0.4 * deep), "von_mises"),
            *linearised("leg", (0.0, 0.7 * high, 0.0), (thick, 0.7 * high, 0.0), "yy"),
            *sharp_readings("edge", tip, 6.0),
        ),
    )
