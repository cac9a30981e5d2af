"""Lifting tees: a solid web on a flange with fillets between them, pulled upwards or aside."""

from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def lifting_tee() -> list[DrawnCase]:
    """Return a stout tee pulled unevenly and a slim one that is bent about its web."""
    share = ng.z / 18.0
    return [
        _tee("stout tee", (34.0, 12.0), (9.0, 30.0), 7.0, 18.0, 9.5, (0.0, 60.0 * (1.0 - 0.7 * share), 0.0)),
        _tee("slim tee", (26.0, 8.0), (5.0, 28.0), 4.0, 12.0, 7.0, (0.0, 0.0, 4.0 * (ng.y / 36.0) ** 2)),
    ]


def _tee(
    name: str,
    flange: tuple[float, float],
    web: tuple[float, float],
    radius: float,
    deep: float,
    size: float,
    load: tuple[Any, ...],
) -> DrawnCase:
    """Return half a tee; flange: half-width, thickness; web: half-thickness, height; it rests on its end."""
    wide, thick = flange
    half, rise = web
    top = thick + rise
    reach = radius * (1.0 - 0.5**0.5)
    foot = (half + reach, thick + reach, 0.0)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=_solid(flange, web, radius, deep),
        size=size,
        held={"min_x": {"x": 0.0}, "min_z": {"z": 0.0}, "max_x": {"y": 0.0}},
        tractions={"max_y": load},
        materials={"": Elastic(poisson=0.29)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("top y", (0.0, top, deep), "y"),
            displacement("top z", (half, top, deep), "z"),
            mean_displacement("top", "max_y", "y"),
            section_force("end force", "max_x", "y"),
            section_force("middle force", "min_x", "x"),
            section_force("cut force", "min_z", "z"),
            stress("foot", foot, "first_principal"),
            stress("below", (0.0, 0.0, deep), "xx"),
            stress("web", (half, thick + 0.6 * rise, 0.0), "yy", "direct"),
            stress("inside", (0.5 * wide, 0.5 * thick, 0.4 * deep), "von_mises", "direct"),
            peak("nodal", "von_mises", near=foot, radius=radius + 4.0),
            peak("direct", "first_principal", "direct", foot, radius + 4.0),
            peak("gauss", "von_mises", "gauss", foot, radius + 4.0),
            *linearised("flange", (half + radius, 0.0, 0.0), (half + radius, thick, 0.0), "xx"),
        ),
    )


def _solid(flange: tuple[float, float], web: tuple[float, float], radius: float, deep: float) -> Any:
    """Return the drawing."""
    wide, thick = flange
    half, rise = web
    top = thick + rise
    pen = WorkPlane().LineTo(wide, 0.0).LineTo(wide, thick).LineTo(half + radius, thick)
    pen.Direction(-1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(half, top).LineTo(0.0, top)
    solid = pen.Close().Face().Extrude(deep)
    name_sides(solid, rest="side")
    return solid
