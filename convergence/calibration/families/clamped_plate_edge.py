"""Plates clamped along a straight side, whose ends are singular, and a side clamped in part.

The exponent is that of a clamped and a free side at 90 degrees (Williams 1952;
`convergence.corners.williams`): 0.65 to 0.72 here. Where clamps and rollers meet on a straight side: 0.5.
"""

from typing import Any

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, outline
from convergence.calibration.exponents import kappa
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]


def clamped_plate_edge() -> list[DrawnCase]:
    """Return a strip pulled aside, a hung block, a pad half on rollers, a plate between clamps."""
    return [_strip(), _block(), _half_on_rollers(), _between_clamps()]


def _strip() -> DrawnCase:
    length, half = 60.0, 20.0
    face = outline(
        (length, -half, "lower"), (length, half, "pulled"), (0.0, half, "upper"), (0.0, -half, "clamped")
    )
    return DrawnCase(
        name="strip pulled aside",
        kind="plane_strain",
        shape=face,
        size=7.0,
        held={"clamped": {"x": 0.0, "y": 0.0}},
        tractions={"pulled": (80.0, 12.0)},
        corners=_corners(0.0, length, -half, half),
        exponent=_exponent("plane_strain", 0.3),
        readings=(
            *_fields((0.0, -half), (1.0, 1.0), "xx", (23.0, 7.0)),
            Reading("upper x", "displacement", "mean_displacement", {"boundary": "upper", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (length, -half), "end": (length, half)}),
            Reading("root middle", "point_stress", "stress", {"at": (0.0, 0.0), "component": "xx"}),
            *_line((8.0, -half), (8.0, half), "xx"),
        ),
    )


def _block() -> DrawnCase:
    """A block of plastic, its weight many times that of the material; the drawing is upside down."""
    width, height, plastic = 80.0, 56.0, Elastic(young=3_000.0, poisson=0.4)
    face = outline(
        (width, 0.0, "clamped"), (width, height, "right"), (0.0, height, "top"), (0.0, 0.0, "left")
    )
    return DrawnCase(
        name="block hung by its own weight",
        kind="plane_strain",
        shape=face,
        size=11.0,
        held={"clamped": {"x": 0.0, "y": 0.0}},
        tractions={"top": (1.5, 0.0)},
        materials={"": plastic},
        body=(0.0, 0.12),
        corners=_corners(0.0, width, 0.0, height),
        exponent=_exponent("plane_strain", plastic.poisson),
        readings=(
            *_fields((0.0, 0.0), (1.0, 1.0), "yy", (51.0, 19.0)),
            Reading("right x", "displacement", "mean_displacement", {"boundary": "right", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (0.0, height), "end": (width, height)}),
            Reading("top right", "displacement", "displacement", {"at": (width, height), "component": "y"}),
            Reading("root middle", "point_stress", "stress", {"at": (0.5 * width, 0.0), "component": "xx"}),
            *_line((0.0, 9.0), (width, 9.0), "yy"),
        ),
    )


def _half_on_rollers() -> DrawnCase:
    clamped, width, height, rubber = 30.0, 84.0, 40.0, Elastic(young=400.0, poisson=0.45)
    face = outline(
        (clamped, 0.0, "clamped"),
        (width, 0.0, "rollers"),
        (width, height, "right"),
        (0.0, height, "top"),
        (0.0, 0.0, "left"),
    )
    return DrawnCase(
        name="fender pad half on rollers",
        kind="plane_strain",
        shape=face,
        size=10.0,
        held={"clamped": {"x": 0.0, "y": 0.0}, "rollers": {"y": 0.0}},
        tractions={"right": (3.0, 0.0), "top": (0.0, -0.8)},
        materials={"": rubber},
        corners=((clamped, 0.0), *_corners(0.0, width, 0.0, height)),
        exponent=weakest_exponent(180.0, ("clamped", "roller"), kappa=kappa("plane_strain", 0.45)),
        readings=(
            *_fields((clamped, 0.0), (0.0, 1.0), "xx", (47.0, 23.0)),
            Reading("left x", "displacement", "mean_displacement", {"boundary": "left", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (0.0, height), "end": (width, height)}),
            Reading("on rollers", "reaction", "reaction", {"boundary": "rollers", "component": "y"}),
            Reading("on roller", "point_stress", "stress", {"at": (61.0, 0.0), "component": "yy"}),
            *_line((clamped + 6.0, 0.0), (clamped + 6.0, height), "xx"),
        ),
    )


