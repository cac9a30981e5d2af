"""Curved bars under a pin or between patches: rings, a shackle's bow, a crane hook with an eccentric bore.

Thick and thin: the stress is that of a curved bar, steepest at the inner side. Only the hook's shank, welded
at its head, has singular corners: clamped-free, 90 degrees, 0.758 in plane stress with nu = 0.3 (Williams
1952). Patches of pressure end on smooth sides; the pin's pressure falls to zero as the cosine squared.
"""

import math
from collections.abc import Mapping
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, Way

Place = tuple[float, float]


def curved_hook() -> list[DrawnCase]:
    """Return a thick and a thin ring, the bow of a shackle, and a hook."""
    return [
        _ring("thick ring between patches", "plane_strain", (30.0, 48.0), (18.0, 60.0), 6.5),
        _ring("thin ring between patches", "plane_stress", (70.0, 78.0), (8.0, 6.0), 5.5),
        _bow(),
        _hook(),
    ]


def _on_circle(radius: float, degrees: float, centre: Place = (0.0, 0.0)) -> Place:
    angle = math.radians(degrees)
    return centre[0] + radius * math.cos(angle), centre[1] + radius * math.sin(angle)


def _ring(
    name: str, kind: DrawnKind, radii: tuple[float, float], patch: tuple[float, float], size: float
) -> DrawnCase:
    """Draw a quarter; patch: half the angle of the pressed patches at top and bottom, pressure."""
    inner, outer = radii
    half, pressure = patch
    start = _on_circle(outer, 90.0 - half)
    plan = WorkPlane().MoveTo(inner, 0.0).LineTo(outer, 0.0, "side")
    plan.Direction(0.0, 1.0).Arc(outer, 90.0 - half, "outer").Arc(outer, half, "pressed")
    plan.LineTo(0.0, inner, "crown").Direction(1.0, 0.0).Arc(inner, -45.0).Arc(inner, -45.0)
    crown = (0.0, inner)
    inside = _on_circle(0.45 * inner + 0.55 * outer, 37.0)
    line = {"start": (inner, 0.0), "end": (outer, 0.0), "component": "yy"}
    return DrawnCase(
        name=name,
        kind=kind,
        shape=plan.Face(),
        size=size,
        held={"side": {"y": 0.0}, "crown": {"x": 0.0}},
        tractions={"pressed": (-pressure * ng.x / outer, -pressure * ng.y / outer)},
        corners=(start,),
        readings=(
            *_moves((inner, 0.0), "x", inside),
            _mean("outer", "x"),
            Reading("side force", "resultant", "section_force", {"boundary": "side", "component": "y"}),
            _mean("crown", "y"),
            _stress("crown nodal", crown, "xx"),
            _stress("side direct", (inner, 0.0), "yy", "direct"),
            _stress("inside", inside, "xy", "direct"),
            *_peaks(),
            _bending(line),
        ),
    )


def _bow() -> DrawnCase:
    """Half of a bronze bow, 22 thick, about a pin of radius 28; its shank cut 60 above the pin."""
    inner, outer, height, pressure = 28.0, 50.0, 60.0, 90.0
    plan = WorkPlane().MoveTo(0.0, -outer).Direction(1.0, 0.0).Arc(outer, 90.0, "outer")
    plan.LineTo(outer, height, "outer_side").LineTo(inner, height, "cut").LineTo(inner, 0.0, "inner_side")
    plan.Direction(0.0, -1.0).Arc(inner, -30.0).Arc(inner, -60.0, "pin").Close("middle")
    share = ng.cos(1.5 * ng.atan2(ng.x, -ng.y)) ** 2
    inside = _on_circle(37.0, 301.0)
    line = {"start": (inner, 0.3 * height), "end": (outer, 0.3 * height), "component": "yy"}
    return DrawnCase(
        name="bow of a bronze shackle",
        kind="plane_stress",
        shape=plan.Face(),
        size=9.0,
        held={"middle": {"x": 0.0}, "cut": {"y": 0.0}},
        tractions={"pin": (pressure * share * ng.x / inner, pressure * share * ng.y / inner)},
        materials={"": Elastic(young=110_000.0, poisson=0.34)},
        corners=(_on_circle(inner, 330.0),),
        readings=(
            *_moves((outer, height), "x", inside),
            _mean("middle", "y"),
            Reading("cut force", "resultant", "section_force", {"boundary": "cut", "component": "y"}),
            Reading("middle force", "resultant", "section_force", {"boundary": "middle", "component": "x"}),
            _stress("under pin", (0.0, -inner), "yy"),
            _stress("outside", (0.0, -outer), "xx", "direct"),
            _stress("inside", inside, "von_mises"),
            *_peaks(),
            _bending(line),
        ),
    )


