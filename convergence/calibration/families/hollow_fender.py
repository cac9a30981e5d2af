"""Hollow fenders of rubber, nearly incompressible, without singular corners: degree 1 locks in bending."""

import ngsolve as ng
from netgen.occ import WorkPlane

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


def hollow_fender() -> list[DrawnCase]:
    """Return an arched fender that a boat presses, and a tube with flats that is blown up."""
    return [_arch(), _ring()]


def _arch() -> DrawnCase:
    """Half an arch on rollers, pressed on its crown."""
    outer, inner, foot = 34.0, 20.0, 14.0
    pen = WorkPlane().MoveTo(inner, 0.0).LineTo(outer, 0.0).LineTo(outer, foot).Direction(0.0, 1.0)
    for _ in range(2):
        pen.Arc(outer, 45.0)
    pen.LineTo(0.0, foot + inner).Direction(1.0, 0.0).Arc(inner, -90.0)
    face = pen.Close().Face()
    bend = outer * 0.5**0.5
    name_edges(
        face,
        {
            "base": (27.0, 0.0),
            "middle": (0.0, foot + 27.0),
            "crown": (outer * 0.3827, foot + outer * 0.9239),
            "inside": (inner * 0.7071, foot + inner * 0.7071),
        },
    )
    share = ng.x / bend
    return DrawnCase(
        name="arched fender under a boat",
        kind="plane_strain",
        shape=face,
        size=8.0,
        held={"base": {"y": 0.0}, "middle": {"x": 0.0}},
        tractions={"crown": (0.0, -0.2 * (1.0 - share * share) * (1.0 - share * share))},
        materials={"": Elastic(5.0, 0.495)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("crown sinks", (0.0, foot + outer), "y"),
            displacement("foot slides", (outer, 0.0), "x"),
            mean_displacement("inside", "inside", "x"),
            Reading("foot turn", "rotation", "rotation", {"start": (inner, 0.0), "end": (outer, 0.0)}),
            reaction("thrust", "middle", "x"),
            section_force("base force", "base", "y"),
            stress("crown inside", (0.0, foot + inner), "xx"),
            stress("haunch", (bend, foot + bend), "first_principal"),
            stress("within", (24.0, foot + 9.0), "von_mises", "direct"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "von_mises", "gauss"),
            *linearised("spring", (inner, foot), (outer, foot), "yy"),
        ),
    )


def _ring() -> DrawnCase:
    """A quarter of a tube with flats above and below, under pressure from inside."""
    outer, inner, flat = 30.0, 17.0, 8.0
    pen = WorkPlane().MoveTo(inner + flat, 0.0).LineTo(outer + flat, 0.0).Direction(0.0, 1.0)
    pen.Arc(outer, 45.0).Arc(outer, 45.0).LineTo(0.0, outer).LineTo(0.0, inner).LineTo(flat, inner)
    face = pen.Direction(1.0, 0.0).Arc(inner, -90.0).Close().Face()
    name_edges(
        face,
        {
            "side": (0.5 * (inner + outer) + flat, 0.0),
            "middle": (0.0, 0.5 * (inner + outer)),
            "top": (0.5 * flat, outer),
            "roof": (0.5 * flat, inner),
            "inside": (flat + 0.7071 * inner, 0.7071 * inner),
        },
    )
    normal = ng.specialcf.normal(2)
    blown = (-0.1 * normal[0], -0.1 * normal[1])
    return DrawnCase(
        name="tube fender with flats, blown up",
        kind="plane_strain",
        shape=face,
        size=7.5,
        held={"side": {"y": 0.0}, "middle": {"x": 0.0}},
        tractions={"roof": blown, "inside": blown},
        materials={"": Elastic(8.0, 0.49)},
        corners=((inner + flat, 0.0), (outer + flat, 0.0), (flat, inner), (flat, outer)),
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("crown", (0.0, outer), "y"),
            mean_displacement("inside", "inside", "y"),
            mean_displacement("top", "top", "y"),
            reaction("pull", "side", "y"),
            section_force("middle force", "middle", "x"),
            stress("crown inside", (0.0, inner), "xx"),
            stress("haunch", (flat + 0.7071 * outer, 0.7071 * outer), "first_principal"),
            stress("within", (flat + 17.0, 16.0), "von_mises", "direct"),
            peak("crown nodal", "von_mises", near=(0.0, inner), radius=10.0),
            peak("crown direct", "first_principal", "direct", (0.0, inner), 10.0),
            peak("crown gauss", "von_mises", "gauss", (0.0, inner), 10.0),
            *linearised("crown", (0.0, inner), (0.0, outer), "xx"),
        ),
    )
