"""A slender arm of a davit, bending-dominated: tapered, stepped with fillets, propped, a haunched spreader.

Cells of degree 1 are far too stiff here. A welded root is a clamped edge; weakest exponents (Williams 1952,
clamped-free, nu = 0.3): 0.758 at 90 degrees and 0.787 at 84.9 degrees, the lower end of the tapered arm's
root, in plane stress; 0.711 at 90 degrees in plane strain. The spreader is cut at its middle, its end held
across only: it has no singular corner.
"""

from typing import Any

from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, Way

Place = tuple[float, float]
WEIGHT = -7.7e-5  # of steel, N/mm³
WELDED = {"root": {"x": 0.0, "y": 0.0}}


def slender_arm() -> list[DrawnCase]:
    """Return four arms, length over depth 8 to 20."""
    return [_tapered(), _stepped(), _propped(), _spreader()]


def _outline(start: Place, *sides: tuple[Place, str]) -> Any:
    """Return the polygon of the sides, each given by the corner where it ends and its name."""
    plan = WorkPlane().MoveTo(*start)
    for corner, name in sides:
        plan.LineTo(*corner, name)
    return plan.Face()


def _tapered() -> DrawnCase:
    """400 long, 50 to 14 deep; a hook's load at the tip and the weight of fittings along the arm."""
    length, root, tip = 400.0, 50.0, 14.0
    low_tip, top_tip, top_root = (length, root - tip), (length, root), (0.0, root)
    at = 0.43 * length
    low = (root - tip) * at / length
    outer = (0.75 * length, 0.75 * root)
    return DrawnCase(
        name="tapered arm, tip load and weight",
        kind="plane_stress",
        shape=_outline(
            (0.0, 0.0), (low_tip, "bottom"), (top_tip, "tip"), (top_root, "top"), ((0.0, 0.0), "root")
        ),
        size=20.0,
        held=WELDED,
        tractions={"tip": (0.0, -1.5)},
        body=(0.0, 10.0 * WEIGHT),
        corners=((0.0, 0.0), low_tip, top_tip, top_root),
        exponent=0.7583,
        readings=(
            *_welds((0.0, 0.0), top_root, 24.0),
            *_shape_changes((0.7 * length, 0.8 * root), "bottom"),
            *_linearised((at, root), (at, low)),
            _stress("under top", (at, root - 1.7), "xx"),
            _stress("web", (0.61 * length, 0.72 * root), "xy", "direct"),
            _peak("outer nodal", "von_mises", "nodal", outer, 0.28 * length),
            _peak("outer gauss", "von_mises", "gauss", outer, 0.28 * length),
        ),
    )


def _stepped() -> DrawnCase:
    """480 long, 40 deep, from 216 on 24 deep, with fillets of radius 4 at the step."""
    length, deep, thin, step, radius = 480.0, 40.0, 24.0, 216.0, 4.0
    low, high = 0.5 * (deep - thin), 0.5 * (deep + thin)
    plan = WorkPlane().MoveTo(0.0, 0.0).LineTo(step, 0.0, "bottom").LineTo(step, low - radius)
    plan.Direction(0.0, 1.0).Arc(radius, -45.0).Arc(radius, -45.0)
    plan.LineTo(length, low, "thin_bottom").LineTo(length, high, "tip").LineTo(
        step + radius, high, "thin_top"
    )
    plan.Direction(-1.0, 0.0).Arc(radius, -45.0).Arc(radius, -45.0)
    plan.LineTo(step, deep).LineTo(0.0, deep, "top").Close("root")
    fillet = (step + radius * (1.0 - 0.5**0.5), high + radius * (1.0 - 0.5**0.5))
    return DrawnCase(
        name="stepped arm with fillets, tip pulled askew",
        kind="plane_stress",
        shape=plan.Face(),
        size=20.0,
        held=WELDED,
        tractions={"tip": (6.0, -2.0)},
        corners=((0.0, 0.0), (0.0, deep), (length, low), (length, high)),
        exponent=0.7583,
        readings=(
            *_welds((0.0, 0.0), (0.0, deep), 22.0),
            *_shape_changes((0.7 * length, 0.5 * deep), "thin_top"),
            *_linearised((step + 2.0 * radius, high), (step + 2.0 * radius, low)),
            _stress("fillet direct", fillet, "xx", "direct"),
            _peak("step nodal", "von_mises", "nodal", fillet, 18.0),
            _peak("step direct", "first_principal", "direct", fillet, 18.0),
            _peak("step gauss", "von_mises", "gauss", fillet, 18.0),
        ),
    )


