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
    bore, wall, length = pipe
    outer, high = ring
    rise = 1.6 * hub
    lean = math.atan2(hub - wall, rise)
    turn = 90.0 - math.degrees(lean)
    reach = radius * math.tan(math.radians(0.5 * turn))
    foot = bore + hub
    top = high + rise + length
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(outer, 0.0).LineTo(outer, high).LineTo(foot + reach, high)
    pen.Direction(-1.0, 0.0).Arc(radius, -0.5 * turn).Arc(radius, -0.5 * turn).LineTo(
        bore + wall, high + rise
    ).LineTo(bore + wall, top)
    face = pen.LineTo(bore, top).Close().Face()
    name_edges(
        face,
        {
            "seat": (0.5 * (bore + outer), 0.0),
            "back": (0.5 * (foot + reach + outer), high),
            "end": (bore + 0.5 * wall, top),
            "bore": (bore, 0.5 * top),
            "rim": (outer, 0.5 * high),
        },
    )
    inner_back = foot + reach
    share = (ng.x - inner_back) / (outer - inner_back)
    loads: dict[str, tuple[Any, ...]] = {}
    if bolts:
        loads["back"] = (0.0, -bolts * 4.0 * share * (1.0 - share))
    if pull:
        loads["end"] = (0.0, pull)
    held: dict[str, dict[str, float]] = {"seat": {"y": 0.0}}
    if pull:
        held["rim"] = {"x": 0.0}
    half = 0.5 * math.radians(turn)
    fillet = (foot + reach - radius * math.sin(half), high + radius * (1.0 - math.cos(half)))
    joint = (bore + wall, high + rise)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held=held,
        tractions=loads,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("pipe end", (bore + wall, top), "x"),
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
            *linearised(
                "hub", (bore, high + 0.4 * rise), (foot - 0.4 * (hub - wall), high + 0.4 * rise), "yy"
            ),
        ),
        corners=(joint,),
        exponent=weakest("axisymmetric", ((Elastic(), 180.0 + math.degrees(lean)),)),
    )
