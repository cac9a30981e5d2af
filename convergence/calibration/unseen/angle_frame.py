"""Frames of sheet with a sharp inner corner of 270 degrees, welded to a wall over their post."""

import ngsolve as ng

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    reaction,
    section_force,
    sharp_readings,
    stress,
)
from convergence.calibration.exponents import weakest


def angle_frame() -> list[DrawnCase]:
    """Return a frame that hangs a load and a stocky one pushed sideways."""
    return [
        _frame("frame that hangs a load", (90.0, 70.0), (18.0, 24.0), Elastic(), 9.0, (0.0, -6.0)),
        _frame(
            "stocky frame pushed sideways",
            (60.0, 64.0),
            (30.0, 20.0),
            Elastic(69_000.0, 0.33),
            8.0,
            (8.0, 1.0),
        ),
    ]


def _frame(
    name: str,
    lengths: tuple[float, float],
    widths: tuple[float, float],
    material: Elastic,
    size: float,
    load: tuple[float, float],
) -> DrawnCase:
    """Return a frame; lengths: reach, height; widths: of the beam and of the post."""
    reach, high = lengths
    beam, post = widths
    inner = (post, high - beam)
    face = outline(
        *((0.0, 0.0, "back"), (post, 0.0, "wall"), (*inner, "post"), (reach, high - beam, "below")),
        *((reach, high, "end"), (0.0, high, "top")),
    )
    share = (ng.y - high + beam) / beam
    wall = weakest("plane_stress", ((material, 90.0),), sides=("clamped", "free"))
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=face,
        size=size,
        held={"wall": {"x": 0.0, "y": 0.0}},
        tractions={"end": tuple(part * (0.6 + 0.8 * share) for part in load)},
        materials={"": material},
        corners=(inner, (0.0, 0.0), (post, 0.0)),
        exponent=min(wall, weakest("plane_stress", ((material, 270.0),))),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("tip y", (reach, high), "y"),
            displacement("knee x", (0.0, high), "x"),
            mean_displacement("end", "end", "x"),
            Reading(
                "end turn", "rotation", "rotation", {"start": (reach, high - beam), "end": (reach, high)}
            ),
            reaction("wall push", "wall", "x"),
            section_force("wall force", "wall", "y"),
            section_force("wall shear", "wall", "x"),
            stress("back", (0.0, 0.5 * high), "yy"),
            stress("top", (0.6 * reach, high), "xx", "direct"),
            stress("inside", (0.5 * (post + reach), high - 0.3 * beam), "von_mises"),
            *linearised("post", (0.0, 0.4 * high), (post, 0.4 * high), "yy"),
            *sharp_readings("corner", inner, 8.0),
        ),
    )
