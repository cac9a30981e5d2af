"""Solid blocks with a hole or a cavity, an eighth drawn: stress that changes through the thickness."""

from typing import Any

from netgen.occ import Axes, Axis, Box, Cylinder, Dir, Ellipsoid, Pnt, Sphere, X, Y, Z

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.calibration.drawn_readings import (
    Place,
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)

HELD = {"middle_x": {"x": 0.0}, "middle_y": {"y": 0.0}, "middle_z": {"z": 0.0}}


def solid_hole() -> list[DrawnCase]:
    """Return a thick plate with a through hole and blocks with a round and a flat cavity."""
    return [_base_plate(), _blowhole(), _flat_void()]


def _base_plate() -> DrawnCase:
    shape = Box(Pnt(0, 0, 0), Pnt(60, 40, 12)) - Cylinder(Pnt(0, 0, -1), Z, r=10, h=14)
    middle, rim = (0.0, 10.0, 0.0), (0.0, 10.0, 12.0)
    return DrawnCase(
        name="thick base plate with a bolt hole",
        kind="solid",
        shape=_named(shape),
        size=12.0,
        held=HELD,
        tractions={"end_x": (100.0, 0.0, 0.0)},
        levels=6,
        readings=(
            *_common("x", (23.1, 17.3, 5.7)),
            stress("hole middle", middle, "xx"),
            stress("hole rim", rim, "xx", "direct"),
            stress("thickness stress", middle, "zz"),
            stress("far", (41.0, 22.0, 12.0), "von_mises"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("peak gauss", "xx", "gauss"),
            peak("side peak", "von_mises", near=(10.0, 0.0, 0.0), radius=6.0),
            *linearised("ligament", middle, (0.0, 40.0, 0.0), "xx"),
        ),
    )


def _blowhole() -> DrawnCase:
    cavity = Sphere(Pnt(0, 0, 0), 9).Rotate(Axis((0, 0, 0), Dir(1, 1, 0)), 90)  # its poles outside
    shape = Box(Pnt(0, 0, 0), Pnt(30, 30, 40)) - cavity
    side, pole = (9.0, 0.0, 0.0), (0.0, 0.0, 9.0)
    return DrawnCase(
        name="round blowhole in a cast block",
        kind="solid",
        shape=_named(shape),
        size=11.0,
        held=HELD,
        tractions={"end_z": (0.0, 0.0, 80.0), "end_y": (0.0, -30.0, 0.0)},
        materials={"": Elastic(young=170_000.0, poisson=0.275)},
        levels=6,
        readings=(
            *_common("z", (13.2, 11.9, 14.1)),
            stress("at the cavity", side, "zz"),
            stress("other side", (0.0, 9.0, 0.0), "zz", "direct"),
            stress("pole", pole, "xx"),
            stress("inside", (16.0, 7.0, 5.0), "von_mises"),
            peak("peak nodal", "zz"),
            peak("peak direct", "von_mises", "direct"),
            peak("peak gauss", "first_principal", "gauss"),
            peak("pole peak", "von_mises", near=pole, radius=4.0),
            *linearised("ligament", side, (30.0, 0.0, 0.0), "zz"),
        ),
    )


def _flat_void() -> DrawnCase:
    void = Ellipsoid(Axes((0, 0, 0), X, Y), 11.0, 9.0, 5.5)
    tip = (11.0, 0.0, 0.0)
    return DrawnCase(
        name="flat void in a forged pin",
        kind="solid",
        shape=_named(Box(Pnt(0, 0, 0), Pnt(30, 26, 20)) - void),
        size=10.3,
        held=HELD,
        tractions={"end_z": (0.0, 0.0, 60.0)},
        levels=6,
        readings=(
            *_common("z", (17.0, 8.0, 11.0)),
            stress("tip", tip, "zz"),
            stress("long side", (0.0, 9.0, 0.0), "zz", "direct"),
            stress("flat of the void", (0.0, 0.0, 5.5), "xx"),
            stress("above", (14.0, 6.0, 8.0), "first_principal", "direct"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "zz", "direct"),
            peak("peak gauss", "first_principal", "gauss"),
            *linearised("ligament", tip, (30.0, 0.0, 0.0), "zz"),
        ),
    )


def _named(shape: Any) -> Any:
    for axis, name in ((X, "x"), (Y, "y"), (Z, "z")):
        shape.faces.Min(axis).name = f"middle_{name}"
        shape.faces.Max(axis).name = f"end_{name}"
    return shape


def _common(pulled: str, inside: Place) -> tuple[Reading, ...]:
    """Return what all cases are read for."""
    across = "y" if pulled == "x" else "x"
    return (
        Reading("energy", "energy", "energy"),
        displacement("inside u", inside, across),
        mean_displacement("side", f"end_{across}", across),
        section_force("ligament force", f"middle_{pulled}", pulled),
        section_force("end force", f"end_{pulled}", pulled),
    )
