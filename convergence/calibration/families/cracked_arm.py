"""Parts of a davit with a long crack: beside a pin's bore, in a bent arm, in a sleeve, between two legs.

Drawn by half or by a quarter, the ligament on rollers; the exponent of the tip is 0.5 (Williams 1952).
"""

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, outline
from convergence.calibration.drawn_readings import (
    crack_readings,
    displacement,
    mean_displacement,
    peak,
    section_force,
    stress,
)

EXPONENT = 0.5
BRONZE = Elastic(young=110_000.0, poisson=0.34)


def cracked_arm() -> list[DrawnCase]:
    """Return a crack beside a bore, one in a bent arm, two in a sleeve, one between two legs."""
    return [_beside_a_bore(), _bent_arm(), _sleeve(), _legs()]


def _beside_a_bore() -> DrawnCase:
    """The upper half of a strip with a bore; the crack starts at its right side."""
    bore, crack, half_width, height = 9.0, 12.0, 40.0, 55.0
    tip = (bore + crack, 0.0)
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(*tip, "crack").LineTo(half_width, 0.0, "ligament")
    pen.LineTo(half_width, height, "right").LineTo(-half_width, height, "top")
    pen.LineTo(-half_width, 0.0, "left").LineTo(-bore, 0.0, "back")
    pen.Direction(0.0, 1.0).Arc(bore, -90.0, "bore").Arc(bore, -90.0, "bore")
    return DrawnCase(
        name="crack beside a bore",
        kind="plane_stress",
        shape=pen.Face(),
        size=8.0,
        held={"ligament": {"y": 0.0}, "back": {"y": 0.0}, "left": {"x": 0.0}},
        tractions={"top": (0.0, 90.0)},
        corners=(tip,),
        exponent=EXPONENT,
        readings=(
            *crack_readings(tip, (0.2, 0.95), half_width - tip[0], (-18.0, 23.0), radii=(8.5, 11.0)),
            displacement("mouth", (bore, 0.0), "y"),
            mean_displacement("right x", "right", "x"),
            section_force("back force", "back", "y"),
            stress("crown", (0.0, bore), "xx"),
            peak("behind", "first_principal", near=(-bore, 0.0), radius=7.0),
        ),
    )


def _bent_arm() -> DrawnCase:
    """The right half of an arm on end supports, cracked from below, pressed in the middle."""
    length, depth, crack, patch = 95.0, 30.0, 13.0, 11.0
    tip = (0.0, crack)
    face = outline(
        (0.0, crack, "ligament"),
        (0.0, 0.0, "crack"),
        (length, 0.0, "bottom"),
        (length, depth, "end"),
        (patch, depth, "top"),
        (0.0, depth, "patch"),
    )
    return DrawnCase(
        name="bent arm, cracked from below",
        kind="plane_strain",
        shape=face,
        size=7.0,
        held={"ligament": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"patch": (0.0, -22.0)},
        corners=(tip, (patch, depth)),
        exponent=EXPONENT,
        readings=(
            *crack_readings(tip, (0.15, 0.85), depth - crack, (31.0, 8.0), upwards=True, radii=(9.0, 12.0)),
            displacement("mouth", (0.0, 0.0), "x"),
            mean_displacement("bottom y", "bottom", "y"),
            section_force("end force", "end", "y"),
            stress("bottom xx", (0.5 * length, 0.0), "xx"),
        ),
    )


def _sleeve() -> DrawnCase:
    """A quarter of a sleeve under pressure from inside, cracked on both sides."""
    inner, outer, crack, pressure = 30.0, 54.0, 9.0, 60.0
    tip = (inner + crack, 0.0)
    pen = WorkPlane().MoveTo(inner, 0.0).LineTo(*tip, "crack").LineTo(outer, 0.0, "ligament")
    pen.Direction(0.0, 1.0).Arc(outer, 90.0, "outer").LineTo(0.0, inner, "crown")
    pen.Direction(1.0, 0.0).Arc(inner, -90.0, "bore")
    return DrawnCase(
        name="sleeve with two cracks",
        kind="plane_strain",
        shape=pen.Face(),
        size=7.5,
        held={"ligament": {"y": 0.0}, "crown": {"x": 0.0}},
        tractions={"bore": (pressure * ng.x / inner, pressure * ng.y / inner)},
        materials={"": BRONZE},
        corners=(tip,),
        exponent=EXPONENT,
        readings=(
            *crack_readings(tip, (0.2, 0.9), outer - tip[0], (29.0, 31.0), radii=(6.5, 8.5)),
            displacement("mouth", (inner, 0.0), "y"),
            mean_displacement("outer x", "outer", "x"),
            section_force("crown force", "crown", "x"),
            stress("crown inside", (0.0, inner), "xx"),
            peak("outside", "von_mises", near=(outer, 0.0), radius=8.0),
        ),
    )


def _legs() -> DrawnCase:
    """The upper one of two tapered legs that are wedged apart at their free ends."""
    length, crack, low, high = 90.0, 44.0, 10.0, 21.0
    tip = (crack, 0.0)
    face = outline(
        (crack, 0.0, "crack"),
        (length, 0.0, "ligament"),
        (length, high, "end"),
        (0.0, low, "back"),
        (0.0, 0.0, "wedged"),
    )
    return DrawnCase(
        name="legs wedged apart",
        kind="plane_stress",
        shape=face,
        size=6.5,
        held={"ligament": {"y": 0.0}, "end": {"x": 0.0}},
        tractions={"wedged": (0.0, 15.0)},
        corners=(tip,),
        exponent=EXPONENT,
        readings=(
            *crack_readings(tip, (0.1, 0.6), length - crack, (22.0, 7.0), radii=(9.5, 14.0)),
            displacement("mouth", (0.0, 0.0), "y"),
            mean_displacement("back y", "back", "y"),
            section_force("end force", "end", "x"),
            stress("root", (40.0, low + 40.0 / length * (high - low)), "xx"),
        ),
    )
