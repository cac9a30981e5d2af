"""Blocks, bushings and rings of rubber, nearly incompressible: degree 1 locks, bonded edges are singular."""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, name_edges
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
SHEAR = 1.0  # MPa


def soft_bearing() -> list[DrawnCase]:
    """Return a bonded block and bushing; a waisted pad and a pressed ring, which are free of corners."""
    return [
        _block("bonded block", (40.0, 12.0), 0.499, 5.0),
        _bushing("bonded bushing", (10.0, 24.0, 36.0), 0.499, 5.0),
        _pad("waisted pad on rollers", 0.4995, 5.5),
        _ring("ring in its groove", 0.49, 2.5),
    ]


def _block(name: str, lengths: tuple[float, float], poisson: float, size: float) -> DrawnCase:
    """Return a quarter: half a width, half a height; the plate above comes down."""
    wide, high = lengths
    shape = WorkPlane().Rectangle(wide, high).Face()
    name_edges(shape, {"left": (0, high / 2), "middle": (wide / 2, 0), "plate": (wide / 2, high)})
    name_edges(shape, {"side": (wide, high / 2)})
    corner = (wide, high)
    own = (
        Reading("plate shear", "reaction", "reaction", {"boundary": "plate", "component": "x"}),
        Reading("bulge", "displacement", "displacement", {"at": (wide, 0.0), "component": "x"}),
        Reading("side u", "displacement", "mean_displacement", {"boundary": "side", "component": "x"}),
    )
    return _case(
        name=name,
        kind="plane_strain",
        shape=shape,
        size=size,
        poisson=poisson,
        held={"left": {"x": 0.0}, "middle": {"y": 0.0}, "plate": {"x": 0.0, "y": -0.4}},
        readings=own
        + _stresses((0.0, 0.0), (0.63 * wide, 0.41 * high), ((0.8 * wide, 0.0), (0.8 * wide, high)))
        + _peaks(corner, 1.6 * size),
        corners=(corner, (0.0, high)),
        is_bonded=True,
    )


def _bushing(name: str, lengths: tuple[float, float, float], poisson: float, size: float) -> DrawnCase:
    """Return a tube between a pin that moves along its axis and a sleeve; lengths: two radii, height."""
    inner, outer, high = lengths
    shape = WorkPlane().MoveTo(inner, 0).Rectangle(outer - inner, high).Face()
    middle = 0.5 * (inner + outer)
    name_edges(shape, {"pin": (inner, high / 2), "sleeve": (outer, high / 2)})
    name_edges(shape, {"bottom": (middle, 0.0), "top": (middle, high)})
    corners = tuple((x, y) for x in (inner, outer) for y in (0.0, high))
    line = {"start": (middle - 3.0, high), "end": (middle + 3.0, high)}
    own = (
        Reading("top u", "displacement", "mean_displacement", {"boundary": "top", "component": "y"}),
        Reading("bottom x", "displacement", "displacement", {"at": (middle, 0.0), "component": "x"}),
        Reading("top turn", "rotation", "rotation", line),
        Reading("pin push", "reaction", "reaction", {"boundary": "pin", "component": "x"}),
    )
    within = (inner + 0.31 * (outer - inner), 0.77 * high)
    cut = ((inner, 0.5 * high), (outer, 0.5 * high))
    return _case(
        name=name,
        kind="axisymmetric",
        shape=shape,
        size=size,
        poisson=poisson,
        held={"pin": {"x": 0.15, "y": 1.0}, "sleeve": {"x": 0.0, "y": 0.0}},
        readings=own + _stresses((inner, 0.4 * high), within, cut) + _peaks((inner, high), 1.6 * size),
        corners=corners,
        is_bonded=True,
    )


def _pad(name: str, poisson: float, size: float) -> DrawnCase:
    """Return half a pad on rollers with a hollow side, pressed by a parabola."""
    wide, high, sag = 30.0, 26.0, 34.0
    half = math.asin(0.5 * high / sag)
    plane = WorkPlane().LineTo(wide, 0).Direction(-math.sin(half), math.cos(half))
    shape = plane.Arc(sag, -2.0 * math.degrees(half)).LineTo(0, high).Close().Face()
    name_edges(shape, {"left": (0, high / 2), "bottom": (wide / 2, 0), "top": (wide / 2, high)})
    own = (
        Reading("corner u", "displacement", "displacement", {"at": (wide, high), "component": "x"}),
        Reading("top corner", "displacement", "displacement", {"at": (wide, high), "component": "y"}),
        Reading("side turn", "rotation", "rotation", {"start": (wide, 0.0), "end": (wide, high)}),
    )
    return _case(
        name=name,
        kind="plane_strain",
        shape=shape,
        size=size,
        poisson=poisson,
        held={"left": {"x": 0.0}, "bottom": {"y": 0.0}},
        tractions={"top": (0.0, -1.2 * (1.0 - ng.x * ng.x / wide**2))},
        readings=own
        + _stresses((0.0, 0.0), (0.47 * wide, 0.62 * high), ((0.0, 0.0), (0.7 * wide, 0.0)))
        + _peaks(None, 0.0, singular=False),
        corners=((wide, 0.0), (wide, high)),
        is_bonded=False,
    )


