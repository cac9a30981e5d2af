"""Dovetail guides: sharp inner corners of 300 and 315 degrees, free on both sides (Williams 1952)."""

import math

import ngsolve as ng

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, name_edges, outline
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

IRON = Elastic(118_000.0, 0.26)


def dovetail_guide() -> list[DrawnCase]:
    """Return half a groove whose lips are lifted, and a groove with one lip."""
    return [
        _groove("lips lifted", 60.0, (70.0, 50.0), (22.0, 24.0), 8.5, "plane_strain"),
        _groove("wide lip pressed", 45.0, (90.0, 44.0), (30.0, 20.0), 9.0, "plane_stress"),
    ]


def _groove(
    name: str,
    lean: float,
    block: tuple[float, float],
    groove: tuple[float, float],
    size: float,
    kind: DrawnKind,
) -> DrawnCase:
    """Return half a block with a groove; groove: half-width of its mouth, depth; lean of its sides."""
    wide, high = block
    mouth, deep = groove
    toe = (mouth + deep / math.tan(math.radians(lean)), high - deep)
    face = outline(
        (0.0, 0.0, "middle"),
        (wide, 0.0, "bottom"),
        (wide, high, "side"),
        (mouth, high, "lip"),
        (*toe, "flank"),
        (0.0, high - deep, "floor"),
    )
    name_edges(face, {"middle": (0.0, 0.5 * (high - deep))})
    along = (ng.y - toe[1]) / deep
    force = 25.0 * along * along
    slope = math.radians(lean)
    return DrawnCase(
        name=name,
        kind=kind,
        shape=face,
        size=size,
        held={"middle": {"x": 0.0}, "bottom": {"y": 0.0}},
        tractions={"flank": (force * math.sin(slope), force * math.cos(slope))},
        materials={"": IRON},
        corners=(toe,),
        exponent=weakest(kind, ((IRON, 360.0 - lean),)),
        readings=_readings(block, mouth, toe),
    )


def _readings(block: tuple[float, float], mouth: float, toe: tuple[float, float]) -> tuple[Reading, ...]:
    """Return what is read."""
    wide, high = block
    cut = 0.7 * wide
    return (
        Reading("energy", "energy", "energy"),
        displacement("mouth x", (mouth, high), "x"),
        displacement("mouth y", (mouth, high), "y"),
        mean_displacement("side", "side", "x"),
        Reading("lip turn", "rotation", "rotation", {"start": (mouth, high), "end": (wide, high)}),
        reaction("tie", "middle", "x"),
        section_force("bed", "bottom", "y"),
        stress("floor", (toe[0] - 9.0, toe[1]), "xx"),
        stress("side stress", (wide, 0.6 * high), "yy"),
        stress("inside", (0.83 * wide, 0.31 * high), "von_mises", "direct"),
        *linearised("foot", (cut, 0.0), (cut, 0.6 * toe[1]), "xy"),
        stress("corner", toe, "von_mises", singular=True),
        peak("nodal", "von_mises", singular=True),
        peak("direct", "first_principal", "direct", toe, 8.0, singular=True),
        peak("gauss", "von_mises", "gauss", toe, 8.0, singular=True),
    )
