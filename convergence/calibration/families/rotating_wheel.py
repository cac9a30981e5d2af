"""A turning wheel with a bore, loaded by its own mass: hub, web and rim, a tapered disc, a dished wheel."""

from typing import Any

import ngsolve as ng
from netgen.occ import Glue, WorkPlane, X

from convergence.calibration.drawn_case import DrawnCase, Reading
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
DENSITY = 7.85e-9  # of steel, t/mm³


def rotating_wheel() -> list[DrawnCase]:
    """Return a wheel with fillets, one with re-entrant corners of 270°, which are singular, and two discs."""
    return [
        _wheel("winch wheel, fillets 5", (15.0, 30.0, 80.0, 95.0), (20.0, 5.0, 12.0), 5.0, 900.0, 6.0),
        _wheel("sharp corners", (20.0, 45.0, 90.0, 110.0), (24.0, 8.0, 16.0), 0.0, 800.0, 7.0),
        _tapered("tapered disc, small bore", (4.0, 100.0), (20.0, 5.0), 1000.0, 7.0),
        _dished("dished wheel", (12.0, 26.0, 90.0), (40.0, 6.0, 7.0), 4.0, 850.0, 6.0),
    ]


def _wheel(
    name: str,
    radii: tuple[float, float, float, float],
    halves: tuple[float, float, float],
    fillet: float,
    speed: float,
    size: float,
) -> DrawnCase:
    """Return half a wheel; radii: of bore, hub, web's end, rim; halves: half widths of hub, web, rim."""
    (bore, hub, rim, outer), (wide, thin, broad) = radii, halves
    plane = WorkPlane().MoveTo(bore, 0).LineTo(outer, 0).LineTo(outer, broad).LineTo(rim, broad)
    plane.LineTo(rim, thin + fillet)
    if fillet:
        plane.Direction(0, -1).Arc(fillet, -90)
    plane.LineTo(hub + fillet, thin)
    if fillet:
        plane.Direction(-1, 0).Arc(fillet, -90)
    whole = plane.LineTo(hub, wide).LineTo(bore, wide).Close().Face()
    inner = whole * WorkPlane().Rectangle(hub + fillet, wide).Face()
    rest = whole - WorkPlane().Rectangle(hub + fillet, wide).Face()
    inner.name, rest.name = "hub", "web"
    toe = (hub + fillet, thin)
    feet = ((hub, thin + fillet), toe, (rim - fillet, thin), (rim, thin + fillet))
    middle = 0.52 * hub + 0.48 * rim
    is_sharp = fillet == 0.0
    own = (
        Reading("hub hoop", "point_stress", "mean_stress", {"region": "hub", "component": "zz"}),
        Reading("rim edge", "displacement", "displacement", {"at": (outer, broad), "component": "y"}),
        Reading("toe", "point_stress", "stress", {"at": toe, "component": "xx"}, is_sharp),
        Reading(
            "hub fillet",
            "peak_stress",
            "peak",
            {"component": "von_mises", "way": "direct", "near": (hub, thin), "radius": 1.3 * size},
            is_sharp,
        ),
    )
    readings = _common((bore, 0.0), (outer, 0.0), (middle, 0.6 * thin), ((bore, 0.0), (bore, wide)), "zz")
    return _case(
        name=name,
        shape=Glue([inner, rest]),
        speed=speed,
        size=size,
        readings=readings + own + _largest(is_sharp),
        corners=feet,
        exponent=weakest_exponent(270.0, ("free", "free"), kappa=1.8) if is_sharp else None,
    )


def _tapered(name: str, radii: Place, halves: Place, speed: float, size: float) -> DrawnCase:
    """Return half a disc whose thickness falls evenly from the bore to the rim."""
    (bore, outer), (wide, thin) = radii, halves
    plane = WorkPlane().MoveTo(bore, 0).LineTo(outer, 0).LineTo(outer, thin).LineTo(bore, wide)
    cut = ((bore, 0.0), (bore, wide))
    edge = {"at": (bore, wide), "component": "zz", "way": "direct"}
    own = (
        Reading("bore edge u", "displacement", "displacement", {"at": (bore, wide), "component": "y"}),
        Reading("bore edge", "point_stress", "stress", edge),
    )
    return _case(
        name=name,
        shape=plane.Close().Face(),
        speed=speed,
        size=size,
        readings=_common((bore, 0.0), (outer, 0.0), (0.37 * outer, 0.3 * wide), cut, "zz")
        + own
        + _largest(False),
        corners=((bore, 0.0), (bore, wide)),
        exponent=None,
    )


