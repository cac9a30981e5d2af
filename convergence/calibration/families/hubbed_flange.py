"""Flanges of the hydraulic line: a ring with a tapered hub and a pipe, on a smooth face; rings about y.

Where hub and pipe meet is a blunt inner corner, far from what is read (Williams 1952).
"""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest

RISE = 1.6  # height of a hub against its wall at the ring


def hubbed_flange() -> list[DrawnCase]:
    """Return a flange pressed by its bolts, and one whose pipe is pulled, with a tight fillet."""
    return [
        _flange(
            "flange under its bolts", (25.0, 6.0, 40.0), (62.0, 16.0), 13.0, 5.0, 9.0, bolts=30.0, pull=0.0
        ),
        _flange(
            "flange on a pulled pipe", (18.0, 4.0, 36.0), (44.0, 10.0), 7.0, 1.5, 6.5, bolts=0.0, pull=45.0
        ),
    ]


def _flange(
    name: str,
    pipe: tuple[float, float, float],
    ring: tuple[float, float],
    hub: float,
    radius: float,
    size: float,
    *,
    bolts: float,
    pull: float,
) -> DrawnCase:
    """Return a flange; pipe: bore, wall, length; ring: outer radius, height; hub: its wall at the ring."""
    bore, wall, _ = pipe
    outer, high = ring
    lean = _lean(hub, wall)
    inner = bore + hub + _reach(radius, lean)
    share = (ng.x - inner) / (outer - inner)
    loads: dict[str, tuple[Any, ...]] = {}
    if bolts:
        loads["back"] = (0.0, -bolts * 4.0 * share * (1.0 - share))
    if pull:
        loads["end"] = (0.0, pull)
    held: dict[str, dict[str, float]] = {"seat": {"y": 0.0}}
    if pull:
        held["rim"] = {"x": 0.0}
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=_face(pipe, ring, hub, radius),
        size=size,
        held=held,
        tractions=loads,
        readings=_readings(pipe, ring, hub, radius),
        corners=((bore + wall, high + RISE * hub),),
        exponent=weakest("axisymmetric", ((Elastic(), 180.0 + lean),)),
    )


def _lean(hub: float, wall: float) -> float:
    """Return the lean of the hub's side in degrees."""
    return math.degrees(math.atan2(hub - wall, RISE * hub))


def _reach(radius: float, lean: float) -> float:
    """Return how far the fillet reaches along the ring's back."""
    return radius * math.tan(math.radians(0.5 * (90.0 - lean)))


def _face(pipe: tuple[float, float, float], ring: tuple[float, float], hub: float, radius: float) -> Any:
    """Return the drawing."""
    bore, wall, length = pipe
    outer, high = ring
    rise = RISE * hub
    lean = _lean(hub, wall)
    turn = 90.0 - lean
    foot = bore + hub + _reach(radius, lean)
    top = high + rise + length
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(outer, 0.0).LineTo(outer, high).LineTo(foot, high)
    pen.Direction(-1.0, 0.0).Arc(radius, -0.5 * turn).Arc(radius, -0.5 * turn)
    pen.LineTo(bore + wall, high + rise).LineTo(bore + wall, top)
    face = pen.LineTo(bore, top).Close().Face()
    name_edges(
        face,
        {
            "seat": (0.5 * (bore + outer), 0.0),
            "back": (0.5 * (foot + outer), high),
            "end": (bore + 0.5 * wall, top),
            "bore": (bore, 0.5 * top),
            "rim": (outer, 0.5 * high),
        },
    )
    return face


def _readings(
    pipe: tuple[float, float, float], ring: tuple[float, float], hub: float, radius: float
) -> tuple[Reading, ...]:
    """Return what is read."""
    bore, wall, length = pipe
    outer, high = ring
    rise, foot = RISE * hub, bore + hub
    lean = _lean(hub, wall)
    half = 0.5 * math.radians(90.0 - lean)
    fillet = (
        foot + _reach(radius, lean) - radius * math.sin(half),
        high + radius * (1.0 - math.cos(half)),
    )
    cut = high + 0.4 * rise
    return (
        Reading("energy", "energy", "energy"),
        displacement("pipe end", (bore + wall, high + rise + length), "x"),
        displacement("rim", (outer, high), "y"),
        mean_displacement("bore", "bore", "x"),
        Reading("ring turn", "rotation", "rotation", {"start": (bore, 0.0), "end": (bore, high)}),
        reaction("seat force", "seat", "y"),
        section_force("seat shear", "seat", "x"),
        stress("fillet", fillet, "first_principal"),
        stress("seat hoop", (bore, 0.0), "zz"),
        stress("hub", (bore, high + 0.5 * rise), "yy", "direct"),
        stress("inside", (0.55 * foot + 0.45 * outer, 0.37 * high), "von_mises", "direct"),
        peak("fillet nodal", "von_mises", near=fillet, radius=2.5 * radius),
        peak("fillet direct", "yy", "direct", fillet, 2.5 * radius),
        peak("fillet gauss", "first_principal", "gauss", fillet, 2.5 * radius),
        *linearised("hub", (bore, cut), (foot - 0.4 * (hub - wall), cut), "yy"),
    )