def _between_clamps() -> DrawnCase:
    """A plate loaded on a part of its top: the bottom below it has a finite peak."""
    width, height, start, end = 96.0, 34.0, 22.0, 48.0
    face = outline(
        (width, 0.0, "bottom"),
        (width, height, "right"),
        (end, height, "top_right"),
        (start, height, "patch"),
        (0.0, height, "top_left"),
        (0.0, 0.0, "left"),
    )
    below = {"near": (36.0, 0.0), "radius": 12.0}
    return DrawnCase(
        name="plate between clamps",
        kind="plane_stress",
        shape=face,
        size=8.0,
        held={"left": {"x": 0.0, "y": 0.0}, "right": {"x": 0.0, "y": 0.0}},
        tractions={"patch": (25.0, -40.0)},
        materials={"": Elastic(young=70_000.0, poisson=0.4)},
        corners=((start, height), (end, height), *_corners(0.0, width, 0.0, height)),
        exponent=_exponent("plane_stress", 0.4),
        readings=(
            *_fields((0.0, height), (1.0, -1.0), "xx", (65.0, 11.0)),
            Reading(
                "bottom y", "displacement", "mean_displacement", {"boundary": "bottom", "component": "y"}
            ),
            Reading("thrust left", "reaction", "reaction", {"boundary": "left", "component": "x"}),
            Reading("shear right", "reaction", "reaction", {"boundary": "right", "component": "y"}),
            Reading("below", "peak_stress", "peak", {"component": "xx", **below}),
            Reading(
                "below gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss", **below}
            ),
            *_line((0.8 * width, 0.0), (0.8 * width, height), "xx"),
        ),
    )


def _exponent(kind: DrawnKind, poisson: float) -> float | None:
    return weakest_exponent(90.0, ("clamped", "free"), kappa=kappa(kind, poisson))


def _corners(left: float, right: float, low: float, high: float) -> tuple[Place, ...]:
    return tuple((x, y) for x in (left, right) for y in (low, high))


def _fields(corner: Place, inwards: Place, across: str, inside: Place) -> tuple[Reading, ...]:
    """Return what is read in all cases: near the singular corner and at a place inside."""
    near: dict[str, Any] = {"near": corner, "radius": 9.0}
    by_corner = (corner[0] + 5.5 * inwards[0], corner[1] + 5.5 * inwards[1])
    return (
        Reading("energy", "energy", "energy"),
        Reading("inside u", "displacement", "displacement", {"at": inside, "component": "magnitude"}),
        Reading(
            "inside", "point_stress", "stress", {"at": inside, "component": "von_mises", "way": "direct"}
        ),
        Reading("by corner", "point_stress", "stress", {"at": by_corner, "component": "von_mises"}),
        Reading("corner", "point_stress", "stress", {"at": corner, "component": across}, singular=True),
        Reading("peak", "peak_stress", "peak", {"component": "von_mises", **near}, singular=True),
        Reading(
            "all direct",
            "peak_stress",
            "peak",
            {"component": "first_principal", "way": "direct"},
            singular=True,
        ),
        Reading("gauss", "peak_stress", "peak", {"component": across, "way": "gauss", **near}, singular=True),
    )


def _line(start: Place, end: Place, component: str) -> tuple[Reading, ...]:
    line = {"start": start, "end": end, "component": component}
    return (
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
