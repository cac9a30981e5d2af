"""A cylinder under inner pressure with a flat or a domed end; half of it, from mid length to the end."""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane, X, Y

from convergence.calibration.drawn_case import DrawnCase, Reading
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
Wall = tuple[float, float, float]


def closed_vessel() -> list[DrawnCase]:
    """Return flat ends with inner fillets and without one (singular corner of 270°), and a dome."""
    return [
        _flat("hydraulic cylinder", (40.0, 8.0, 90.0), 14.0, 5.0, 25.0, 9.0),
        _flat("thick block, fillet 2", (20.0, 15.0, 50.0), 20.0, 2.0, 100.0, 12.0),
        _flat("flat end, sharp corner", (32.0, 10.0, 60.0), 12.0, 0.0, 30.0, 5.0),
        _domed("thin dome", (50.0, 4.0, 60.0), 80.0, 12.0, 6.0, 5.0),
    ]


def _flat(name: str, wall: Wall, end: float, fillet: float, pressure: float, size: float) -> DrawnCase:
    """Return a flat end; wall: inner radius, thickness, inner length."""
    bore, thick, length = wall
    outer, top = bore + thick, length + end
    foot, toe = (bore, length - fillet), (bore - fillet, length)
    plane = WorkPlane().MoveTo(bore, 0).LineTo(outer, 0).LineTo(outer, top).LineTo(0, top)
    plane.LineTo(0, length).LineTo(*toe)
    if fillet:
        plane.Direction(1, 0).Arc(fillet, -90)
    face = plane.Close().Face()
    mean_end = {"boundary": "end", "component": "y"}
    plate = {"start": (0.5 * bore, length), "end": (0.5 * bore, top), "component": "xx", "part": "bending"}
    own = (
        Reading("end mean", "displacement", "mean_displacement", mean_end),
        Reading("plate centre", "point_stress", "stress", {"at": (0.0, top), "component": "xx"}),
        Reading("plate bending", "point_stress", "line_stress", plate),
    )
    face.edges.Max(Y).name = "end"
    sharp = {} if fillet else {"near": foot, "radius": thick}
    return _case(
        name=name,
        face=face,
        wet=((bore, 0.4 * length), (0.4 * bore, length), (bore - 0.2929 * fillet, length - 0.2929 * fillet)),
        pressure=pressure,
        size=size,
        readings=_common(wall, foot, fillet == 0.0) + _peaks(sharp) + own,
        corners=(foot, toe) if fillet else (foot,),
        exponent=None if fillet else weakest_exponent(270.0, ("free", "free"), kappa=1.8),
    )


def _domed(name: str, wall: Wall, crown: float, knuckle: float, pressure: float, size: float) -> DrawnCase:
    """Return a dome of two arcs, of inner radii crown and knuckle, as thick as the wall."""
    bore, thick, length = wall
    slope = math.asin((bore - knuckle) / (crown - knuckle))
    centre = length - (crown - knuckle) * math.cos(slope)
    crown_angle = math.degrees(slope)
    plane = WorkPlane().MoveTo(bore, 0).LineTo(bore + thick, 0).LineTo(bore + thick, length)
    plane.Direction(0, 1).Arc(knuckle + thick, 90 - crown_angle).Arc(crown + thick, crown_angle).LineTo(
        0, centre + crown
    )
    face = plane.Direction(1, 0).Arc(crown, -crown_angle).Arc(knuckle, crown_angle - 90).Close().Face()
    joint = (crown * math.sin(slope), centre + crown * math.cos(slope))
    outer_joint = ((crown + thick) * math.sin(slope), centre + (crown + thick) * math.cos(slope))
    foot = (bore, length)
    across = {"start": joint, "end": outer_joint}
    half = 0.5 * (slope + 0.5 * math.pi)
    on_knuckle = (bore - knuckle * (1 - math.sin(half)), length + knuckle * math.cos(half))
    on_crown = (crown * math.sin(0.5 * slope), centre + crown * math.cos(0.5 * slope))
    own = (
        Reading(
            "crown rise", "displacement", "displacement", {"at": (0.0, centre + crown), "component": "y"}
        ),
        Reading("joint turn", "rotation", "rotation", across),
        Reading("joint hoop", "point_stress", "stress", {"at": joint, "component": "zz"}),
        Reading(
            "joint bending", "point_stress", "line_stress", across | {"component": "xx", "part": "bending"}
        ),
    )
    return _case(
        name=name,
        face=face,
        wet=((bore, 0.4 * length), on_knuckle, on_crown),
        pressure=pressure,
        size=size,
        readings=_common(wall, foot, False) + _peaks({}) + own,
        corners=(foot, joint, outer_joint, (bore + thick, length)),
        exponent=None,
    )


def _case(
    *,
    name: str,
    face: Any,
    wet: tuple[Place, ...],
    pressure: float,
    size: float,
    readings: tuple[Reading, ...],
    corners: tuple[Place, ...],
    exponent: float | None,
) -> DrawnCase:
    for place in wet:
        face.edges.Nearest((*place, 0.0)).name = "wet"
    face.edges.Min(Y).name = "middle"
    face.edges.Min(X).name = "axis"
    normal = ng.specialcf.normal(2)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held={"axis": {"x": 0.0}, "middle": {"y": 0.0}},
        tractions={"wet": (-pressure * normal[0], -pressure * normal[1])},
        readings=readings,
        corners=corners,
        exponent=exponent,
        levels=8,
    )


def _common(wall: Wall, foot: Place, is_sharp: bool) -> tuple[Reading, ...]:
    """Return what is read from the cylinder; foot: where the end begins on the inside."""
    bore, thick, length = wall
    across = {"start": (bore, 0.8 * length), "end": (bore + thick, 0.8 * length), "component": "yy"}
    inside = (bore + 0.37 * thick, 0.71 * length)
    foot_axial = {"at": foot, "component": "yy"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("growth", "displacement", "displacement", {"at": (bore + thick, 0.0), "component": "x"}),
        Reading("middle", "resultant", "section_force", {"boundary": "middle", "component": "y"}),
        Reading("foot", "point_stress", "stress", foot_axial, singular=is_sharp),
        Reading("inside", "point_stress", "stress", {"at": inside, "component": "zz", "way": "direct"}),
        Reading("wall bending", "point_stress", "line_stress", across | {"part": "bending"}),
    )


def _peaks(within: dict[str, Any]) -> tuple[Reading, ...]:
    is_singular = bool(within)
    largest = {"component": "first_principal", "way": "direct"}
    return (
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"} | within, is_singular),
        Reading("peak unaveraged", "peak_stress", "peak", largest | within, is_singular),
        Reading(
            "peak gauss", "peak_stress", "peak", {"component": "yy", "way": "gauss"} | within, is_singular
        ),
    )
