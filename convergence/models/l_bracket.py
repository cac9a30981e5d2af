"""L-shaped bracket hung from its top edge with a load on its arm, the inner corner sharp or filleted.

The sharp corner and both clamped ones are singular (Williams 1952, J. Appl. Mech. 19:526): the stress
there has no limit, at a fillet it has.
"""

from collections.abc import Mapping
from typing import Annotated

import numpy as np

from convergence.dimensions import LENGTH, Bounds, PositiveLength, Stress
from convergence.errors import require
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Curve, EdgeName, Part, arc, graded
from convergence.fem.problem import Problem, Support, Traction

QUANTITIES = {
    "deflection": {"measure": "displacement", "at": "tip", "component": "y", "relative_tolerance": 0.01},
    "corner_stress": {
        "measure": "peak_stress",
        "near": "inner_corner",
        "radius": 20.0,
        "component": "first_principal",
        "relative_tolerance": 0.05,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
ARC_CELLS = 2.0


def l_bracket(
    *,
    post_width: Annotated[PositiveLength, "width of the upright leg"] = 80.0,
    post_height: Annotated[PositiveLength, "height over all"] = 200.0,
    arm_depth: Annotated[PositiveLength, "depth of the horizontal leg"] = 80.0,
    arm_length: Annotated[PositiveLength, "length over all"] = 200.0,
    fillet_radius: Annotated[
        float, LENGTH, Bounds(low=0.0, closed=True), "radius of the inner corner, 0 is sharp"
    ] = 20.0,
    thickness: Annotated[PositiveLength, "thickness"] = 12.0,
    end_shear: Annotated[Stress, "shear traction on the arm's end, positive upward"] = -10.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The outer corner is the origin. With a fillet, inner_corner is the middle of its arc.

    The fillet has at least two cells per division on each half of its arc.
    """
    width, height = post_width + fillet_radius, arm_depth + fillet_radius
    require(
        (post_height > height, "post_height", post_height, f"more than arm_depth + fillet_radius {height:g}"),
        (arm_length > width, "arm_length", arm_length, f"more than post_width + fillet_radius {width:g}"),
    )
    return Problem(
        title="L-shaped bracket, filleted" if fillet_radius else "L-shaped bracket, sharp",
        part=_part(post_width, post_height, arm_depth, arm_length, fillet_radius),
        materials={"body": material},
        supports=(Support("top", x=0.0, y=0.0, boundary="top"),),
        loads=(Traction("end", (0.0, end_shear)),),
        kind=kind,
        thickness=thickness,
    )


def _points(w: float, height: float, d: float, length: float, r: float) -> dict[str, tuple[float, float]]:
    nearest = r * (1.0 - np.sqrt(0.5))
    return {
        "outer_corner": (0.0, 0.0),
        "bottom_middle": (0.5 * w, 0.0),
        "bottom": (w + r, 0.0),
        "end_lower": (length, 0.0),
        "left_middle": (0.0, 0.5 * d),
        "centre": (0.5 * w, 0.5 * d),
        "arm_middle": (w + r, 0.5 * d),
        "tip": (length, 0.5 * d),
        "inner_corner": (w + nearest, d + nearest),
        "arm_upper": (w + r, d),
        "end_upper": (length, d),
        "left": (0.0, d + r),
        "post_middle": (0.5 * w, d + r),
        "post_right": (w, d + r),
        "top_left": (0.0, height),
        "top_middle": (0.5 * w, height),
        "top_right": (w, height),
    }


def _part(w: float, height: float, d: float, length: float, r: float) -> Part:
    """Return the blocks; without a fillet arm_upper and post_right fall on inner_corner."""
    points = _points(w, height, d, length, r)
    arm, post = ("arm_upper", "post_right") if r else ("inner_corner", "inner_corner")
    inner: tuple[tuple[str, str, str, str], ...] = (
        (("centre", "arm_middle", arm, "inner_corner"), ("centre", "inner_corner", post, "post_middle"))
        if r
        else (("centre", "arm_middle", "inner_corner", "post_middle"),)
    )
    return Part(
        points=points,
        blocks=(
            ("outer_corner", "bottom_middle", "centre", "left_middle"),
            ("centre", "bottom_middle", "bottom", "arm_middle"),
            ("centre", "post_middle", "left", "left_middle"),
            *inner,
            ("arm_middle", "bottom", "end_lower", "tip"),
            ("arm_middle", "tip", "end_upper", arm),
            ("top_left", "left", "post_middle", "top_middle"),
            ("top_right", "top_middle", "post_middle", post),
        ),
        curves=_curves(points, r) if r else {},
        boundaries={
            "top": (("top_right", "top_middle"), ("top_middle", "top_left")),
            "end": (("end_lower", "tip"), ("tip", "end_upper")),
            "outer": (
                ("top_left", "left"),
                ("left", "left_middle"),
                ("left_middle", "outer_corner"),
                ("outer_corner", "bottom_middle"),
                ("bottom_middle", "bottom"),
                ("bottom", "end_lower"),
            ),
            "inner": (("end_upper", arm), (post, "top_right")),
            **({"fillet": ((arm, "inner_corner"), ("inner_corner", post))} if r else {}),
        },
        weights=_weights(w, height, d, length, r) if r else {},
    )


def _curves(points: Mapping[str, tuple[float, float]], r: float) -> dict[EdgeName, Curve]:
    """Return the two halves of the fillet, and the spokes behind it with small cells at the fillet."""
    centre = (points["arm_upper"][0], points["post_right"][1])
    spokes = (("inner_corner", "centre"), ("arm_upper", "arm_middle"), ("post_right", "post_middle"))
    ratio = _growth(points["centre"][0], points["centre"][1], r)
    return {
        ("arm_upper", "inner_corner"): arc(centre, r, 270.0, 225.0),
        ("inner_corner", "post_right"): arc(centre, r, 225.0, 180.0),
        **{(a, b): graded(points[a], points[b], ratio) for a, b in spokes},
    }


def _growth(half_width: float, half_depth: float, r: float) -> float:
    """Return how much longer the edge opposite half the fillet is."""
    return max(1.0, (max(half_width, half_depth) + r) / (0.25 * np.pi * r))


def _weights(w: float, height: float, d: float, length: float, r: float) -> dict[EdgeName, float]:
    """Return the cells per division: a quarter of the narrower leg, smaller at the fillet."""
    cell = 0.25 * min(w, d)
    return {
        ("outer_corner", "bottom_middle"): 0.5 * w / cell,
        ("outer_corner", "left_middle"): 0.5 * d / cell,
        ("inner_corner", "arm_upper"): max(ARC_CELLS, (0.5 * w + r) / cell),
        ("inner_corner", "post_right"): max(ARC_CELLS, (0.5 * d + r) / cell),
        ("centre", "inner_corner"): 0.5 * max(w, d) / cell + float(np.log(_growth(0.5 * w, 0.5 * d, r))),
        ("bottom", "end_lower"): (length - w - r) / cell,
        ("left", "top_left"): (height - d - r) / cell,
    }
