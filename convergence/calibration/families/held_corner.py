"""Plates welded under a ledge that ends at their inner corner: one side of it clamped, the other free.

The weakest exponent is that of the clamped-free corner (Williams 1952; `convergence.corners.williams`):
0.41, 0.34, 0.29 and 0.29. Energies and displacements converge with an order of twice it, below 1. The other
end of the weld is a weaker singular corner; an eye has a finite peak.
"""

import math
from typing import Any

from netgen.occ import Circle

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, outline
from convergence.calibration.drawn_readings import (
    displacement,
    held_corner_readings,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.calibration.exponents import kappa
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
INNER = (0.0, 0.0)
EYE = 8.0
ALUMINIUM, PLASTIC = Elastic(young=70_000.0, poisson=0.33), Elastic(young=3_000.0, poisson=0.4)


def held_corner() -> list[DrawnCase]:
    """Return four plates; the inner corner is the origin, the weld lies along x, the plate below it."""
    return [_pulled(), _loaded(), _hung(), _shoved()]


def _pulled() -> DrawnCase:
    face, tip = _drawn(225.0, weld=34.0, free=30.0, left=58.0, depth=26.0)
    return _case(
        "lug plate pulled askew, 225 degrees",
        ("plane_strain", 225.0, Elastic()),
        (face, 10.1, tip, 34.0, 58.0, 26.0),
        {"left": (-20.0, -7.0)},
    )


def _loaded() -> DrawnCase:
    face, tip = _drawn(270.0, weld=44.0, free=36.0, left=30.0, depth=28.0)
    return _case(
        "davit foot loaded from above, 270 degrees",
        ("plane_stress", 270.0, ALUMINIUM),
        (face, 9.2, tip, 44.0, 30.0, 28.0),
        {"top": (6.0, -18.0)},
    )


def _hung() -> DrawnCase:
    """A fairlead of plastic, its weight many times that of the material."""
    face, tip = _drawn(270.0, weld=40.0, free=22.0, left=46.0, depth=34.0)
    return _case(
        "fairlead hung by its own weight, 270 degrees",
        ("plane_strain", 270.0, PLASTIC),
        (face, 13.0, tip, 40.0, 46.0, 34.0),
        {"bottom": (0.4, 0.0)},
        body=(0.0, -0.05),
    )


def _shoved() -> DrawnCase:
    face, tip = _drawn(315.0, weld=48.0, free=30.0, left=40.0, depth=30.0)
    return _case(
        "bracket shoved by a guide, 315 degrees",
        ("plane_stress", 315.0, Elastic()),
        (face, 9.7, tip, 48.0, 40.0, 30.0),
        {"top": (0.0, 9.0)},
        guide=0.02,
    )


def _case(
    name: str,
    model: tuple[DrawnKind, float, Elastic],
    drawing: tuple[Any, float, Place, float, float, float],
    tractions: dict[str, tuple[float, ...]],
    *,
    body: tuple[float, ...] | None = None,
    guide: float | None = None,
) -> DrawnCase:
    """Return a case; `guide` shifts the left side along x."""
    kind, opening, material = model
    face, size, tip, weld, left, depth = drawing
    moved = {} if guide is None else {"left": {"x": guide}}
    return DrawnCase(
        name=name,
        kind=kind,
        shape=face,
        size=size,
        held={"weld": {"x": 0.0, "y": 0.0}, **moved},
        tractions=tractions,
        materials={"": material},
        body=body,
        corners=(INNER, tip, (-left, tip[1]), (-left, -depth), (weld, -depth), (weld, 0.0)),
        exponent=weakest_exponent(opening, ("clamped", "free"), kappa=kappa(kind, material.poisson)),
        readings=(
            *_whole(tip, left, depth),
            *_fields(weld, depth),
            *_eye(left, depth),
            *held_corner_readings(INNER, 13.0, "yy"),
        ),
    )


def _drawn(opening: float, *, weld: float, free: float, left: float, depth: float) -> tuple[Any, Place]:
    """Return the plate with its eye, and the upper end of the corner's free side."""
    rise = math.radians(360.0 - opening)
    tip = (free * math.cos(rise), free * math.sin(rise))
    face = outline(
        (-left, tip[1], "top"),
        (-left, -depth, "left"),
        (weld, -depth, "bottom"),
        (weld, 0.0, "right"),
        (*INNER, "weld"),
        (*tip, "free"),
    )
    return face - Circle(_eye_at(left, depth), EYE).Face(), tip


def _eye_at(left: float, depth: float) -> Place:
    return -0.6 * left, -0.5 * depth


def _whole(tip: Place, left: float, depth: float) -> tuple[Reading, ...]:
    """Return energy, displacements, a rotation and forces: all converge slowly."""
    return (
        Reading("energy", "energy", "energy"),
        displacement("tip x", tip, "x"),
        displacement("tip y", tip, "y"),
        mean_displacement("left y", "left", "y"),
        mean_displacement("free x", "free", "x"),
        Reading("turn", "rotation", "rotation", {"start": (-left, tip[1]), "end": tip}),
        section_force("weld force", "weld", "y"),
        section_force("weld shear", "weld", "x"),
    )


def _fields(weld: float, depth: float) -> tuple[Reading, ...]:
    line = {"start": (0.25 * weld, 0.0), "end": (0.25 * weld, -depth), "component": "xx"}
    ahead, inside = (-0.2 * depth, -0.15 * depth), (0.4 * weld, -0.45 * depth)
    return (
        stress("by corner", ahead, "von_mises"),
        stress("weld stress", (0.55 * weld, 0.0), "yy"),
        stress("inside", inside, "von_mises", "direct"),
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )


def _eye(left: float, depth: float) -> tuple[Reading, ...]:
    eye, reach = _eye_at(left, depth), 1.4 * EYE
    return (
        peak("eye nodal", "von_mises", near=eye, radius=reach),
        peak("eye direct", "first_principal", "direct", eye, reach),
        peak("eye gauss", "von_mises", "gauss", eye, reach),
    )
