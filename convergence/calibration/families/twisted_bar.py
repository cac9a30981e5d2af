"""Solid bars of sections that are not round, twisted or sagging: no edge or notch, bending and torsion only.

Cut at planes of symmetry and antisymmetry; loads that are tangential to the end faces vanish across the rim.
"""

from typing import Any

import ngsolve as ng
from netgen.occ import Axes, WorkPlane, X, Y, Z

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)

TWISTED = {"min_x": {"y": 0.0, "z": 0.0}, "min_y": {"x": 0.0, "z": 0.0}, "min_z": {"x": 0.0, "y": 0.0}}


def twisted_bar() -> list[DrawnCase]:
    """Return a flat bar in torsion, a rod turned at its flats, an elliptic bar that sags."""
    return [_flat_bar(), _spanner_flats(), _sagging()]


def _flat_bar() -> DrawnCase:
    """Return a quarter of a rectangular bar, twisted at its end."""
    width, height, length = 18.0, 8.0, 45.0
    shear = 400.0
    over, up = ng.x / width, ng.y / height
    turning = (-shear * up * (1.0 - over**2) / height, shear * over * (1.0 - up**2) / width, 0.0)
    middle, edge = (0.0, height, 10.0), (0.0, height, 0.0)
    return DrawnCase(
        name="flat bar in torsion",
        kind="solid",
        shape=_bar(WorkPlane().Rectangle(width, height).Face(), length),
        size=6.3,
        held=TWISTED,
        tractions={"max_z": turning},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("turn", (width, 0.0, 30.0), "y"),
            displacement("warping", (13.0, 6.0, 18.0), "z"),
            displacement("end warping", (width, height, length), "z"),
            mean_displacement("flank", "max_x", "y"),
            reaction("root force", "min_z", "x"),
            section_force("plane force", "min_y", "z"),
            section_force("root section", "min_z", "y"),
            stress("middle of the flat", middle, "xz"),
            stress("narrow side", (width, 0.0, 10.0), "yz", "direct"),
            stress("end", (9.0, 4.0, length), "von_mises"),
            stress("inside", (11.3, 3.1, 21.7), "first_principal"),
            peak("peak nodal", "von_mises", near=edge, radius=30.0),
            peak("peak direct", "first_principal", "direct", edge, 30.0),
            peak("peak gauss", "von_mises", "gauss", edge, 30.0),
            *linearised("half width", (0.0, 0.0, 22.0), (width, 0.0, 22.0), "yz"),
        ),
    )


def _spanner_flats() -> DrawnCase:
    """Return a quarter of a rod of straight flanks and round sides, pressed on the flanks by a spanner."""
    half, round_, length = 9.0, 10.0, 50.0
    pen = WorkPlane().LineTo(half + round_, 0).Direction(0, 1).Arc(round_, 90).LineTo(0, round_)
    along = ng.z / length
    pressure = 120.0 * (ng.x / half) * (1.0 - (ng.x / half) ** 2) * 16.0 * along**2 * (1.0 - along) ** 2
    return DrawnCase(
        name="rod turned at its flats",
        kind="solid",
        shape=_bar(pen.Close().Face(), length),
        size=7.5,
        held=TWISTED,
        tractions={"max_y": (0.0, -pressure, 0.0)},
        materials={"": Elastic(young=190_000.0, poisson=0.29)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("turn", (half + round_, 0.0, length), "y"),
            displacement("warping", (12.0, 8.0, 15.0), "z"),
            mean_displacement("flat moves", "max_y", "x"),
            section_force("root force", "min_z", "x"),
            section_force("plane force", "min_y", "z"),
            section_force("plane section", "min_x", "y"),
            stress("flat", (0.0, round_, 8.0), "xz"),
            stress("side", (half + round_, 0.0, 8.0), "yz", "direct"),
            stress("under the spanner", (5.2, round_, 25.0), "yy"),
            stress("inside", (7.0, 6.0, 12.0), "von_mises"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("root peak", "von_mises", "gauss", (0.0, round_, 0.0), 8.0),
            *linearised("across", (0.0, 0.0, 10.0), (0.0, round_, 10.0), "xz"),
        ),
    )


def _sagging() -> DrawnCase:
    """Return a half of an elliptic bar under a shock of 60 g, on thin diaphragms at its ends."""
    flat, tall, length = 10.0, 15.0, 60.0
    right = WorkPlane().MoveTo(0, -2 * tall).Rectangle(2 * flat, 4 * tall).Face()
    section = WorkPlane(Axes((0, 0, 0), Z, Y)).Ellipse(tall, flat).Face() * right
    lower = (0.0, -tall, 0.0)
    return DrawnCase(
        name="elliptic bar that sags",
        kind="solid",
        shape=_bar(section, length),
        size=10.5,
        held={"min_x": {"x": 0.0}, "min_z": {"z": 0.0}, "max_z": {"x": 0.0, "y": 0.0}},
        body=(0.0, -7.7e-5 * 60.0, 0.0),
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("sag", (0.0, 0.0, 0.0), "y"),
            displacement("inside w", (4.0, 9.0, 41.0), "z"),
            displacement("side", (6.0, 7.0, 0.0), "x"),
            displacement("end turns", (0.0, -tall, length), "z"),
            section_force("end force", "max_z", "y"),
            stress("lowest", lower, "zz"),
            stress("lowest direct", lower, "zz", "direct"),
            stress("shear", (0.0, 2.0, 45.0), "yz"),
            stress("inside", (5.0, -8.0, 20.0), "von_mises"),
            peak("peak nodal", "first_principal"),
            peak("peak direct", "zz", "direct"),
            peak("end peak", "von_mises", "gauss", (0.0, 0.0, length), 9.0),
            *linearised("height", (0.0, 0.0, 20.0), (0.0, tall, 20.0), "zz"),
        ),
    )


def _bar(section: Any, length: float) -> Any:
    solid = section.Extrude(length)
    for axis, name in ((X, "x"), (Y, "y"), (Z, "z")):
        solid.faces.Min(axis).name, solid.faces.Max(axis).name = f"min_{name}", f"max_{name}"
    return solid
