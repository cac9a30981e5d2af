"""Nozzles of the exhaust line: walls of revolution with a waist, hot inside or along a steep front."""

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
    section_force,
    stress,
)

BEND = 50.0  # degrees of each arc of the waist
STRAIGHT = 34.0  # length of the pipe
ALLOY = Elastic(190_000.0, 0.3, 16e-6)


def hot_nozzle() -> list[DrawnCase]:
    """Return a nozzle that is hot inside and one with a steep front of temperature along its length."""
    return [
        _nozzle("waist hot inside", 30.0, 8.0, 18.0, 7.0, front=False),
        _nozzle("thin waist with a hot front", 36.0, 4.0, 14.0, 5.5, front=True),
    ]


def _nozzle(name: str, bore: float, wall: float, radius: float, size: float, *, front: bool) -> DrawnCase:
    """Return half a nozzle: a straight pipe, then a waist of two arcs up to the plane of symmetry."""
    waist_out = (
        bore + wall - 2.0 * radius * (1.0 - math.cos(math.radians(BEND))),
        STRAIGHT + 2.0 * radius * math.sin(math.radians(BEND)),
    )
    waist_in = (waist_out[0] - wall, waist_out[1])
    shoulder = (bore + wall, STRAIGHT)
    hot = (
        250.0 / (1.0 + ng.exp(-(ng.y - STRAIGHT) / 3.0))
        if front
        else 200.0 * ng.exp((bore - ng.x) / 12.0) * (1.0 + ng.y / 90.0)
    )
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=_face(bore, wall, radius, waist_in),
        size=size,
        held={"waist": {"y": 0.0}},
        materials={"": ALLOY},
        temperature=hot,
        corners=(shoulder, (bore, STRAIGHT)),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("end x", (bore, 0.0), "x"),
            displacement("waist x", waist_in, "x"),
            mean_displacement("end y", "end", "y"),
            Reading("end turn", "rotation", "rotation", {"start": (bore, 0.0), "end": (bore + wall, 0.0)}),
            section_force("waist force", "waist", "y"),
            section_force("waist shear", "waist", "x"),
            stress("waist hoop", waist_in, "zz"),
            stress("waist axial", waist_out, "yy", "direct"),
            stress("wall", (bore + 0.4 * wall, 0.6 * STRAIGHT), "zz", "direct"),
            stress("shoulder", shoulder, "first_principal"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "von_mises", "gauss"),
            *linearised("wall", (bore, 0.7 * STRAIGHT), (bore + wall, 0.7 * STRAIGHT), "yy"),
        ),
    )


def _face(bore: float, wall: float, radius: float, waist: tuple[float, float]) -> Any:
    """Return the drawing; radius: of the middle of its arcs, waist: the inner end of the waist."""
    small, large = radius - 0.5 * wall, radius + 0.5 * wall
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(bore + wall, 0.0).LineTo(bore + wall, STRAIGHT)
    pen.Direction(0.0, 1.0).Arc(large, BEND).Arc(small, -BEND)
    pen.LineTo(*waist).Direction(0.0, -1.0).Arc(large, BEND).Arc(small, -BEND)
    face = pen.Close().Face()
    name_edges(
        face,
        {
            "end": (bore + 0.5 * wall, 0.0),
            "waist": (waist[0] + 0.5 * wall, waist[1]),
            "bore": (bore, 0.5 * STRAIGHT),
            "outside": (bore + wall, 0.5 * STRAIGHT),
        },
    )
    return face