def _propped() -> DrawnCase:
    """360 long, 18 deep, welded at the root, its tip on a prop; pressed along a third of the top."""
    length, depth = 360.0, 18.0
    right, left = (0.62 * length, depth), (0.3 * length, depth)
    tip_low, tip_top, root_top = (length, 0.0), (length, depth), (0.0, depth)
    face = _outline(
        (0.0, 0.0),
        (tip_low, "bottom"),
        (tip_top, "tip"),
        (right, "top"),
        (left, "pressed"),
        (root_top, "root_top"),
        ((0.0, 0.0), "root"),
    )
    at = 0.47 * length
    return DrawnCase(
        name="propped arm, twenty times as long as deep",
        kind="plane_strain",
        shape=face,
        size=11.0,
        held={**WELDED, "tip": {"y": 0.0}},
        tractions={"pressed": (0.0, -4.0)},
        corners=((0.0, 0.0), root_top, left, right),
        exponent=0.7112,
        levels=8,
        readings=(
            *_welds((0.0, 0.0), root_top, 13.0),
            *_shape_changes((0.7 * length, 0.5 * depth), "root_top"),
            *_linearised((at, depth), (at, 0.0)),
            Reading("prop", "reaction", "reaction", {"boundary": "tip", "component": "y"}),
            _stress("outer fibre", (0.4 * length, 0.0), "xx"),
            _peak("middle nodal", "von_mises", "nodal", (at, 0.5 * depth), 0.3 * length),
            _peak("middle gauss", "first_principal", "gauss", (at, 0.5 * depth), 0.3 * length),
        ),
    )


def _spreader() -> DrawnCase:
    """Half of an aluminium beam, 260 from its middle to its end, 32 deep, tapered to 12 from 60 on."""
    length, deep, tip, haunch, patch = 260.0, 32.0, 12.0, 60.0, 35.0
    low, pressed = (length, deep - tip), (patch, deep)
    face = _outline(
        (0.0, 0.0),
        ((haunch, 0.0), "haunch"),
        (low, "bottom"),
        ((length, deep), "end"),
        (pressed, "top"),
        ((0.0, deep), "pressed"),
        ((0.0, 0.0), "middle"),
    )
    at = (0.58 * length, 0.8 * deep)
    return DrawnCase(
        name="half of a spreader, pressed in the middle",
        kind="plane_stress",
        shape=face,
        size=14.0,
        held={"middle": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"pressed": (0.0, -9.0)},
        body=(0.0, 12.0 * WEIGHT),
        materials={"": Elastic(young=70_000.0, poisson=0.33)},
        corners=(pressed, (haunch, 0.0), low, (length, deep)),
        readings=(
            *_shape_changes(at, "bottom"),
            *_linearised((0.2 * length, deep), (0.2 * length, 0.0)),
            Reading("section", "resultant", "section_force", {"boundary": "end", "component": "y"}),
            _stress("middle low", (0.0, 0.0), "xx"),
            _stress("web", at, "xy"),
            _stress("inside", (0.29 * length, 0.36 * deep), "xx", "direct"),
            _peak("peak nodal", "von_mises", "nodal", (0.0, 0.0), length),
            _peak("peak direct", "first_principal", "direct", (0.0, 0.0), length),
            _peak("peak gauss", "von_mises", "gauss", (0.0, 0.0), length),
        ),
    )


def _shape_changes(inside: Place, side: str) -> tuple[Reading, ...]:
    """Return energy, a shift along the arm, the mean of a side and the turning of a short line."""
    x, y = inside
    return (
        Reading("energy", "energy", "energy"),
        Reading("shift", "displacement", "displacement", {"at": inside, "component": "x"}),
        Reading("mean of side", "displacement", "mean_displacement", {"boundary": side, "component": "y"}),
        Reading("turn", "rotation", "rotation", {"start": (x - 2.0, y), "end": (x + 2.0, y)}),
    )


def _linearised(start: Place, end: Place) -> tuple[Reading, ...]:
    line = {"start": start, "end": end}
    return (
        Reading("shear", "point_stress", "line_stress", {**line, "component": "xy", "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "component": "xx", "part": "bending"}),
    )


def _stress(label: str, at: Place, component: str, way: Way = "nodal") -> Reading:
    return Reading(label, "point_stress", "stress", {"at": at, "component": component, "way": way})


def _peak(label: str, component: str, way: Way, near: Place, radius: float) -> Reading:
    place = {"near": near, "radius": radius}
    return Reading(label, "peak_stress", "peak", {"component": component, "way": way, **place})


def _welds(low: Place, high: Place, radius: float) -> tuple[Reading, ...]:
    """Return peaks without a limit at the ends of the root."""
    top, bottom = {"near": high, "radius": radius}, {"near": low, "radius": radius}
    return (
        Reading("weld top nodal", "peak_stress", "peak", {"component": "first_principal", **top}, True),
        Reading("weld top gauss", "peak_stress", "peak", {"component": "xx", "way": "gauss", **top}, True),
        Reading(
            "weld low", "peak_stress", "peak", {"component": "von_mises", "way": "direct", **bottom}, True
        ),
    )
