"""A block or a base plate pressed on part of an edge: an even, a parabolic and a shearing patch."""

from typing import Any

import ngsolve as ng
from netgen.occ import Glue, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.corners.bonded import wedge_exponents

Place = tuple[float, float]
STEEL, GROUT = Elastic(210_000.0, 0.3), Elastic(25_000.0, 0.2)


def patch_load() -> list[DrawnCase]:
    """Return three blocks on rollers, and a base plate on grout with a singular corner at the plate's end.

    Under the shearing patch the stress along the edge grows like log r at the ends of the patch.
    """
    return [
        _block("even pressure", (80.0, 60.0), 11.0, (0.0, -150.0), 0.3, 12.0),
        _block("narrow parabola", (60.0, 60.0), 6.0, (0.0, -240.0 * (1.0 - ng.x * ng.x / 36.0)), 0.25, 10.0),
        _sheared(),
        _base_plate(),
    ]


def _block(
    name: str,
    lengths: tuple[float, float],
    half: float,
    traction: tuple[Any, ...],
    poisson: float,
    size: float,
) -> DrawnCase:
    """Return half a block; half: of the loaded width."""
    wide, high = lengths
    seat = 0.4 * wide
    plane = WorkPlane().LineTo(seat, 0).LineTo(wide, 0).LineTo(wide, high).LineTo(half, high)
    shape = plane.LineTo(0, high).Close().Face()
    name_edges(shape, {"left": (0, high / 2), "seat": (seat / 2, 0), "rest": ((seat + wide) / 2, 0)})
    name_edges(shape, {"patch": (half / 2, high), "beside": ((half + wide) / 2, high)})
    under, inside = high - 0.8 * half, (1.7 * half, high - 1.3 * half)
    line = {"start": (1.5 * half, high), "end": (3.5 * half, high)}
    within = {"near": (0.0, under), "radius": 0.75 * half}
    own = (
        Reading("far corner", "displacement", "displacement", {"at": (wide, high), "component": "x"}),
        Reading("turn", "rotation", "rotation", line),
        Reading("seat", "reaction", "reaction", {"boundary": "seat", "component": "y"}),
        Reading("inside u", "displacement", "displacement", {"at": inside, "component": "x"}),
        Reading("under peak", "peak_stress", "peak", {"component": "von_mises"} | within),
        Reading("under direct", "peak_stress", "peak", {"component": "von_mises", "way": "direct"} | within),
        Reading("under gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"} | within),
    )
    return DrawnCase(
        name=name,
        kind="plane_strain",
        shape=shape,
        size=size,
        materials={"": Elastic(210_000.0, poisson)},
        held={"left": {"x": 0.0}, "seat": {"y": 0.0}, "rest": {"y": 0.0}},
        tractions={"patch": traction},
        readings=_common((0.0, 0.0), inside, (0.0, high), (0.0, 0.0)) + own,
        levels=8,
        corners=((half, high), (seat, 0.0)),
    )


def _sheared() -> DrawnCase:
    """Return a block on rollers whose upper edge is dragged along in the middle."""
    wide, high, start, end = 90.0, 50.0, 30.0, 48.0
    plane = (
        WorkPlane().LineTo(wide, 0).LineTo(wide, high).LineTo(end, high).LineTo(start, high).LineTo(0, high)
    )
    shape = plane.Close().Face()
    name_edges(shape, {"left": (0, 25), "seat": (45, 0), "right": (wide, 25)})
    name_edges(shape, {"ahead": (69, high), "patch": (39, high), "beside": (15, high)})
    behind = {"near": (start, high), "radius": 9.0}
    own = (
        Reading("patch u", "displacement", "mean_displacement", {"boundary": "patch", "component": "y"}),
        Reading("ahead", "displacement", "mean_displacement", {"boundary": "ahead", "component": "x"}),
        Reading("left", "resultant", "section_force", {"boundary": "left", "component": "x"}),
        Reading("edge", "point_stress", "stress", {"at": (start, high), "component": "xx"}, singular=True),
        Reading("behind nodal", "peak_stress", "peak", {"component": "von_mises"} | behind, singular=True),
        Reading(
            "behind unaveraged",
            "peak_stress",
            "peak",
            {"component": "first_principal", "way": "direct"} | behind,
            singular=True,
        ),
        Reading(
            "behind gauss",
            "peak_stress",
            "peak",
            {"component": "xx", "way": "gauss"} | behind,
            singular=True,
        ),
    )
    return DrawnCase(
        name="shearing patch",
        kind="plane_stress",
        shape=shape,
        size=10.0,
        held={"left": {"x": 0.0}, "right": {"x": 0.0}, "seat": {"y": 0.0}},
        tractions={"patch": (90.0, 0.0)},
        readings=_common((0.0, 0.0), (52.7, 41.3), (25.0, high), (25.0, 0.0)) + own,
        levels=8,
        corners=((start, high), (end, high)),
    )


