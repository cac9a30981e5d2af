"""Sleeves with a sharp step inside or outside, rings about the y axis: an inner corner of 270 degrees."""

from typing import Any

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


def stepped_sleeve() -> list[DrawnCase]:
    """Return a sleeve under pressure from inside and a slim one that is pulled."""
    bronze = Elastic(110_000.0, 0.34)
    return [
        _sleeve(
            "sleeve under pressure", (16.0, 22.0, 34.0), (14.0, 36.0), Elastic(), 6.0, "bore", (18.0, 0.0)
        ),
        _sleeve("slim sleeve pulled", (25.0, 28.0, 40.0), (9.0, 30.0), bronze, 5.0, "end", (0.0, 40.0)),
    ]


def _sleeve(
    name: str,
    radii: tuple[float, float, float],
    heights: tuple[float, float],
    material: Elastic,
    size: float,
    loaded: str,
    load: tuple[float, float],
) -> DrawnCase:
    """Return a sleeve; radii: bore, tube, collar; heights: of the collar, of all. It glides on its foot."""
    bore, tube, collar = radii
    step, high = heights
    corner = (tube, step)
    face = outline(
        *((bore, 0.0, "bore"), (collar, 0.0, "foot"), (collar, step, "rim"), (*corner, "shoulder")),
        *((tube, high, "outside"), (bore, high, "end")),
    )
    fades: Any = 1.0 - 0.5 * ng.y / high
    above = step + 0.4 * (high - step)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held={"foot": {"y": 0.0}},
        tractions={loaded: tuple(fades * part for part in load)},
        materials={"": material},
        corners=(corner,),
        exponent=weakest("axisymmetric", ((material, 270.0),)),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("end x", (bore, high), "x"),
            displacement("rim x", (collar, step), "x"),
            displacement("shoulder y", (collar, step), "y"),
            mean_displacement("end", "end", "y"),
            Reading("end turn", "rotation", "rotation", {"start": (bore, high), "end": (tube, high)}),
            reaction("foot", "foot", "y"),
            section_force("foot force", "foot", "y"),
            section_force("foot shear", "foot", "x"),
            stress("bore hoop", (bore, step), "zz"),
            stress("bore axial", (bore, above), "yy", "direct"),
            stress("inside", (0.5 * (tube + collar), 0.4 * step), "von_mises"),
            *linearised("tube", (bore, above), (tube, above), "yy"),
            *sharp_readings("corner", corner, 5.0),
        ),
    )
