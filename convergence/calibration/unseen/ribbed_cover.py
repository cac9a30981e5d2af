"""Covers with a rib whose feet are rounded, plane: heated from one side, or pressed between their ends."""

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

CLAMPED = weakest("plane_strain", ((Elastic(), 90.0),), sides=("clamped", "free"))


def ribbed_cover() -> list[DrawnCase]:
    """Return half a pressed cover on a roller end and half a thin one that is heated between walls."""
    return [
        _cover("pressed cover", (80.0, 10.0), (7.0, 30.0), 6.0, 8.5, heated=False),
        _cover("heated thin cover", (60.0, 5.0), (3.0, 22.0), 2.0, 6.0, heated=True),
    ]


def _cover(
    name: str,
    plate: tuple[float, float],
    rib: tuple[float, float],
    radius: float,
    size: float,
    *,
    heated: bool,
) -> DrawnCase:
    """Return half a cover; plate: half-width and thickness; rib: half-thickness and height."""
    wide, thick = plate
    half, high = rib
    reach = radius * (1.0 - 0.5**0.5)
    foot = (half + reach, thick + reach)
    share = ng.x / wide
    pressure = (0.0, 0.4 * (1.0 - share * share))
    at = half + 2.0 * radius
    end = {"y": 0.0, "x": 0.0} if heated else {"y": 0.0}
    return DrawnCase(
        name=name,
        kind="plane_strain",
        shape=_face(plate, rib, radius),
        size=size,
        held={"middle": {"x": 0.0}, "end": end},
        tractions={} if heated else {"below": pressure},
        materials={"": Elastic(205_000.0, 0.3, 12e-6)},
        temperature=90.0 * ng.exp(-ng.y / 9.0) if heated else None,
        corners=((wide, 0.0), (wide, thick)) if heated else (),
        exponent=CLAMPED if heated else None,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sag", (0.0, 0.0), "y"),
            displacement("crest x", (half, thick + high), "x"),
            mean_displacement("below mean", "below", "y"),
            Reading("plate turn", "rotation", "rotation", {"start": (at, 0.0), "end": (at, thick)}),
            reaction("middle pull", "middle", "x"),
            section_force("end force", "end", "y"),
            section_force("middle force", "middle", "x"),
            stress("foot", foot, "first_principal"),
            stress("below", (0.3 * wide, 0.0), "xx", "direct"),
            stress("crest", (0.0, thick + high), "yy"),
            stress("inside", (0.5 * wide, 0.6 * thick), "xx", "direct"),
            peak("nodal", "von_mises", near=foot, radius=radius + 3.0),
            peak("direct", "first_principal", "direct", foot, radius + 3.0),
            peak("gauss", "von_mises", "gauss", foot, radius + 3.0),
            *linearised("plate", (at, 0.0), (at, thick), "xx"),
        ),
    )


def _face(plate: tuple[float, float], rib: tuple[float, float], radius: float) -> Any:
    """Return the drawing."""
    wide, thick = plate
    half, high = rib
    pen = WorkPlane().LineTo(wide, 0.0).LineTo(wide, thick).LineTo(half + radius, thick)
    pen.Direction(-1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(half, thick + high)
    face = pen.LineTo(0.0, thick + high).Close().Face()
    name_edges(
        face,
        {
            "below": (0.5 * wide, 0.0),
            "end": (wide, 0.5 * thick),
            "middle": (0.0, 0.5 * thick),
            "crest": (0.5 * half, thick + high),
        },
    )
    return face