def _base_plate() -> DrawnCase:
    """Return half a base plate under a column on a thick layer of grout that is wider."""
    plate, thick, wide, deep, column = 60.0, 16.0, 110.0, 70.0, 14.0
    grout = WorkPlane().Rectangle(wide, deep).Face()
    high = deep + thick
    outline = WorkPlane().MoveTo(0, deep).LineTo(plate, deep).LineTo(plate, high).LineTo(column, high)
    steel = outline.LineTo(0, high).Close().Face()
    steel.name, grout.name = "plate", "grout"
    shape = Glue([steel, grout])
    name_edges(shape, {"left": (0, deep / 2), "plate_left": (0, deep + thick / 2), "seat": (wide / 2, 0)})
    name_edges(shape, {"patch": (column / 2, high), "beside": ((column + plate) / 2, high)})
    end, near = (plate, deep), {"near": (plate, deep), "radius": 14.0}
    line = {"start": (0.4 * plate, high), "end": (plate, high)}
    sectors = ((90.0, *_wedge(STEEL)), (180.0, *_wedge(GROUT)))
    own = (
        Reading("tip", "displacement", "displacement", {"at": (plate, high), "component": "y"}),
        Reading("turn", "rotation", "rotation", line),
        Reading("plate pull", "resultant", "section_force", {"boundary": "plate_left", "component": "x"}),
        Reading("plate mean", "point_stress", "mean_stress", {"region": "plate", "component": "xx"}),
        Reading("end nodal", "peak_stress", "peak", {"component": "von_mises"} | near, singular=True),
        Reading(
            "end unaveraged",
            "peak_stress",
            "peak",
            {"component": "von_mises", "way": "direct"} | near,
            singular=True,
        ),
        Reading(
            "end gauss",
            "peak_stress",
            "peak",
            {"component": "von_mises", "way": "gauss"} | near,
            singular=True,
        ),
    )
    return DrawnCase(
        name="base plate on grout",
        kind="plane_strain",
        shape=shape,
        size=13.0,
        held={"left": {"x": 0.0}, "plate_left": {"x": 0.0}, "seat": {"y": 0.0}},
        tractions={"patch": (0.0, -120.0)},
        materials={"plate": STEEL, "grout": GROUT},
        readings=_common((0.0, 0.0), (0.55 * plate, high - 0.3 * thick), (0.0, high), (0.0, deep + 0.1))
        + own,
        levels=8,
        corners=(end, (column, high)),
        exponent=wedge_exponents(sectors, ("free", "free"))[0].real,
    )


def _wedge(material: Elastic) -> tuple[float, float]:
    """Return shear modulus and kappa in plane strain."""
    return material.young / (2.0 * (1.0 + material.poisson)), 3.0 - 4.0 * material.poisson


def _common(foot: Place, inside: Place, top: Place, bottom: Place) -> tuple[Reading, ...]:
    """Return what is read from all; top, bottom: the ends of a section under the load."""
    cut = {"start": bottom, "end": top, "component": "xx"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("beside", "displacement", "mean_displacement", {"boundary": "beside", "component": "y"}),
        Reading("foot", "point_stress", "stress", {"at": foot, "component": "yy"}),
        Reading("inside", "point_stress", "stress", {"at": inside, "component": "xy", "way": "direct"}),
        Reading("inside mises", "point_stress", "stress", {"at": inside, "component": "von_mises"}),
        Reading("bending", "point_stress", "line_stress", cut | {"part": "bending"}),
    )
