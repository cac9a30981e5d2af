"""Teeth of a slewing rim: a beam on a block, with root fillets, loaded on one flank; no singular corner.

The block stands on rollers along its bottom and between rollers at its sides.
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


def slewing_tooth() -> list[DrawnCase]:
    """Return a stub tooth with a generous root and a slender one with a tight root."""
    return [
        _tooth("stub tooth", (60.0, 26.0), (15.0, 30.0), 6.0, 12.0, 8.0, Elastic()),
        _tooth(
            "slender tooth, tight root", (50.0, 20.0), (8.0, 34.0), 2.0, 6.0, 6.5, Elastic(120_000.0, 0.27)
        ),
    ]


def _tooth(
    name: str,
    block: tuple[float, float],
    tooth: tuple[float, float],
    radius: float,
    lean: float,
    size: float,
    material: Elastic,
) -> DrawnCase:
    """Return a tooth; block: width, height; tooth: half-width at the root, height; lean in degrees."""
    wide, low = block
    half, high = tooth
    slope = math.radians(lean)
    top = half - high * math.tan(slope)
    turn = 90.0 - lean
    reach = radius * math.tan(math.radians(0.5 * turn))
    along = (ng.y - low) / high
    pressure = 60.0 * 4.0 * along * (1.0 - along)
    middle = 0.5 * math.radians(turn)
    root = (half + reach - radius * math.sin(middle), low + radius * (1.0 - math.cos(middle)))
    neck, at_neck = half - 0.45 * high * math.tan(slope), low + 0.45 * high
    return DrawnCase(
        name=name,
        kind="plane_strain",
        shape=_face(block, (half, top, high), (radius, reach), lean),
        size=size,
        held={"bottom": {"y": 0.0}, "left": {"x": 0.0}, "right": {"x": 0.0}},
        tractions={"flank": (-pressure * math.cos(slope), -pressure * math.sin(slope))},
        materials={"": material},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("tip", (-top, low + high), "x"),
            mean_displacement("top", "top", "y"),
            Reading("lean", "rotation", "rotation", {"start": (-top, low + high), "end": (top, low + high)}),
            reaction("push", "left", "x"),
            section_force("bottom force", "bottom", "y"),
            stress("root", root, "first_principal"),
            stress("other root", (-root[0], root[1]), "first_principal", "direct"),
            stress("inside", (0.21 * half, low + 0.33 * high), "yy", "direct"),
            stress("block", (0.3 * wide, 0.4 * low), "von_mises"),
            peak("root nodal", "von_mises", near=root, radius=2.0 * radius),
            peak("root direct", "first_principal", "direct", root, 2.0 * radius),
            peak("all gauss", "von_mises", "gauss"),
            *linearised("neck", (-neck, at_neck), (neck, at_neck), "yy"),
        ),
    )


def _face(
    block: tuple[float, float], tooth: tuple[float, float, float], fillet: tuple[float, float], lean: float
) -> Any:
    """Return the drawing; tooth: half-widths at root and top, height; fillet: radius, reach along a side."""
    wide, low = block
    half, top, high = tooth
    radius, reach = fillet
    slope, turn = math.radians(lean), 90.0 - lean
    pen = WorkPlane().MoveTo(-0.5 * wide, 0.0).LineTo(0.5 * wide, 0.0).LineTo(0.5 * wide, low)
    pen.LineTo(half + reach, low).Direction(-1.0, 0.0).Arc(radius, -0.5 * turn).Arc(radius, -0.5 * turn)
    pen.LineTo(top, low + high).LineTo(-top, low + high)
    pen.LineTo(-half + reach * math.sin(slope), low + reach * math.cos(slope))
    pen.Direction(-math.sin(slope), -math.cos(slope))
    pen.Arc(radius, -0.5 * turn).Arc(radius, -0.5 * turn)
    face = pen.LineTo(-0.5 * wide, low).Close().Face()
    name_edges(
        face,
        {
            "bottom": (0.0, 0.0),
            "left": (-0.5 * wide, 0.5 * low),
            "right": (0.5 * wide, 0.5 * low),
            "flank": (0.5 * (half + top), low + 0.5 * high),
            "top": (0.0, low + high),
        },
    )
    return face
