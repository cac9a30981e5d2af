"""Solid lugs whose pin presses on half of the bore, half the thickness drawn; roots on rollers.

The half of the bore that is pressed is a face of its own: its pressure p0 cos or p0 cos^2 ends on its edges.
"""

import math
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.calibration.drawn_readings import (
    Place,
    displacement,
    linearised,
    mean_displacement,
    peak,
    reaction,
    section_force,
    stress,
)


def solid_lug() -> list[DrawnCase]:
    """Return a pulled lug, a short thick one with a bent pin, a padeye pulled aslant."""
    return [_pulled(), _short(), _padeye()]


def _pulled() -> DrawnCase:
    side, nose = (0.0, 13.0, 0.0), (22.0, 0.0, 0.0)
    return DrawnCase(
        name="lug of the davit arm, pulled",
        kind="solid",
        shape=_eye(10.0, 22.0, 50.0, 8.0),
        size=8.0,
        held={"root": {"x": 0.0}, "nose": {"y": 0.0}, "shank": {"y": 0.0}, "middle": {"z": 0.0}},
        tractions={"pressed": _pressure(90.0, 10.0, 1)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("top", (0.0, 22.0, 0.0), "y"),
            mean_displacement("bore opens", "pressed", "x"),
            reaction("nose force", "nose", "y"),
            section_force("nose section", "nose", "y"),
            stress("beside the bore", side, "xx"),
            stress("side direct", (0.0, 13.0, 8.0), "xx", "direct"),
            stress("nose stress", nose, "yy"),
            stress("shank", (-28.0, 13.0, 4.0), "xx"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("peak gauss", "von_mises", "gauss"),
            peak("crown peak", "yy", near=(22.0, 0.0, 4.0), radius=7.0),
            *linearised("ligament", (0.0, 10.5, 0.0), (0.0, 22.0, 0.0), "xx"),
        ),
    )


def _short() -> DrawnCase:
    """Return a lug whose pin bends and so presses harder towards the faces of the lug."""
    bent = 0.6 + 1.2 * (ng.z / 14.0) ** 2
    inner = (0.0, 14.0, 0.0)
    return DrawnCase(
        name="short clevis with a bent pin",
        kind="solid",
        shape=_eye(14.0, 25.0, 32.0, 14.0),
        size=8.6,
        held={"root": {"x": 0.0}, "nose": {"y": 0.0}, "shank": {"y": 0.0}, "middle": {"z": 0.0}},
        tractions={"pressed": _pressure(70.0 * bent, 14.0, 2)},
        materials={"": Elastic(young=110_000.0, poisson=0.34)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("nose", (25.0, 0.0, 0.0), "x"),
            displacement("inside v", (-8.0, 17.0, 6.0), "y"),
            mean_displacement("face", "outer", "z"),
            reaction("shank force", "shank", "y"),
            section_force("root force", "root", "x"),
            stress("side of the bore", inner, "xx"),
            stress("side at the face", (0.0, 14.0, 14.0), "xx", "direct"),
            stress("under the pin", (14.0, 0.0, 14.0), "xx"),
            stress("back of the bore", (-14.0, 0.0, 0.0), "yy"),
            peak("peak nodal", "first_principal"),
            peak("peak direct", "xx", "direct"),
            peak("peak gauss", "von_mises", "gauss"),
            *linearised("root", (-32.0, 0.0, 0.0), (-32.0, 25.0, 0.0), "xx"),
        ),
    )


def _padeye() -> DrawnCase:
    """Return a padeye pulled at 45 degrees, its base in a corner of two frictionless walls."""
    turn = math.radians(45.0)
    loaded = (9.0 * math.cos(turn), 9.0 * math.sin(turn), 0.0)
    toe = (-20.0, -22.0, 0.0)
    return DrawnCase(
        name="padeye pulled aslant",
        kind="solid",
        shape=_on_base(),
        size=12.0,
        held={"bottom": {"y": 0.0}, "wall": {"x": 0.0}, "middle": {"z": 0.0}},
        tractions={"pressed": _pressure(80.0, 9.0, 1, turn)},
        levels=6,
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("top", (0.0, 20.0, 0.0), "x"),
            displacement("heel", (40.0, -34.0, 0.0), "x"),
            mean_displacement("face", "outer", "x"),
            section_force("lifted", "bottom", "y"),
            section_force("shoved", "wall", "x"),
            stress("toe", toe, "yy"),
            stress("toe direct", toe, "first_principal", "direct"),
            stress("bore", (-loaded[0], loaded[1], 0.0), "von_mises"),
            stress("web", (8.0, -21.0, 3.0), "xy"),
            peak("peak nodal", "von_mises"),
            peak("peak direct", "first_principal", "direct"),
            peak("peak gauss", "von_mises", "gauss"),
            peak("fillet peak", "yy", near=toe, radius=10.0),
            *linearised("web", (-20.0, -20.0, 0.0), (20.0, -20.0, 0.0), "yy"),
        ),
    )


def _pressure(peak: Any, bore: float, power: int, turn: float = 0.0) -> tuple[Any, ...]:
    """Return the traction of a pin that pulls along `turn`: its peak times cos^power."""
    across = (ng.x / bore, ng.y / bore)
    share = across[0] * math.cos(turn) + across[1] * math.sin(turn)
    pressure = peak * share**power
    return (pressure * across[0], pressure * across[1], 0.0)


def _eye(bore: float, outer: float, length: float, height: float) -> Any:
    """Return the upper half of a lug about the origin, its root at x = -length."""
    pen = WorkPlane().MoveTo(-length, 0).LineTo(-bore, 0).Direction(0, 1).Arc(bore, -90).Arc(bore, -90)
    pen.LineTo(outer, 0).Direction(0, 1).Arc(outer, 90).LineTo(-length, outer)
    half = 0.5 * height
    return _named(
        pen.Close().Face().Extrude(height),
        {
            "root": (-length, 0.5 * outer, half),
            "nose": (0.5 * (bore + outer), 0.0, half),
            "shank": (-0.5 * (bore + length), 0.0, half),
            "pressed": (bore * 0.5**0.5, bore * 0.5**0.5, half),
            "middle": (-0.9 * length, 0.5 * outer, 0.0),
            "outer": (-0.9 * length, 0.5 * outer, height),
        },
    )


def _on_base() -> Any:
    pen = WorkPlane().MoveTo(-40, -50).LineTo(40, -50).LineTo(40, -34).LineTo(28, -34)
    pen.Direction(-1, 0).Arc(8, -90).LineTo(20, 0).Direction(0, 1).Arc(20, 90).Arc(20, 90).LineTo(-20, -26)
    plan = pen.Direction(0, -1).Arc(8, -90).LineTo(-40, -34).Close().Face()
    start = 9.0 * 0.5**0.5
    bore = WorkPlane().MoveTo(start, -start).Direction(1, 1).Arc(9, 180).Arc(9, 180).Face()
    return _named(
        (plan - bore).Extrude(7),
        {
            "bottom": (0.0, -50.0, 3.5),
            "wall": (-40.0, -42.0, 3.5),
            "middle": (0.0, -30.0, 0.0),
            "outer": (0.0, -30.0, 7.0),
            "pressed": (start, start, 3.5),
        },
    )


def _named(solid: Any, faces: dict[str, Place]) -> Any:
    for name, place in faces.items():
        solid.faces.Nearest(place).name = name
    return solid