def _ring(name: str, poisson: float, size: float) -> DrawnCase:
    """Return a ring in a groove, rounded at one edge, with pressure on its inside."""
    inner, outer, high, round_ = 20.0, 30.0, 14.0, 4.0
    plane = WorkPlane().MoveTo(inner, 0).LineTo(outer, 0).LineTo(outer, high).LineTo(inner + round_, high)
    shape = plane.Direction(-1, 0).Arc(round_, 90).Close().Face()
    name_edges(
        shape, {"bottom": (25.0, 0.0), "wall": (outer, high / 2), "top": (27.0, high), "wet": (inner, 5.0)}
    )
    edge = (inner, high - round_)
    turned = {"start": (inner + round_, high), "end": (outer, high)}
    own = (
        Reading("top u", "displacement", "mean_displacement", {"boundary": "top", "component": "y"}),
        Reading("wall push", "reaction", "reaction", {"boundary": "wall", "component": "x"}),
        Reading("top turn", "rotation", "rotation", turned),
    )
    return _case(
        name=name,
        kind="axisymmetric",
        shape=shape,
        size=size,
        poisson=poisson,
        held={"wall": {"x": 0.0}, "bottom": {"y": 0.0}},
        tractions={"wet": (2.0, 0.0)},
        readings=own
        + _stresses((outer, 0.0), (23.7, 6.2), ((inner, 3.0), (outer, 3.0)))
        + _peaks((inner, 0.0), 6.0, singular=False),
        corners=(edge, (inner + round_, high)),
        is_bonded=False,
    )


def _case(
    *,
    name: str,
    kind: DrawnKind,
    shape: Any,
    size: float,
    poisson: float,
    held: dict[str, dict[str, float]],
    readings: tuple[Reading, ...],
    corners: tuple[Place, ...],
    is_bonded: bool,
    tractions: dict[str, tuple[Any, ...]] | None = None,
) -> DrawnCase:
    """Return a case of rubber; bonded edges meet free ones at 90° (locally in plane strain)."""
    shape.name = "rubber"
    weakest = weakest_exponent(90.0, ("clamped", "free"), kappa=3.0 - 4.0 * poisson)
    return DrawnCase(
        name=name,
        kind=kind,
        shape=shape,
        size=size,
        held=held,
        tractions=tractions or {},
        materials={"": Elastic(2.0 * SHEAR * (1.0 + poisson), poisson)},
        readings=readings,
        corners=corners,
        exponent=weakest if is_bonded else None,
        levels=8,
    )


def _stresses(still: Place, inside: Place, line: tuple[Place, Place]) -> tuple[Reading, ...]:
    """Return energy and stresses that have limits."""
    cut = {"start": line[0], "end": line[1], "component": "yy"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("still", "point_stress", "stress", {"at": still, "component": "yy"}),
        Reading(
            "inside", "point_stress", "stress", {"at": inside, "component": "von_mises", "way": "direct"}
        ),
        Reading("inside xy", "point_stress", "stress", {"at": inside, "component": "xy"}),
        Reading("mean", "point_stress", "mean_stress", {"region": "rubber", "component": "zz"}),
        Reading("membrane", "point_stress", "line_stress", cut | {"part": "membrane"}),
    )


def _peaks(near: Place | None, radius: float, *, singular: bool = True) -> tuple[Reading, ...]:
    place = {"near": near, "radius": radius} if near else {}
    mises: dict[str, Any] = {"component": "von_mises"} | place
    return (
        Reading("peak nodal", "peak_stress", "peak", mises, singular),
        Reading("peak unaveraged", "peak_stress", "peak", mises | {"way": "direct"}, singular),
        Reading("peak gauss", "peak_stress", "peak", mises | {"way": "gauss"}, singular),
    )
