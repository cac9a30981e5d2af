"""Blocks with a blind bore that ends in half a ball, solid and smooth; quarters."""

from typing import Any

import ngsolve as ng
from netgen.occ import Box, Cylinder, Pnt, Sphere, Z

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def blind_bore() -> list[DrawnCase]:
    """Return a valve block under pressure in its bore, and a narrow block that is pulled sideways."""
    normal = ng.specialcf.normal(3)
    wet: tuple[Any, ...] = (-30.0 * normal[0], -30.0 * normal[1], -30.0 * normal[2])
    return [
        _block("valve block", (30.0, 26.0, 48.0), (11.0, 28.0), 12.0, ("wet", wet)),
        _block("block pulled sideways", (24.0, 20.0, 40.0), (7.0, 22.0), 9.5, ("max_x", (80.0, 0.0, 0.0))),
    ]


def _block(
    name: str,
    lengths: tuple[float, float, float],
    bore: tuple[float, float],
    size: float,
    load: tuple[str, tuple[Any, ...]],
) -> DrawnCase:
    """Return a quarter; bore: radius, and height of the centre of its ball; it opens at the top."""
    wide, deep, high = lengths
    radius, centre = bore
    hole = Cylinder(Pnt(0, 0, centre), Z, r=radius, h=high) + Sphere(Pnt(0, 0, centre), radius)
    shape = Box(Pnt(0, 0, 0), Pnt(wide, deep, high)) - hole
    name_sides(shape, rest="wet")
    mouth = (radius, 0.0, high)
    bottom, waist = (0.0, 0.0, centre - radius), (radius, 0.0, centre)
    return DrawnCase(
        name=name,
        kind="solid",
        shape=shape,
        size=size,
        held={"min_x": {"x": 0.0}, "min_y": {"y": 0.0}, "min_z": {"z": 0.0}},
        tractions={load[0]: load[1]},
        materials={"": Elastic(72_000.0, 0.33)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("mouth", mouth, "x"),
            displacement("corner", (wide, deep, high), "y"),
            mean_displacement("top", "max_z", "z"),
            section_force("cut x", "min_x", "x"),
            section_force("cut y", "min_y", "y"),
            section_force("cut shear", "min_y", "x"),
            stress("bottom", bottom, "xx"),
            stress("waist", waist, "yy"),
            stress("mouth yy", mouth, "yy", "direct"),
            stress("inside", (0.7 * wide, 0.6 * deep, 0.4 * high), "von_mises", "direct"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "von_mises", "gauss"),
            *linearised("floor", (0.0, 0.0, 0.0), bottom, "xx"),
        ),
    )
