"""Stubs on base plates, solid, with sharp inner edges of 270 degrees all round or on two sides.

Weakest exponent along a free edge 0.5445 in planes across it (Williams 1952, symmetric).
"""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import Box, Pnt

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_sides
from convergence.calibration.drawn_readings import (
    Place,
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest


def welded_stub() -> list[DrawnCase]:
    """Return a quarter of a long stub pulled out of its plate, and half a crossbar pressed down."""
    return [_pulled(), _crossbar()]


def _pulled() -> DrawnCase:
    """A rib across a plate: the plate rests on its edge, the rib is pulled unevenly."""
    shape = Box(Pnt(0, 0, 0), Pnt(60, 24, 14)) + Box(Pnt(0, 0, 14), Pnt(16, 24, 52))
    share = ng.y / 24.0
    return _case(
        name="rib pulled out of a plate",
        shape=shape,
        size=11.0,
        edge=(16.0, 14.0),
        held={"min_x": {"x": 0.0}, "min_y": {"y": 0.0}, "max_x": {"z": 0.0}},
        load={"max_z": (0.0, 0.0, 70.0 * (1.0 - 0.5 * share * share))},
        material=Elastic(),
        depth=24.0,
        readings=_readings(
            tip=(16.0, 24.0, 52.0),
            foot=(16.0, 0.0, 14.0),
            support=("max_x", "z"),
            line=((38.0, 0.0, 0.0), (38.0, 0.0, 14.0), "xx"),
            points=((0.0, 0.0, 0.0), (40.0, 12.0, 14.0), (7.0, 9.0, 33.0)),
        ),
    )


def _crossbar() -> DrawnCase:
    """A block on a narrower foot, pressed near its outer side; the foot stands on rollers."""
    shape = Box(Pnt(0, 0, 0), Pnt(20, 18, 30)) + Box(Pnt(0, 0, 30), Pnt(50, 18, 50))
    share = ng.x / 50.0
    return _case(
        name="crossbar pressed down",
        shape=shape,
        size=11.5,
        edge=(20.0, 30.0),
        held={"min_x": {"x": 0.0}, "min_y": {"y": 0.0}, "min_z": {"z": 0.0}},
        load={"max_z": (0.0, 0.0, -35.0 * share)},
        material=Elastic(70_000.0, 0.33),
        depth=18.0,
        readings=_readings(
            tip=(50.0, 18.0, 50.0),
            foot=(20.0, 0.0, 30.0),
            support=("min_z", "z"),
            line=((0.0, 0.0, 38.0), (0.0, 18.0, 38.0), "zz"),
            points=((0.0, 0.0, 50.0), (20.0, 18.0, 8.0), (28.0, 7.0, 41.0)),
        ),
    )


def _case(
    *,
    name: str,
    shape: Any,
    size: float,
    edge: tuple[float, float],
    held: dict[str, dict[str, float]],
    load: dict[str, tuple[Any, ...]],
    material: Elastic,
    depth: float,
    readings: tuple[Reading, ...],
) -> DrawnCase:
    """Return a case; edge: x and z of the inner edge, which runs along y over the depth."""
    name_sides(shape)
    for one in shape.edges:
        if math.dist((one.center.x, one.center.z), edge) < 1e-6:
            one.name = "sharp"
    return DrawnCase(
        name=name,
        kind="solid",
        shape=shape,
        size=size,
        held=held,
        tractions=load,
        materials={"": material},
        corners=((edge[0], depth, edge[1]),),
        edges=("sharp",),
        exponent=weakest("solid", ((material, 270.0),)),
        levels=6,
        readings=readings,
    )


def _readings(
    *,
    tip: Place,
    foot: Place,
    support: tuple[str, str],
    line: tuple[Place, Place, str],
    points: tuple[Place, Place, Place],
) -> tuple[Reading, ...]:
    """Return what is read; foot: the end of the inner edge in the plane of symmetry, points: two of the
    surface and one inside.
    """
    first, second, inside = points
    return (
        Reading("energy", "energy", "energy"),
        displacement("tip x", tip, "x"),
        displacement("tip z", tip, "z"),
        displacement("inside moves", inside, "magnitude"),
        mean_displacement("top", "max_z", "z"),
        reaction("support", *support),
        section_force("cut", "min_x", "x"),
        stress("surface", first, "xx"),
        stress("second", second, "von_mises", "direct"),
        stress("inside", inside, "first_principal"),
        *linearised("line", *line),
        stress("edge", foot, "von_mises", singular=True),
        peak("nodal", "von_mises", singular=True),
        peak("direct", "first_principal", "direct", singular=True),
        peak("gauss", "von_mises", "gauss", foot, 10.0, singular=True),
    )