def _hook() -> DrawnCase:
    """A hook 25 thick at its shank, 15 at its point; the bore of radius 25, the back of 45 about (-5, 0)."""
    bore, back, height, pressure = 25.0, 45.0, 70.0, 60.0
    point = _on_circle(bore, 25.0)
    plan = WorkPlane().MoveTo(-50.0, height).LineTo(-50.0, 0.0, "shank_back").Direction(0.0, -1.0)
    plan.Arc(back, 90.0, "back").Arc(back, 110.0).LineTo(*point, "point")
    plan.Direction(point[1], -point[0]).Arc(bore, -70.0).Arc(bore, -45.0, "pin").Arc(bore, -45.0, "pin")
    plan.Arc(bore, -45.0).LineTo(-bore, height, "shank_front").Close("head")
    share = ng.cos(2.0 * ng.atan2(ng.x, -ng.y)) ** 2
    inside = _on_circle(34.0, 217.0)
    line = {"start": (-bore, 0.2 * height), "end": (-50.0, 0.2 * height), "component": "yy"}
    heads = {"near": (-bore, height), "radius": 12.0}, {"near": (-50.0, height), "radius": 12.0}
    weld = {"component": "first_principal"}
    return DrawnCase(
        name="hook on a welded shank",
        kind="plane_stress",
        shape=plan.Face(),
        size=10.0,
        held={"head": {"x": 0.0, "y": 0.0}},
        tractions={"pin": (pressure * share * ng.x / bore, pressure * share * ng.y / bore)},
        corners=((-bore, height), (-50.0, height)),
        exponent=0.7583,
        readings=(
            *_moves(point, "magnitude", inside),
            _mean("back", "y"),
            Reading("head front", "peak_stress", "peak", {**weld, **heads[0]}, True),
            Reading("head front gauss", "peak_stress", "peak", {**weld, "way": "gauss", **heads[0]}, True),
            Reading("head back", "peak_stress", "peak", {"component": "von_mises", **heads[1]}, True),
            _stress("under pin", (0.0, -bore), "yy"),
            _stress("bore direct", _on_circle(bore, 225.0), "first_principal", "direct"),
            *_peaks((-12.0, -12.0), 40.0),
            _bending(line),
        ),
    )


def _moves(at: Place, component: str, inside: Place) -> tuple[Reading, ...]:
    """Return the energy and the displacement of two places."""
    return (
        Reading("energy", "energy", "energy"),
        Reading("moves", "displacement", "displacement", {"at": at, "component": component}),
        Reading("inside u", "displacement", "displacement", {"at": inside, "component": "y"}),
    )


def _mean(boundary: str, component: str) -> Reading:
    place = {"boundary": boundary, "component": component}
    return Reading(f"{boundary} {component}", "displacement", "mean_displacement", place)


def _stress(label: str, at: Place, component: str, way: Way = "nodal") -> Reading:
    return Reading(label, "point_stress", "stress", {"at": at, "component": component, "way": way})


def _peaks(near: Place | None = None, radius: float = math.inf) -> tuple[Reading, ...]:
    """Return the peak read in three ways, within a radius of a place or everywhere."""
    place = {"near": near, "radius": radius}
    mises, tension = {"component": "von_mises", **place}, {"component": "first_principal", **place}
    return (
        Reading("peak nodal", "peak_stress", "peak", mises),
        Reading("peak direct", "peak_stress", "peak", {"way": "direct", **tension}),
        Reading("peak gauss", "peak_stress", "peak", {"way": "gauss", **mises}),
    )


def _bending(line: Mapping[str, Any]) -> Reading:
    return Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"})
