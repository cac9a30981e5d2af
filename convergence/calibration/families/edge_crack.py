"""Plates with an edge crack or a sharp V-notch, pulled, gripped, bent and sheared.

The exponent is 0.5 of a crack, 0.512 and 0.500 of notches of 60 and 15 degrees (Williams 1952, symmetric
mode; `convergence.corners.williams`). Symmetric parts are drawn by half, the ligament on rollers.
"""

import math

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_readings import crack_readings
from convergence.corners.williams import weakest_exponent

ALUMINIUM = Elastic(young=70_000.0, poisson=0.33)


def edge_crack() -> list[DrawnCase]:
    """Return a crack on either side, a crack between grips, a notch in bending, a slanted notch."""
    return [_double_crack(), _gripped(), _bent_notch(), _slanted_notch()]


def _double_crack() -> DrawnCase:
    """A quarter: the crack lies on y = 0, the plate's middle is x = width."""
    width, crack, height = 40.0, 16.0, 60.0
    face = outline(
        (crack, 0.0, "crack"),
        (width, 0.0, "ligament"),
        (width, height, "middle"),
        (0.0, height, "pulled"),
        (0.0, 0.0, "side"),
    )
    tip, back = (crack, 0.0), (width, 0.0)
    return DrawnCase(
        name="crack on either side",
        kind="plane_strain",
        shape=face,
        size=8.0,
        held={"ligament": {"y": 0.0}, "middle": {"x": 0.0}},
        tractions={"pulled": (0.0, 80.0)},
        corners=(tip,),
        exponent=_notch_exponent(0.0),
        readings=(
            *crack_readings(tip, (0.3, 0.95), 24.0, (13.0, 27.0), radii=(11.0, 15.0)),
            Reading("mouth", "displacement", "displacement", {"at": (0.0, 0.0), "component": "y"}),
            Reading(
                "middle y", "displacement", "mean_displacement", {"boundary": "middle", "component": "y"}
            ),
            Reading("turn", "rotation", "rotation", {"start": (0.0, 0.0), "end": (0.0, height)}),
            Reading("back", "point_stress", "stress", {"at": back, "component": "xx"}),
        ),
    )


def _gripped() -> DrawnCase:
    """A half: the grip moves by 0.05 mm and does not let the plate contract; one side is pulled too."""
    width, crack, height = 50.0, 20.0, 55.0
    face = outline(
        (crack, 0.0, "crack"),
        (width, 0.0, "ligament"),
        (width, height, "back"),
        (0.0, height, "grip"),
        (0.0, 0.0, "side"),
    )
    tip = (crack, 0.0)
    return DrawnCase(
        name="crack between grips",
        kind="plane_stress",
        shape=face,
        size=8.5,
        held={"ligament": {"y": 0.0}, "grip": {"x": 0.0, "y": 0.05}},
        tractions={"side": (-40.0, 0.0)},
        materials={"": ALUMINIUM},
        corners=(tip, (0.0, height), (width, height)),
        exponent=_notch_exponent(0.0),
        readings=(
            *crack_readings(tip, (0.15, 0.9), 30.0, (31.0, 33.0), radii=(12.0, 18.0)),
            Reading("mouth", "displacement", "displacement", {"at": (0.0, 0.0), "component": "y"}),
            Reading("back x", "displacement", "mean_displacement", {"boundary": "back", "component": "x"}),
            Reading("force", "reaction", "reaction", {"boundary": "ligament", "component": "y"}),
            Reading("grip", "point_stress", "stress", {"at": (0.5 * width, height), "component": "yy"}),
            Reading("back", "point_stress", "stress", {"at": (width, 0.0), "component": "von_mises"}),
        ),
    )


def _bent_notch() -> DrawnCase:
    """Half of a beam on end supports, notched from below, loaded on a patch above the notch."""
    length, depth, notch, patch, slope = 80.0, 36.0, 12.0, 10.0, math.radians(30.0)
    face = outline(
        (0.0, notch, "symmetry"),
        (notch * math.tan(slope), 0.0, "flank"),
        (length, 0.0, "bottom"),
        (length, depth, "end"),
        (patch, depth, "top"),
        (0.0, depth, "patch"),
    )
    tip = (0.0, notch)
    return DrawnCase(
        name="beam with a V-notch",
        kind="plane_stress",
        shape=face,
        size=7.5,
        held={"symmetry": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"patch": (0.0, -40.0)},
        corners=(tip, (patch, depth)),
        exponent=_notch_exponent(60.0),
        readings=(
            *crack_readings(tip, (0.15, 0.85), depth - notch, (23.0, 21.0), upwards=True),
            Reading("opening", "displacement", "mean_displacement", {"boundary": "flank", "component": "x"}),
            Reading(
                "bottom y", "displacement", "mean_displacement", {"boundary": "bottom", "component": "y"}
            ),
            Reading("turn", "rotation", "rotation", {"start": (length, 0.0), "end": (length, depth)}),
            Reading("bottom xx", "point_stress", "stress", {"at": (0.45 * length, 0.0), "component": "xx"}),
            Reading("end force", "resultant", "section_force", {"boundary": "end", "component": "y"}),
        ),
    )


def _slanted_notch() -> DrawnCase:
    """The whole plate, clamped below, pulled and sheared above; the notch points upwards into it."""
    width, half_height, tip = 44.0, 45.0, (16.0, 6.0)
    back = {"near": (width, 2.0), "radius": 11.0}
    upper, lower = (tip[1] - tip[0] * math.tan(math.radians(20.0 + turn)) for turn in (-7.5, 7.5))
    face = outline(
        (0.0, lower, "lower_flank"),
        (0.0, -half_height, "lower_side"),
        (width, -half_height, "clamped"),
        (width, half_height, "right"),
        (0.0, half_height, "top"),
        (0.0, upper, "upper_side"),
        (*tip, "upper_flank"),
    )
    return DrawnCase(
        name="slanted notch",
        kind="plane_strain",
        shape=face,
        size=8.5,
        held={"clamped": {"x": 0.0, "y": 0.0}},
        tractions={"top": (12.0, 60.0)},
        corners=(tip, *((x, y) for x in (0.0, width) for y in (-half_height, half_height))),
        exponent=_notch_exponent(15.0),
        readings=(
            *crack_readings(tip, (0.25, 0.9), width - tip[0], (29.0, -22.0)),
            Reading("mouth", "displacement", "displacement", {"at": (0.0, upper), "component": "y"}),
            Reading("right x", "displacement", "mean_displacement", {"boundary": "right", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (0.0, upper), "end": (0.0, half_height)}),
            Reading("root", "resultant", "section_force", {"boundary": "clamped", "component": "y"}),
            Reading("back", "peak_stress", "peak", {"component": "von_mises", **back}),
            Reading("back gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss", **back}),
            Reading(
                "right yy", "point_stress", "stress", {"at": (width, 0.0), "component": "yy", "way": "direct"}
            ),
        ),
    )


def _notch_exponent(angle: float) -> float | None:
    return weakest_exponent(360.0 - angle, ("free", "free"), kappa=2.0)
