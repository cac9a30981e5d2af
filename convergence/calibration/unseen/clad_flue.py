"""Flue pipes of two metals, heated, rings about y: bonded interfaces that end on a free face (Bogy 1971)."""

from typing import Any

import ngsolve as ng
from netgen.occ import Glue, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest

STEEL = Elastic(200_000.0, 0.3, 12e-6)
ALLOY = Elastic(70_000.0, 0.33, 24e-6)
CERAMIC = Elastic(310_000.0, 0.22, 7e-6)


def clad_flue() -> list[DrawnCase]:
    """Return a steel pipe in alloy and a thin ceramic lining in steel, both half as long as they are."""
    return [
        _flue("steel pipe in alloy", (20.0, 27.0, 40.0), 60.0, 7.0, ("steel", "alloy"), 120.0),
        _flue("ceramic lining", (24.0, 27.0, 36.0), 45.0, 5.5, ("ceramic", "steel"), 90.0),
    ]


def _flue(
    name: str,
    radii: tuple[float, float, float],
    length: float,
    size: float,
    of: tuple[str, str],
    heat: float,
) -> DrawnCase:
    """Return the upper half; radii: bore, joint, outside; of: materials inside and outside."""
    bore, joint, outer = radii
    materials = {"steel": STEEL, "alloy": ALLOY, "ceramic": CERAMIC}
    corner = (joint, length)
    inside, outside = materials[of[0]], materials[of[1]]
    radius = 0.5 * (joint - bore)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=_shape(radii, length, of),
        size=size,
        held={"inner_cut": {"y": 0.0}, "outer_cut": {"y": 0.0}},
        materials={of[0]: inside, of[1]: outside},
        temperature=heat * (1.0 - 0.5 * ng.x / outer),
        corners=(corner,),
        exponent=weakest("axisymmetric", ((inside, 90.0), (outside, 90.0))),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("bore end", (bore, length), "x"),
            displacement("outside end", (outer, length), "y"),
            mean_displacement("bore", "bore", "x"),
            Reading("end turn", "rotation", "rotation", {"start": (bore, length), "end": (outer, length)}),
            section_force("inner pull", "inner_cut", "y"),
            section_force("outer pull", "outer_cut", "y"),
            stress("bore hoop", (bore, 0.0), "zz"),
            stress("outside hoop", (outer, 0.3 * length), "zz", "direct"),
            Reading("inner mean", "point_stress", "mean_stress", {"region": of[0], "component": "yy"}),
            *linearised("outer", (joint + 0.2, 0.7 * length), (outer, 0.7 * length), "yy"),
            peak("nodal", "von_mises", near=corner, radius=radius + 2.0, singular=True),
            peak("direct", "first_principal", "direct", corner, radius + 2.0, singular=True),
            peak("gauss", "von_mises", "gauss", corner, radius + 2.0, singular=True),
        ),
    )


def _shape(radii: tuple[float, float, float], length: float, of: tuple[str, str]) -> Any:
    """Return the drawing."""
    bore, joint, outer = radii
    parts = []
    for start, end, material, label in ((bore, joint, of[0], "inner"), (joint, outer, of[1], "outer")):
        part = WorkPlane().MoveTo(start, 0.0).Rectangle(end - start, length).Face()
        part.name = material
        middle = 0.5 * (start + end)
        name_edges(part, {f"{label}_cut": (middle, 0.0), f"{label}_end": (middle, length)})
        parts.append(part)
    shape = Glue(parts)
    name_edges(shape, {"bore": (bore, 0.5 * length), "outside": (outer, 0.5 * length)})
    return shape
