"""An angle bracket with a sharp inner corner, of openings of 225, 240, 270 and 300 degrees.

The weakest exponent is that of the free corner (Williams 1952; `convergence.corners.williams`): 0.674, 0.616,
0.544 and 0.512. The clamped ends have weaker singular corners of their own; an eye in the arm has a finite
peak.
"""

import math
from typing import Any

from netgen.occ import Circle, Glue

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, outline
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
INNER = (0.0, 0.0)
ALUMINIUM = Elastic(young=70_000.0, poisson=0.33)


def sharp_bracket() -> list[DrawnCase]:
    """Return four openings; the inner corner is the origin, the arm points along x, its inside upwards."""
    return [_knee(), _splayed(), _cranked(), _folded()]


def _knee() -> DrawnCase:
    """Half of a portal: the arm's end is its plane of symmetry."""
    length, depth = 110.0, 28.0
    face, outer = _drawn(270.0, (length, depth), (90.0, 32.0))
    middle = {"near": (length, -depth), "radius": 0.6 * depth}
    return _case(
        "portal knee",
        "plane_stress",
        270.0,
        (face, 12.0),
        {"leg_end": {"x": 0.0, "y": 0.0}, "arm_end": {"x": 0.0}},
        {"inner_arm": (0.0, -4.0)},
        Elastic(),
        ((-32.0, 90.0), (0.0, 90.0)),
        (
            *_common(length, depth, outer),
            Reading("thrust", "reaction", "reaction", {"boundary": "arm_end", "component": "x"}),
            Reading("midspan nodal", "peak_stress", "peak", {"component": "xx", **middle}),
            Reading("midspan gauss", "peak_stress", "peak", {"component": "xx", "way": "gauss", **middle}),
        ),
    )


def _splayed() -> DrawnCase:
    length, depth = 100.0, 30.0
    face, outer = _drawn(225.0, (length, depth), (70.0, 30.0), eye=(70.0, 5.0))
    return _case(
        "splayed leg of the davit",
        "plane_stress",
        225.0,
        (face, 15.0),
        {"leg_end": {"x": 0.0, "y": 0.0}},
        {"arm_end": (0.0, -9.0)},
        Elastic(),
        (*_leg_end(225.0, 70.0, 30.0), (length, 0.0), (length, -depth)),
        (
            *_common(length, depth, outer),
            Reading("leg mean", "point_stress", "mean_stress", {"region": "leg", "component": "xy"}),
            *_eye_peaks((70.0, -0.5 * depth), 5.0),
        ),
    )


def _cranked() -> DrawnCase:
    length, depth = 90.0, 24.0
    face, outer = _drawn(240.0, (length, depth), (60.0, 20.0), eye=(60.0, 3.0))
    return _case(
        "cranked bracket, both ends built in",
        "plane_strain",
        240.0,
        (face, 9.0),
        {"leg_end": {"x": 0.0, "y": 0.0}, "arm_end": {"x": 0.0, "y": 0.0}},
        {"inner_leg": (-6.0, 8.0)},
        ALUMINIUM,
        (*_leg_end(240.0, 60.0, 20.0), (length, 0.0), (length, -depth)),
        (
            *_common(length, depth, outer),
            Reading("shear of arm", "reaction", "reaction", {"boundary": "arm_end", "component": "y"}),
            *_eye_peaks((60.0, -0.5 * depth), 3.0),
        ),
    )


def _folded() -> DrawnCase:
    length, depth = 80.0, 20.0
    face, outer = _drawn(300.0, (length, depth), (70.0, 24.0), eye=(50.0, 6.0))
    return _case(
        "hook folded back",
        "plane_stress",
        300.0,
        (face, 7.0),
        {"leg_end": {"x": 0.0, "y": 0.0}},
        {"arm_end": (-30.0, -4.0)},
        Elastic(poisson=0.28),
        (*_leg_end(300.0, 70.0, 24.0), (length, 0.0), (length, -depth)),
        (
            *_common(length, depth, outer),
            Reading("root force", "resultant", "section_force", {"boundary": "leg_end", "component": "x"}),
            *_eye_peaks((50.0, -0.5 * depth), 6.0),
        ),
    )


