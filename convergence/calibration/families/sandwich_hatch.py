"""Hatch covers of steel faces on a soft core, bonded: weak singularities where an interface ends on an edge.

The exponents are those of bonded wedges (Bogy 1971; `convergence.corners.bonded`).
"""

import math

import ngsolve as ng
from netgen.occ import Glue, Rectangle, WorkPlane

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

STEEL = Elastic(210_000.0, 0.3, 12e-6)
CORE = Elastic(2_400.0, 0.36, 55e-6)
SKIN = Elastic(24_000.0, 0.28, 14e-6)


def sandwich_hatch() -> list[DrawnCase]:
    """Return half a heated cover on its bed, and a heated edge whose core ends in a bevel."""
    return [_cover(), _bevel()]


def _cover() -> DrawnCase:
    """Half a cover on a flat bed: steel below, a core, a thin skin above; heated and pressed."""
    length, low, high, top = 90.0, 5.0, 21.0, 24.0
    parts = []
    for name, bottom, roof in (("steel", 0.0, low), ("core", low, high), ("skin", high, top)):
        part = WorkPlane().MoveTo(0.0, bottom).Rectangle(length, roof - bottom).Face()
        part.name = name
        names = {
            f"{name}_middle": (0.0, 0.5 * (bottom + roof)),
            f"{name}_end": (length, 0.5 * (bottom + roof)),
        }
        name_edges(part, names | {f"{name}_top": (0.5 * length, roof), f"{name}_low": (0.5 * length, bottom)})
        parts.append(part)
    shape = Glue(parts)
    name_edges(shape, {"skin_top": (45.0, top), "steel_low": (45.0, 0.0)})
    return DrawnCase(
        name="heated cover on its bed",
        kind="plane_strain",
        shape=shape,
        size=7.5,
        held={f"{name}_middle": {"x": 0.0} for name in ("steel", "core", "skin")} | {"steel_low": {"y": 0.0}},
        tractions={"skin_top": (0.0, -3.0 * (1.0 - ng.x * ng.x / length**2))},
        temperature=35.0,
        materials={"steel": STEEL, "core": CORE, "skin": SKIN},
        corners=((length, low), (length, high)),
        exponent=weakest("plane_strain", ((STEEL, 90.0), (CORE, 90.0)), ((CORE, 90.0), (SKIN, 90.0))),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sag", (0.0, top), "y"),
            displacement("edge", (length, top), "x"),
            mean_displacement("skin sinks", "skin_top", "y"),
            Reading("end turn", "rotation", "rotation", {"start": (length, 0.0), "end": (length, top)}),
            reaction("skin pull", "skin_middle", "x"),
            section_force("core pull", "core_middle", "x"),
            stress("steel", (0.0, 0.0), "yy"),
            stress("core", (61.0, 13.0), "xy", "direct"),
            stress("skin", (33.0, top), "xx"),
            Reading("skin mean", "point_stress", "mean_stress", {"region": "skin", "component": "xx"}),
            peak("end gauss", "von_mises", "gauss", (length, high), 5.0, singular=True),
            peak("end nodal", "first_principal", near=(length, high), radius=5.0, singular=True),
            *linearised("core", (50.0, 5.2), (50.0, 20.8), "xy"),
        ),
    )


def _bevel() -> DrawnCase:
    """A quarter of a strip whose core ends in a bevel against steel, heated; symmetric about both axes."""
    half, thick, start, end = 80.0, 18.0, 34.0, 44.0
    whole = Rectangle(half, thick).Face()
    pen = WorkPlane().LineTo(end, 0.0).LineTo(start, thick).LineTo(0.0, thick)
    core = pen.Close().Face()
    steel = whole - core
    core.name, steel.name = "core", "steel"
    shape = Glue([core, steel])
    name_edges(
        shape,
        {
            "core_low": (20.0, 0.0),
            "steel_low": (62.0, 0.0),
            "middle": (0.0, 9.0),
            "end": (half, 9.0),
            "top": (60.0, thick),
        },
    )
    bevel = math.degrees(math.atan2(thick, end - start))
    return DrawnCase(
        name="heated core with a bevel",
        kind="plane_stress",
        shape=shape,
        size=7.0,
        held={"core_low": {"y": 0.0}, "steel_low": {"y": 0.0}, "middle": {"x": 0.0}},
        materials={"steel": STEEL, "core": CORE},
        temperature=60.0 * ng.exp(-ng.x * ng.x / 2500.0),
        corners=((start, thick), (end, 0.0)),
        exponent=weakest("plane_stress", ((CORE, bevel), (STEEL, 180.0 - bevel))),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("end", (half, 0.0), "x"),
            displacement("core top", (0.0, thick), "y"),
            mean_displacement("end mean", "end", "x"),
            Reading("end turn", "rotation", "rotation", {"start": (half, 0.0), "end": (half, thick)}),
            reaction("pull", "middle", "x"),
            section_force("thrust", "core_low", "y"),
            stress("core", (11.0, 7.0), "xx"),
            stress("steel", (53.0, 11.0), "von_mises", "direct"),
            stress("steel top", (50.0, thick), "xx"),
            Reading("core mean", "point_stress", "mean_stress", {"region": "core", "component": "yy"}),
            peak("bond nodal", "first_principal", near=(start, thick), radius=5.0, singular=True),
            peak("bond gauss", "von_mises", "gauss", (start, thick), 5.0, singular=True),
            *linearised("steel", (56.0, 0.0), (56.0, thick), "xx"),
        ),
    )
