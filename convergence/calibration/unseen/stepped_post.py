"""Posts on built-in feet with sharp steps, plane: corners of 270 degrees, and clamped ones at the foot."""

from typing import Any

import ngsolve as ng

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, outline
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest


def stepped_post() -> list[DrawnCase]:
    """Return a short post that is pushed aside and a slender one that is pressed askew."""
    return [
        _post("short post pushed aside", (40.0, 25.0), (22.0, 65.0), 9.0, "plane_stress", Elastic()),
        _post("slender post", (26.0, 40.0), (12.0, 100.0), 8.0, "plane_strain", Elastic(70_000.0, 0.33)),
    ]


def _post(
    name: str,
    foot: tuple[float, float],
    shaft: tuple[float, float],
    size: float,
    kind: DrawnKind,
    material: Elastic,
) -> DrawnCase:
    """Return a post; foot, shaft: width and height of its top; the shaft stands off the middle."""
    wide, low = foot
    thin, high = shaft
    left = 0.25 * (wide - thin)
    right = left + thin
    steps, feet = ((left, low), (right, low)), ((0.0, 0.0), (wide, 0.0))
    rise = (ng.y - low) / (high - low)
    free = weakest(kind, ((material, 270.0),))
    return DrawnCase(
        name=name,
        kind=kind,
        shape=_face(foot, shaft, left),
        size=size,
        held={"ground": {"x": 0.0, "y": 0.0}},
        tractions={"front": (2.0 * rise, 0.0), "top": (0.0, -20.0)},
        materials={"": material},
        corners=(*steps, *feet),
        exponent=min(free, weakest(kind, ((material, 90.0),), sides=("clamped", "free"))),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("top x", (left, high), "x"),
            displacement("top y", (right, high), "y"),
            mean_displacement("back", "back", "x"),
            Reading("top turn", "rotation", "rotation", {"start": (left, high), "end": (right, high)}),
            section_force("ground push", "ground", "x"),
            section_force("ground force", "ground", "y"),
            stress("middle", (0.5 * wide, 0.5 * low), "yy"),
            stress("shaft", (left + 0.8 * thin, 0.5 * (low + high)), "yy", "direct"),
            stress("ground", (0.5 * wide, 0.0), "yy"),
            *linearised("shaft", (left, low + thin), (right, low + thin), "yy"),
            stress("step", steps[0], "yy", singular=True),
            peak("nodal", "von_mises", singular=True),
            peak("direct", "first_principal", "direct", steps[0], 0.4 * thin, singular=True),
            peak("gauss", "von_mises", "gauss", steps[1], 0.4 * thin, singular=True),
        ),
    )


def _face(foot: tuple[float, float], shaft: tuple[float, float], left: float) -> Any:
    """Return the drawing; left: the left side of the shaft."""
    wide, low = foot
    thin, high = shaft
    right = left + thin
    return outline(
        (0.0, 0.0, "side"),
        (wide, 0.0, "ground"),
        (wide, low, "lee"),
        (right, low, "step"),
        (right, high, "back"),
        (left, high, "top"),
        (left, low, "front"),
        (0.0, low, "ledge"),
    )