def _case(
    name: str,
    kind: DrawnKind,
    opening: float,
    drawing: tuple[Any, float],
    held: dict[str, dict[str, float]],
    tractions: dict[str, tuple[float, ...]],
    material: Elastic,
    corners: tuple[Place, ...],
    readings: tuple[Reading, ...],
) -> DrawnCase:
    face, size = drawing
    return DrawnCase(
        name=name,
        kind=kind,
        shape=face,
        size=size,
        held=held,
        tractions=tractions,
        materials={"": material},
        corners=(INNER, *corners),
        exponent=weakest_exponent(opening, ("free", "free"), kappa=2.0),
        readings=readings,
    )


def _drawn(
    opening: float, arm: Place, leg: Place, eye: tuple[float, float] | None = None
) -> tuple[Any, Place]:
    """Return arm and leg (length, depth of each), cut from the inner to the outer corner, and the latter.

    `eye` is the distance of its centre from the leg and its radius.
    """
    (length, depth), (_, thickness) = arm, leg
    rise = math.radians(360.0 - opening)
    along = (-depth - thickness * math.cos(rise)) / math.sin(rise)
    outer = (along * math.cos(rise) - thickness * math.sin(rise), -depth)
    back, front = _leg_end(opening, *leg)
    arm_face = outline(
        (*INNER, "inner_arm"), (*outer, "cut"), (length, -depth, "outer_arm"), (length, 0.0, "arm_end")
    )
    if eye is not None:
        arm_face -= Circle((eye[0], -0.5 * depth), eye[1]).Face()
    leg_face = outline((*front, "inner_leg"), (*back, "leg_end"), (*outer, "outer_leg"), (*INNER, "cut"))
    arm_face.faces.name, leg_face.faces.name = "arm", "leg"
    return Glue([arm_face, leg_face]), outer


def _leg_end(opening: float, length: float, thickness: float) -> tuple[Place, Place]:
    """Return the two corners of the leg's end, the outer one first."""
    rise = math.radians(360.0 - opening)
    front = (length * math.cos(rise), length * math.sin(rise))
    return (front[0] - thickness * math.sin(rise), front[1] + thickness * math.cos(rise)), front


def _common(length: float, depth: float, outer: Place) -> tuple[Reading, ...]:
    section = {"start": (0.35 * length, 0.0), "end": (0.35 * length, -depth), "component": "xx"}
    inside = (0.37 * length, -0.41 * depth)
    throat = (0.3 * outer[0], 0.3 * outer[1])
    corner = {"near": INNER, "radius": 0.6 * depth}
    return (
        Reading("energy", "energy", "energy"),
        Reading("leg x", "displacement", "mean_displacement", {"boundary": "outer_leg", "component": "x"}),
        Reading("outer y", "displacement", "displacement", {"at": outer, "component": "y"}),
        Reading("turn", "rotation", "rotation", {"start": INNER, "end": outer}),
        Reading("arm mean", "point_stress", "mean_stress", {"region": "arm", "component": "yy"}),
        Reading("bending", "point_stress", "line_stress", {**section, "part": "bending"}),
        Reading(
            "inside", "point_stress", "stress", {"at": inside, "component": "von_mises", "way": "direct"}
        ),
        Reading("throat", "point_stress", "stress", {"at": throat, "component": "first_principal"}),
        Reading("corner", "peak_stress", "peak", {"component": "von_mises", **corner}, singular=True),
        Reading("all direct", "peak_stress", "peak", {"component": "xx", "way": "direct"}, singular=True),
        Reading(
            "corner gauss",
            "peak_stress",
            "peak",
            {"component": "first_principal", "way": "gauss", **corner},
            singular=True,
        ),
    )


def _eye_peaks(centre: Place, radius: float) -> tuple[Reading, ...]:
    near = {"near": centre, "radius": 1.4 * radius}
    return (
        Reading("eye nodal", "peak_stress", "peak", {"component": "first_principal", **near}),
        Reading("eye direct", "peak_stress", "peak", {"component": "von_mises", "way": "direct", **near}),
    )
