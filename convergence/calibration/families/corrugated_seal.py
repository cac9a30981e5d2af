"""Convolutions of a thin metal bellows that seals the luffing cylinder, between planes of symmetry.

Shells of arcs; half a convolution, from root to crown; stretched, or under pressure from inside.
"""

import math

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import displacement, linearised, mean_displacement, peak, stress
from convergence.results import Kind


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
    small, large = bend - 0.5 * thick, bend + 0.5 * thick
    start = (inner, 0.0)
    end_in = (inner + large + straight + small, large + small)
    pen = WorkPlane().MoveTo(inner + thick, 0.0).Direction(0.0, 1.0)
    pen.Arc(small, -45.0).Arc(small, -45.0).Line(straight).Arc(large, 45.0).Arc(large, 45.0)
    pen.LineTo(*end_in).Direction(0.0, -1.0)
    pen.Arc(small, -45.0).Arc(small, -45.0).Line(straight).Arc(large, 45.0).Arc(large, 45.0)
    face = pen.Close().Face()
    root_end, crown = (inner + thick, 0.0), (end_in[0] + thick, end_in[1])
    name_edges(
        face,
        {
            "root": (inner + 0.5 * thick, 0.0),
            "crown": (end_in[0] + 0.5 * thick, end_in[1]),
            "wet": (inner + large + 0.5 * straight, large),
        },
    )
    for angle in (0.125 * math.pi, 0.375 * math.pi):
        over, up = math.cos(angle), math.sin(angle)
        for x, y in (
            (inner + large * (1.0 - over), large * up),
            (end_in[0] - small * (1.0 - over), end_in[1] - small * up),
        ):
            face.edges.Nearest((x, y, 0.0)).name = "wet"
    normal = ng.specialcf.normal(2)
    middle = inner + large + 0.5 * straight
    pulled = 0.0 if pressure else 0.2
    half = 0.5 * math.pi / 2.0
    slant = (inner + large * (1.0 - math.cos(half)), large * math.sin(half))
    across = (
        inner + large - small * math.cos(half),
        small * math.sin(half),
    )
    push: Kind = "resultant" if pressure else "reaction"
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held={"root": {"y": 0.0}, "crown": {"y": pulled}},
        tractions={"wet": (-pressure * normal[0], -pressure * normal[1])} if pressure else {},
        materials={"": Elastic(195_000.0, 0.29)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("root u", root_end, "x"),
            displacement("crown u", crown, "x"),
            mean_displacement("inside lift", "wet", "y"),
            Reading(
                "wall turn",
                "rotation",
                "rotation",
                {"start": (middle, large - thick), "end": (middle, large)},
            ),
            Reading("pull", push, "reaction", {"boundary": "crown", "component": "y"}),
            stress("root axial", start, "yy"),
            stress("crown axial", crown, "yy", "direct"),
            stress("crown hoop", end_in, "zz"),
            stress("wall", (middle, large - 0.31 * thick), "xx", "direct"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("peak gauss", "von_mises", "gauss"),
            *linearised("bend", slant, across, "zz"),
        ),
    )
