"""Solids with a sharp inner edge of 270 degrees: stress singular all along the edge.

In planes across a free edge the weakest exponent is 0.5445 (Williams 1952, symmetric), along it that of
out-of-plane shear, pi / (3 pi / 2) = 2/3: the one that is left where torsion makes the edge antisymmetric.
"""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    Place,
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.corners.williams import weakest_exponent

OPENING = weakest_exponent(270.0, ("free", "free"), kappa=3.0 - 4.0 * 0.3)
TEARING = 2.0 / 3.0


def sharp_edge_block() -> list[DrawnCase]:
    """Return an angle bracket in bending, a stepped bar in tension, a cross-shaped shaft in torsion."""
    return [_angle(), _step(), _cross()]


def _angle() -> DrawnCase:
    shape = _prism([(0, 0), (64, 0), (64, 22), (24, 22), (24, 60), (0, 60)], 18.0)
    return DrawnCase(
        name="angle bracket on a wall",
        kind="solid",
        shape=shape,
        size=11.5,
        held={"min_x": {"x": 0.0}, "max_y": {"y": 0.0}, "min_z": {"z": 0.0}},
        tractions={"max_x": (0.0, -60.0 * (ng.y / 22.0) * (1.0 - ng.y / 22.0), 0.0)},
        corners=((24.0, 22.0, 18.0),),
        edges=("sharp",),
        exponent=OPENING,
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("tip", (64.0, 22.0, 9.0), "y"),
            mean_displacement("foot", "min_y", "y"),
            section_force("tip force", "max_x", "y"),
            section_force("hanger", "max_y", "y"),
            stress("foot stress", (24.0, 0.0, 0.0), "xx"),
            stress("wall stress", (0.0, 40.0, 18.0), "yy", "direct"),
            stress("inside", (12.0, 10.0, 5.0), "von_mises"),
            stress("hanger stress", (0.0, 52.0, 9.0), "yy"),
            peak("foot peak", "von_mises", near=(24.0, 0.0, 9.0), radius=14.0),
            *_on_edge((24.0, 22.0)),
            *linearised("throat", (24.0, 0.0, 9.0), (24.0, 19.0, 9.0), "xx"),
        ),
    )


def _step() -> DrawnCase:
    shape = _prism([(0, 0), (70, 0), (70, 14), (32, 14), (32, 34), (0, 34)], 12.0)
    return DrawnCase(
        name="bar with a sharp step in tension",
        kind="solid",
        shape=shape,
        size=10.2,
        held={"min_x": {"x": 0.0}, "min_y": {"y": 0.0}, "min_z": {"z": 0.0}},
        tractions={"max_x": (120.0, 0.0, 0.0)},
        materials={"": Elastic(young=70_000.0, poisson=0.33)},
        corners=((32.0, 14.0, 12.0),),
        edges=("sharp",),
        exponent=OPENING,
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("bar middle", (52.0, 0.0, 6.0), "x"),
            mean_displacement("side", "max_y", "y"),
            displacement("inside v", (44.0, 9.0, 8.0), "y"),
            section_force("root force", "min_x", "x"),
            stress("root stress", (0.0, 0.0, 12.0), "xx"),
            stress("middle line", (32.0, 0.0, 0.0), "xx", "direct"),
            stress("bar", (50.0, 14.0, 12.0), "von_mises"),
            stress("near the edge", (24.0, 8.0, 4.0), "von_mises"),
            *_on_edge((32.0, 14.0)),
            *linearised("section", (26.0, 0.0, 6.0), (26.0, 34.0, 6.0), "xx"),
        ),
    )


def _cross() -> DrawnCase:
    """Return a quarter of a cross-shaped shaft, turned by pressure on one flank of each blade."""
    shape = _prism([(0, 0), (26, 0), (26, 9), (9, 9), (9, 26), (0, 26)], 20.0)
    shape.faces.Nearest((17.5, 9.0, 10.0)).name = "flank_y"
    shape.faces.Nearest((9.0, 17.5, 10.0)).name = "flank_x"
    pressure = 20.0 * ng.z / 20.0
    return DrawnCase(
        name="cross-shaped shaft in torsion",
        kind="solid",
        shape=shape,
        size=9.5,
        held={
            "min_x": {"y": 0.0, "z": 0.0},
            "min_y": {"x": 0.0, "z": 0.0},
            "min_z": {"x": 0.0, "y": 0.0},
        },
        tractions={"flank_y": (0.0, -pressure, 0.0), "flank_x": (pressure, 0.0, 0.0)},
        corners=((9.0, 9.0, 20.0),),
        edges=("sharp",),
        exponent=TEARING,
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("turn", (26.0, 0.0, 20.0), "y"),
            displacement("warping", (26.0, 9.0, 13.0), "z"),
            displacement("tip", (9.0, 26.0, 14.0), "magnitude"),
            section_force("root force", "min_z", "x"),
            mean_displacement("flank", "flank_y", "y"),
            mean_displacement("blade end", "max_x", "x"),
            stress("blade", (17.0, 0.0, 6.0), "yz"),
            stress("blade tip", (26.0, 4.0, 8.0), "von_mises", "direct"),
            stress("core", (3.0, 4.0, 6.0), "first_principal"),
            peak("tip peak", "von_mises", near=(26.0, 0.0, 0.0), radius=8.0),
            *_on_edge((9.0, 9.0)),
            *linearised("blade", (0.0, 0.0, 6.0), (26.0, 0.0, 6.0), "yz"),
        ),
    )


def _on_edge(at: tuple[float, float]) -> tuple[Reading, ...]:
    """Return what has no limit."""
    foot: Place = (*at, 0.0)
    return (
        Reading("edge stress", "point_stress", "stress", {"at": foot, "component": "von_mises"}, True),
        peak("peak nodal", "von_mises", singular=True),
        peak("peak direct", "first_principal", "direct", singular=True),
        peak("peak gauss", "von_mises", "gauss", foot, 10.0, singular=True),
    )


def _prism(outline: list[tuple[float, float]], height: float) -> Any:
    """Return the prism over an L whose inner corner is its fourth."""
    pen = WorkPlane().MoveTo(*outline[0])
    for place in outline[1:]:
        pen.LineTo(*place)
    solid = pen.Close().Face().Extrude(height)
    name_sides(solid)
    for edge in solid.edges:
        if math.dist((edge.center.x, edge.center.y), outline[3]) < 1e-6:
            edge.name = "sharp"
    return solid
