"""Rubber mounts bonded between metal, nearly incompressible, rings about y: bonded edges are singular."""

import math

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest

Place = tuple[float, float]


def rubber_mount() -> list[DrawnCase]:
    """Return a conical mount that is pressed down and a flat ring that is pulled."""
    return [
        _mount("conical mount", ((14.0, 0.0), (40.0, 0.0), (32.0, 26.0), (10.0, 26.0)), 0.497, -1.0, 5.5),
        _mount("flat ring mount", ((12.0, 0.0), (34.0, 0.0), (34.0, 15.0), (12.0, 15.0)), 0.49, 0.6, 4.0),
    ]


def _mount(
    name: str, corners: tuple[Place, Place, Place, Place], poisson: float, stroke: float, size: float
) -> DrawnCase:
    """Return a mount between a fixed plate below and one above that is moved by a stroke."""
    first, second, third, fourth = corners
    face = outline((*first, "bore"), (*second, "base"), (*third, "side"), (*fourth, "plate"))
    rubber = Elastic(2.4 * (1.0 + poisson), poisson)
    wedges = [
        ((rubber, _opening(before, at, after)),)
        for before, at, after in zip(
            (fourth, first, second, third), corners, (second, third, fourth, first), strict=True
        )
    ]
    high = third[1]
    middle = (0.25 * sum(x for x, _ in corners), 0.5 * high)
    bulge = (0.5 * (second[0] + third[0]), 0.5 * high)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held={"base": {"x": 0.0, "y": 0.0}, "plate": {"x": 0.0, "y": stroke}},
        materials={"": rubber},
        corners=corners,
        exponent=weakest("axisymmetric", *wedges, sides=("clamped", "free")),
        levels=8,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("inside x", middle, "x"),
            displacement("inside y", (middle[0], 0.3 * high), "y"),
            mean_displacement("side x", "side", "x"),
            mean_displacement("bore x", "bore", "x"),
            Reading("push", "reaction", "reaction", {"boundary": "plate", "component": "y"}),
            section_force("base thrust", "base", "y"),
            stress("inside", middle, "yy"),
            stress("inside xy", (middle[0] + 5.0, 0.7 * high), "xy", "direct"),
            stress("base stress", (middle[0], 0.0), "yy"),
            *linearised("middle", (middle[0], 0.5 * high), (bulge[0] - 3.0, 0.5 * high), "yy"),
            stress("edge", second, "von_mises", singular=True),
            peak("nodal", "von_mises", singular=True),
            peak("direct", "first_principal", "direct", second, 6.0, singular=True),
            peak("gauss", "von_mises", "gauss", second, 6.0, singular=True),
        ),
    )


def _opening(before: Place, at: Place, after: Place) -> float:
    """Return the angle in degrees between the two sides of a corner."""
    sides = [math.atan2(end[1] - at[1], end[0] - at[0]) for end in (before, after)]
    turned = abs(math.degrees(sides[0] - sides[1])) % 360.0
    return min(turned, 360.0 - turned)
