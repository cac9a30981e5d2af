"""Bars held in jaws along part of their sides: a clamped side ends on a straight one, exponent 1/2."""

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


def jaw_grip() -> list[DrawnCase]:
    """Return a bar pulled out of both jaws and one that is bent over a short jaw."""
    return [
        _bar("bar pulled from its jaws", 14.0, (35.0, 100.0), 7.0, (60.0, 0.0), Elastic()),
        _bar("tongue bent over its jaw", 20.0, (24.0, 80.0), 8.0, (0.0, -5.0), Elastic(70_000.0, 0.33)),
    ]


def _bar(
    name: str,
    half: float,
    lengths: tuple[float, float],
    size: float,
    load: tuple[float, float],
    material: Elastic,
) -> DrawnCase:
    """Return a bar; lengths: of the jaws, of the whole."""
    jaw, length = lengths
    face = outline(
        (0.0, -half, "back"),
        (jaw, -half, "low_jaw"),
        (length, -half, "low"),
        (length, half, "end"),
        (jaw, half, "top"),
        (0.0, half, "jaw"),
    )
    share = ng.y / half
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=face,
        size=size,
        held={"low_jaw": {"x": 0.0, "y": 0.0}, "jaw": {"x": 0.0, "y": 0.0}},
        tractions={"end": (load[0], load[1] * (1.0 - share * share))},
        materials={"": material},
        corners=((jaw, half), (jaw, -half), (0.0, half), (0.0, -half)),
        exponent=0.5,
        readings=_readings(half, lengths),
    )


def _readings(half: float, lengths: tuple[float, float]) -> tuple[Reading, ...]:
    """Return what is read."""
    jaw, length = lengths
    tip = (jaw, half)
    return (
        Reading("energy", "energy", "energy"),
        displacement("end x", (length, half), "x"),
        displacement("end y", (length, half), "y"),
        mean_displacement("back", "back", "x"),
        Reading("end turn", "rotation", "rotation", {"start": (length, -half), "end": (length, half)}),
        section_force("jaw pull", "jaw", "x"),
        section_force("jaw push", "jaw", "y"),
        stress("middle", (jaw, 0.0), "xx"),
        stress("bar", (0.6 * length, 0.7 * half), "xx", "direct"),
        stress("inside", (0.5 * jaw, 0.3 * half), "von_mises"),
        *linearised("bar", (jaw + half, -half), (jaw + half, half), "xx"),
        stress("jaw end", tip, "xx", singular=True),
        peak("nodal", "von_mises", singular=True),
        peak("direct", "first_principal", "direct", tip, 0.6 * half, singular=True),
        peak("gauss", "von_mises", "gauss", tip, 0.6 * half, singular=True),
    )
