"""Rubber wedges glued to one wall, nearly incompressible: two bonded edges of different angles."""

import math

import ngsolve as ng

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


def rubber_wedge() -> list[DrawnCase]:
    """Return a blunt wedge that is pressed and a sharp one that is rubbed along."""
    return [
        _wedge("blunt wedge pressed", (36.0, 20.0, 28.0), 0.497, 6.0, (0.0, -0.1)),
        _wedge("sharp wedge rubbed along", (44.0, 10.0, 24.0), 0.49, 5.5, (0.05, 0.0)),
    ]


def _wedge(
    name: str,
    lengths: tuple[float, float, float],
    poisson: float,
    size: float,
    load: tuple[float, float],
) -> DrawnCase:
    """Return a wedge; lengths: along the wall, height of its low and of its high side."""
    base, low, high = lengths
    lean = 6.0
    corners = ((0.0, 0.0), (base, 0.0), (base - lean, low), (0.0, high))
    face = outline(
        (*corners[0], "back"), (*corners[1], "wall"), (*corners[2], "front"), (*corners[3], "slope")
    )
    rubber = Elastic(3.0 * (1.0 + poisson), poisson)
    front = math.degrees(math.atan2(low, lean))
    share = ng.x / base
    bump = 4.0 * share * (1.0 - share)
    inside = (0.45 * base, 0.4 * low)
    return DrawnCase(
        name=name,
        kind="plane_strain",
        shape=face,
        size=size,
        held={"wall": {"x": 0.0, "y": 0.0}},
        tractions={"slope": (load[0] * bump, load[1] * bump)},
        materials={"": rubber},
        corners=corners[:2],
        exponent=weakest("plane_strain", ((rubber, 90.0),), ((rubber, front),), sides=("clamped", "free")),
        levels=8,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("crest x", corners[3], "x"),
            displacement("crest y", corners[3], "y"),
            mean_displacement("front", "front", "x"),
            Reading("slope turn", "rotation", "rotation", {"start": corners[2], "end": corners[3]}),
            section_force("wall push", "wall", "x"),
            section_force("wall force", "wall", "y"),
            stress("wall", (0.5 * base, 0.0), "yy"),
            stress("inside", inside, "von_mises", "direct"),
            stress("inside yy", inside, "yy"),
            *linearised("middle", (0.5 * base, 0.0), (0.5 * base, 0.9 * low), "xx"),
            stress("edge", corners[0], "yy", singular=True),
            peak("nodal", "von_mises", singular=True),
            peak("direct", "first_principal", "direct", corners[0], 7.0, singular=True),
            peak("gauss", "von_mises", "gauss", corners[0], 7.0, singular=True),
        ),
    )
