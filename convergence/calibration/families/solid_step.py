"""Stepped solid bars with a fillet at the step, bent or twisted, cut at planes of symmetry and antisymmetry.

Bent bars rest on thin diaphragms at their ends, planes of antisymmetry: no edge is clamped.
"""

import ngsolve as ng
from netgen.occ import Axes, Axis, Box, Cylinder, Pnt, Revolve, WorkPlane, X, Y, Z

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def solid_step() -> list[DrawnCase]:
    """Return a round pin in bending, a shaft on a square base in torsion, a flat bar bent across."""
    return [_bent_pin(), _twisted_shaft(), _flat_bar()]


def _bent_pin() -> DrawnCase:
    """Return a quarter of a round pin: x = 0 is a plane of symmetry, y = 0 the neutral one."""
    pen = WorkPlane(Axes((0, 0, 0), -Y, X)).LineTo(20, 0).LineTo(20, 20)
    pen.LineTo(18, 20).Direction(-1, 0).Arc(6, -90).LineTo(12, 52).LineTo(0, 52)
    shape = Revolve(pen.Close().Face(), Axis(Pnt(0, 0, 0), Z), 90)
    shape.faces.Min(X).name, shape.faces.Min(Y).name = "middle", "neutral"
    shape.faces.Min(Z).name, shape.faces.Max(Z).name = "root", "end"
    shape.faces.Nearest((20.0 * 0.5**0.5, 20.0 * 0.5**0.5, 10.0)).name = "collar"
    toe, crown = (0.0, 12.0, 28.0), (0.0, 20.0, 10.0)
    return DrawnCase(
        name="stepped pin under a strap",
        kind="solid",
        shape=shape,
        size=10.8,
        held={
            "middle": {"x": 0.0},
            "neutral": {"x": 0.0, "z": 0.0},
            "root": {"z": 0.0},
            "end": {"x": 0.0, "y": 0.0},
        },
        tractions={"collar": (0.0, 5.0, 0.0)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sag at the step", (0.0, 0.0, 20.0), "y"),
            displacement("inside w", (5.0, 6.0, 35.0), "z"),
            mean_displacement("root sinks", "root", "y"),
            section_force("root force", "root", "z"),
            section_force("shear of the neutral plane", "neutral", "z"),
            stress("toe", toe, "zz"),
            stress("toe direct", toe, "zz", "direct"),
            stress("shaft", (0.0, 12.0, 38.0), "first_principal"),
            stress("collar", crown, "zz"),
            stress("inside", (4.0, 9.0, 18.0), "von_mises", "direct"),
            peak("peak nodal", "von_mises", near=toe, radius=15.0),
            peak("peak direct", "zz", "direct", toe, 15.0),
            peak("peak gauss", "first_principal", "gauss", toe, 15.0),
            *linearised("section", (0.0, 0.0, 27.0), (0.0, 12.0, 27.0), "zz"),
        ),
    )


def _twisted_shaft() -> DrawnCase:
    """Return a quarter of a shaft on a square base; in torsion all three planes are antisymmetric."""
    quarter = Box(Pnt(0, 0, 0), Pnt(30, 30, 60))
    joined = Box(Pnt(0, 0, 0), Pnt(22, 22, 16)) + Cylinder(Pnt(0, 0, 0), Z, r=12, h=52) * quarter
    foot = [edge for edge in joined.edges if abs(edge.center.z - 16.0) < 1e-6 and _is_arc(edge.center)]
    shape = joined.MakeFillet(foot, 6.0)
    shape.faces.Min(X).name, shape.faces.Min(Y).name = "plane_x", "plane_y"
    shape.faces.Min(Z).name, shape.faces.Max(Z).name = "base", "end"
    toe, shaft = (12.0, 0.0, 23.5), (12.0, 0.0, 36.0)
    return DrawnCase(
        name="shaft on a square base in torsion",
        kind="solid",
        shape=shape,
        size=13.0,
        held={
            "plane_x": {"y": 0.0, "z": 0.0},
            "plane_y": {"x": 0.0, "z": 0.0},
            "base": {"x": 0.0, "y": 0.0},
        },
        tractions={"end": (-120.0 * ng.y / 12.0, 120.0 * ng.x / 12.0, 0.0)},
        materials={"": Elastic(poisson=0.28)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("turn of the base", (22.0, 0.0, 16.0), "y"),
            displacement("warping", (18.0, 9.0, 16.0), "z"),
            displacement("turn of the shaft", (12.0, 0.0, 36.0), "y"),
            section_force("base force", "base", "x"),
            section_force("plane force", "plane_y", "z"),
            section_force("section", "base", "y"),
            stress("toe", toe, "yz"),
            stress("toe direct", toe, "first_principal", "direct"),
            stress("shaft", shaft, "yz"),
            stress("inside", (10.0, 8.0, 10.0), "von_mises"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("peak gauss", "von_mises", "gauss"),
            linearised("base", (0.0, 0.0, 14.0), (22.0, 0.0, 14.0), "yz")[0],
        ),
    )


def _flat_bar() -> DrawnCase:
    """Return a quarter of a flat bar of two widths, bent across: z = 0 is the neutral plane."""
    pen = WorkPlane().LineTo(60, 0).LineTo(60, 12).LineTo(36, 12).Direction(-1, 0).Arc(8, -90)
    face = pen.LineTo(28, 28).LineTo(0, 28).Close().Face()
    shape = face.Extrude(9)
    shape.faces.Min(X).name, shape.faces.Max(X).name = "root", "end"
    shape.faces.Min(Y).name, shape.faces.Min(Z).name = "middle", "neutral"
    shape.faces.Max(Z).name = "upper"
    toe, fillet = (40.0, 12.0, 9.0), (31.0, 14.0, 9.0)
    return DrawnCase(
        name="bracket arm of two widths, bent across",
        kind="solid",
        shape=shape,
        size=9.5,
        held={
            "root": {"x": 0.0},
            "middle": {"y": 0.0},
            "neutral": {"x": 0.0, "y": 0.0},
            "end": {"y": 0.0, "z": 0.0},
        },
        tractions={"upper": (0.0, 0.0, 1.5 * (1.0 - ng.x / 60.0))},
        materials={"": Elastic(young=70_000.0, poisson=0.33)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("root lifts", (0.0, 0.0, 9.0), "z"),
            displacement("wing", (14.0, 28.0, 0.0), "z"),
            mean_displacement("end turns", "end", "x"),
            section_force("neutral force", "neutral", "x"),
            section_force("section", "root", "x"),
            stress("toe", toe, "xx"),
            stress("toe direct", toe, "von_mises", "direct"),
            stress("arm", (45.0, 0.0, 9.0), "xx"),
            stress("wing corner", (14.0, 20.0, 9.0), "xx", "direct"),
            stress("across", (12.0, 0.0, 9.0), "yy"),
            peak("peak nodal", "xx", near=fillet, radius=10.0),
            peak("peak direct", "von_mises", "direct", fillet, 10.0),
            peak("peak gauss", "first_principal", "gauss", fillet, 10.0),
            *linearised("thickness", (30.0, 0.0, 0.0), (30.0, 0.0, 9.0), "xx"),
        ),
    )


def _is_arc(centre: Pnt) -> bool:
    """Return whether an edge's centre lies inside the square base."""
    return bool(1.0 < centre.x < 21.0 and 1.0 < centre.y < 21.0)
