"""Rings glued to the side of a rigid collar, free above its edge: a held inner corner that is a circle.

Near the corner the ring is in plane strain. The weakest exponent is that of the clamped-free corner (Williams
1952; `convergence.corners.williams`): 0.28 to 0.37 at openings of 240 to 300 degrees. Energies and
displacements converge with an order of twice it, below 1.
"""

import math

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_readings import (
    displacement,
    held_corner_readings,
    mean_displacement,
    section_force,
    stress,
)
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
BRONZE, RUBBER = Elastic(young=110_000.0, poisson=0.34), Elastic(young=6.0, poisson=0.45)


def glued_sleeve() -> list[DrawnCase]:
    """Return four rings; x is the radius, the corner lies at y = 0, the glue below it."""
    return [
        _case(
            "seal ring pulled off its collar",
            270.0,
            RUBBER,
            (24.0, 18.0, 16.0, 20.0, 13.0),
            4.9,
            {"outer": (0.0, 0.12)},
        ),
        _case(
            "sleeve under pressure from inside",
            240.0,
            BRONZE,
            (30.0, 22.0, 12.0, 30.0, 11.0),
            5.6,
            {"inner": (35.0, 12.0)},
        ),
        _case(
            "hub pressed down by its cap",
            300.0,
            Elastic(),
            (36.0, 14.0, 20.0, 22.0, 12.0),
            5.2,
            {"outer": (-15.0, 0.0)},
            cap=-0.01,
        ),
        _case(
            "drum pressed on its rim",
            255.0,
            Elastic(young=70_000.0, poisson=0.33),
            (40.0, 30.0, 24.0, 16.0, 20.0),
            6.4,
            {"top": (4.0, -9.0)},
        ),
    ]


def _case(
    name: str,
    opening: float,
    material: Elastic,
    sizes: tuple[float, float, float, float, float],
    size: float,
    tractions: dict[str, tuple[float, ...]],
    *,
    cap: float | None = None,
) -> DrawnCase:
    """Return a ring; sizes: radius of the collar, width, height of glue, that above, length of free side.

    `cap` moves the top along the axis.
    """
    radius, width, glued, above, free = sizes
    turn = math.radians(opening - 90.0)
    corner, tip = (radius, 0.0), (radius + free * math.cos(turn), free * math.sin(turn))
    low, high = (radius + width, -glued), (radius + width, above)
    face = outline(
        (radius, -glued, "glue"),
        (*low, "lower"),
        (*high, "outer"),
        (tip[0], above, "top"),
        (*tip, "inner"),
        (*corner, "free"),
    )
    held = {"glue": {"x": 0.0, "y": 0.0}} | ({} if cap is None else {"top": {"y": cap}})
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held=held,
        tractions=tractions,
        materials={"": material},
        corners=(corner, tip, (tip[0], above), (radius, -glued), low, high),
        exponent=weakest_exponent(opening, ("clamped", "free"), kappa=3.0 - 4.0 * material.poisson),
        readings=(
            *_whole(tip, low, high),
            *_fields(radius, width, above),
            *held_corner_readings(corner, 0.7 * glued, "xx"),
        ),
    )


def _whole(tip: Place, low: Place, high: Place) -> tuple[Reading, ...]:
    return (
        Reading("energy", "energy", "energy"),
        displacement("tip x", tip, "x"),
        displacement("tip y", tip, "y"),
        mean_displacement("outer x", "outer", "x"),
        mean_displacement("free y", "free", "y"),
        Reading("turn", "rotation", "rotation", {"start": low, "end": high}),
        section_force("glue force", "glue", "y"),
        Reading("held", "reaction", "reaction", {"boundary": "glue", "component": "x"}),
    )


def _fields(radius: float, width: float, above: float) -> tuple[Reading, ...]:
    line = {"start": (radius, 0.4 * above), "end": (radius + width, 0.4 * above), "component": "yy"}
    ahead, inside = (radius + 0.2 * width, 0.15 * above), (radius + 0.55 * width, 0.1 * above)
    return (
        stress("by corner", ahead, "von_mises"),
        stress("outer hoop", (radius + width, 0.0), "zz"),
        stress("inside", inside, "von_mises", "direct"),
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