def _dished(
    name: str,
    radii: tuple[float, float, float],
    heights: tuple[float, float, float],
    fillet: float,
    speed: float,
    size: float,
) -> DrawnCase:
    """Return a hub with a web near one end; radii: bore, hub, outer; heights: hub, start and width of web."""
    (bore, hub, outer), (height, start, thick) = radii, heights
    top = start + thick
    plane = WorkPlane().MoveTo(bore, 0).LineTo(hub, 0).LineTo(hub, start - fillet).Direction(0, 1)
    plane.Arc(fillet, -90).LineTo(outer, start).LineTo(outer, top).LineTo(hub + fillet, top).Direction(-1, 0)
    plane.Arc(fillet, -90).LineTo(hub, height).LineTo(bore, height)
    line = {"start": (0.6 * outer, start), "end": (0.95 * outer, start)}
    through = ((hub + 1.2 * fillet, start), (hub + 1.2 * fillet, top))
    toe = {"at": (hub + fillet, top), "component": "xx", "way": "direct"}
    own = (
        Reading("web turn", "rotation", "rotation", line),
        Reading("rim y", "displacement", "displacement", {"at": (outer, top), "component": "y"}),
        Reading("toe", "point_stress", "stress", toe),
    )
    places = ((bore, 0.0), (outer, start), (0.5 * (hub + outer), start + 0.4 * thick))
    corners = ((hub, start - fillet), (hub + fillet, start), (hub + fillet, top), (hub, top + fillet))
    return _case(
        name=name,
        shape=plane.Close().Face(),
        speed=speed,
        size=size,
        readings=_common(*places, through, "xx") + own + _largest(False),
        corners=corners,
        exponent=None,
    )


def _case(
    *,
    name: str,
    shape: Any,
    speed: float,
    size: float,
    readings: tuple[Reading, ...],
    corners: tuple[Place, ...],
    exponent: float | None,
) -> DrawnCase:
    shape.edges.Min(X).name = "bore"
    for edge in shape.edges:
        if abs(edge.center.y) < 1e-9:
            edge.name = "seat"
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=shape,
        size=size,
        held={"seat": {"y": 0.0}},
        body=(DENSITY * speed**2 * ng.x, 0.0),
        readings=readings,
        corners=corners,
        exponent=exponent,
        levels=8,
    )


def _common(
    bore: Place, outer: Place, inside: Place, cut: tuple[Place, Place], component: str
) -> tuple[Reading, ...]:
    """Return what is read from every wheel; cut: a line, component: the stress along it."""
    line = {"start": cut[0], "end": cut[1], "component": component}
    hoop = {"component": "zz", "way": "direct", "near": bore, "radius": 9.0}
    within = {"at": inside, "component": "von_mises", "way": "direct"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("bore u", "displacement", "mean_displacement", {"boundary": "bore", "component": "x"}),
        Reading("outer u", "displacement", "displacement", {"at": outer, "component": "x"}),
        Reading("bore hoop", "point_stress", "stress", {"at": bore, "component": "zz"}),
        Reading("inside mises", "point_stress", "stress", within),
        Reading("bending", "point_stress", "line_stress", line | {"part": "bending"}),
        Reading("bore peak", "peak_stress", "peak", hoop),
    )


def _largest(is_singular: bool) -> tuple[Reading, ...]:
    radial = {"component": "xx", "way": "direct"}
    largest = {"component": "first_principal", "way": "gauss"}
    return (
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}, is_singular),
        Reading("peak unaveraged", "peak_stress", "peak", radial, is_singular),
        Reading("peak gauss", "peak_stress", "peak", largest, is_singular),
    )
