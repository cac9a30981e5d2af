"""Webs of the arm with several lightening holes close to each other, in shear and in bending."""

from typing import Any

import ngsolve as ng
from netgen.occ import Rectangle, WorkPlane

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

Place = tuple[float, float]


def pierced_web() -> list[DrawnCase]:
    """Return a web with three holes in shear, and half a web with two slots between rollers, bent."""
    return [_holes(), _slots()]


def _holes() -> DrawnCase:
    """A web whose three holes grow smaller towards the tip, built in at one end."""
    shape = Rectangle(140.0, 50.0).Face()
    for x, y, radius in ((32.0, 25.0, 15.0), (75.0, 23.0, 11.0), (110.0, 27.0, 8.0)):
        shape = shape - _slot((x, y), radius, 0.0)
    name_edges(shape, {"root": (0.0, 25.0), "tip": (140.0, 25.0), "low": (70.0, 0.0), "top": (70.0, 50.0)})
    share = ng.y / 50.0
    ligament = (75.0, 12.0)
    return DrawnCase(
        name="three holes in shear",
        kind="plane_stress",
        shape=shape,
        size=13.0,
        held={"root": {"x": 0.0, "y": 0.0}},
        tractions={"tip": (0.0, -30.0 * share * (1.0 - share))},
        materials={"": Elastic(70_000.0, 0.33)},
        corners=((0.0, 0.0), (0.0, 50.0)),
        exponent=0.7583,
        readings=(
            *_common((140.0, 0.0), (53.0, 31.0)),
            mean_displacement("top", "top", "x"),
            Reading("tip turn", "rotation", "rotation", {"start": (140.0, 0.0), "end": (140.0, 50.0)}),
            section_force("tip force", "tip", "y"),
            reaction("root force", "root", "y"),
            stress("hole", ligament, "xx"),
            stress("post", (94.0, 25.0), "xy", "direct"),
            *_peaks(ligament, 10.0),
            stress("root corner", (0.0, 50.0), "xx", singular=True),
            peak("root peak", "von_mises", near=(0.0, 0.0), radius=10.0, singular=True),
            *linearised("tee", (32.0, 0.0), (32.0, 10.0), "xx"),
        ),
    )


def _slots() -> DrawnCase:
    """Half a web with two upright slots, pressed from above, on rollers at its end and middle."""
    shape = Rectangle(90.0, 44.0).Face() - _slot((24.0, 22.0), 7.0, 12.0) - _slot((60.0, 22.0), 5.0, 16.0)
    name_edges(shape, {"middle": (0.0, 22.0), "end": (90.0, 22.0), "top": (45.0, 44.0), "low": (45.0, 0.0)})
    along = ng.x / 90.0
    crown = (60.0, 35.0)
    return DrawnCase(
        name="two slots between rollers, bent",
        kind="plane_stress",
        shape=shape,
        size=10.0,
        held={"middle": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"top": (0.0, -4.0 * (1.0 - along * along))},
        readings=(
            *_common((0.0, 0.0), (42.0, 15.0)),
            mean_displacement("low", "low", "y"),
            Reading("end turn", "rotation", "rotation", {"start": (90.0, 0.0), "end": (90.0, 44.0)}),
            section_force("end force", "end", "x"),
            reaction("end hold", "end", "y"),
            stress("slot", crown, "first_principal"),
            stress("post", (42.0, 22.0), "xy", "direct"),
            *_peaks(crown, 9.0),
            *linearised("tee", (24.0, 0.0), (24.0, 8.9), "xx"),
        ),
    )


def _slot(centre: Place, radius: float, straight: float) -> Any:
    """Return an upright slot, or a circle where it has no straight sides, with nodes above and below."""
    x, y = centre
    pen = WorkPlane().MoveTo(x + radius, y - 0.5 * straight)
    for side in (1.0, -1.0):
        if straight:
            pen.LineTo(x + side * radius, y + side * 0.5 * straight)
        pen.Direction(0.0, side).Arc(radius, 90.0).Arc(radius, 90.0)
    return pen.Face()


def _common(tip: Place, inside: Place) -> tuple[Reading, ...]:
    return (
        Reading("energy", "energy", "energy"),
        displacement("sag", tip, "y"),
        displacement("inside u", inside, "x"),
        stress("inside", inside, "von_mises"),
    )


def _peaks(at: Place, radius: float) -> tuple[Reading, ...]:
    return (
        peak("nodal", "von_mises", near=at, radius=radius),
        peak("direct", "first_principal", "direct", at, radius),
        peak("gauss", "xx", "gauss", at, radius),
    )
