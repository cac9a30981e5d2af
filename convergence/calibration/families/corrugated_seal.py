"""Convolutions of a thin metal bellows that seals the luffing cylinder, between planes of symmetry.

Shells of arcs; half a convolution, from root to crown; stretched, or under pressure from inside.
"""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import displacement, linearised, mean_displacement, peak, stress
from convergence.results import Kind

Place = tuple[float, float]


def corrugated_seal() -> list[DrawnCase]:
    """Return a stretched convolution and a thicker one under pressure."""
    return [
        _convolution("stretched bellows", 30.0, 8.0, 10.0, 1.6, 3.4, pressure=0.0),
        _convolution("bellows under pressure", 40.0, 7.0, 6.0, 3.0, 5.0, pressure=2.5),
    ]


def _convolution(
    name: str, inner: float, bend: float, straight: float, thick: float, size: float, *, pressure: float
) -> DrawnCase:
    """Return half a convolution; bend: radius of the middle of its arcs, straight: length between them.

    The wall runs outwards along x from the root's arc to that of the crown.
    """
    arcs = (bend - 0.5 * thick, bend + 0.5 * thick)
    small, large = arcs
    end = (inner + large + straight + small, large + small)
    normal = ng.specialcf.normal(2)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=_face(inner, arcs, straight, thick, end),
        size=size,
        held={"root": {"y": 0.0}, "crown": {"y": 0.0 if pressure else 0.2}},
        tractions={"wet": (-pressure * normal[0], -pressure * normal[1])} if pressure else {},
        materials={"": Elastic(195_000.0, 0.29)},
        readings=_readings(inner, arcs, straight, thick, end, "resultant" if pressure else "reaction"),
    )


def _face(inner: float, arcs: Place, straight: float, thick: float, end: Place) -> Any:
    """Return the drawing; arcs: their smaller and larger radius, end: the crown's end of the inside."""
    small, large = arcs
    pen = WorkPlane().MoveTo(inner + thick, 0.0).Direction(0.0, 1.0)
    pen.Arc(small, -45.0).Arc(small, -45.0).Line(straight).Arc(large, 45.0).Arc(large, 45.0)
    pen.LineTo(*end).Direction(0.0, -1.0)
    pen.Arc(small, -45.0).Arc(small, -45.0).Line(straight).Arc(large, 45.0).Arc(large, 45.0)
    face = pen.Close().Face()
    name_edges(face, {"root": (inner + 0.5 * thick, 0.0), "crown": (end[0] + 0.5 * thick, end[1])})
    wet = [(inner + large + 0.5 * straight, large)]
    for angle in (0.125 * math.pi, 0.375 * math.pi):
        over, up = math.cos(angle), math.sin(angle)
        wet.append((inner + large * (1.0 - over), large * up))
        wet.append((end[0] - small * (1.0 - over), end[1] - small * up))
    for place in wet:
        name_edges(face, {"wet": place})
    return face


def _readings(
    inner: float, arcs: Place, straight: float, thick: float, end: Place, push: Kind
) -> tuple[Reading, ...]:
    """Return what is read; push: the kind of the crown's force."""
    small, large = arcs
    middle = inner + large + 0.5 * straight
    half = 0.5 * math.pi / 2.0
    slant = (inner + large * (1.0 - math.cos(half)), large * math.sin(half))
    across = (inner + large - small * math.cos(half), small * math.sin(half))
    turn = {"start": (middle, large - thick), "end": (middle, large)}
    return (
        Reading("energy", "energy", "energy"),
        displacement("root u", (inner + thick, 0.0), "x"),
        displacement("crown u", (end[0] + thick, end[1]), "x"),
        mean_displacement("inside lift", "wet", "y"),
        Reading("wall turn", "rotation", "rotation", turn),
        Reading("pull", push, "reaction", {"boundary": "crown", "component": "y"}),
        stress("root axial", (inner, 0.0), "yy"),
        stress("crown axial", (end[0] + thick, end[1]), "yy", "direct"),
        stress("crown hoop", end, "zz"),
        stress("wall", (middle, large - 0.31 * thick), "xx", "direct"),
        peak("peak nodal", "von_mises"),
        peak("peak direct", "first_principal", "direct"),
        peak("peak gauss", "von_mises", "gauss"),
        *linearised("bend", slant, across, "zz"),
    )
