"""Quarter of a bar with two opposite round-bottomed notches in tension, e.g. the davit's tie bar.

Ling 1947, J. Appl. Mech. 14:A275, for semicircular notches in an infinite strip; Pilkey, Peterson's Stress
Concentration Factors, 2nd ed., chart 2.4, is good to 1 %. 1.5 widths from notch to end count as infinite.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Curve, EdgeName, Part, arc, graded
from convergence.fem.problem import Problem
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "notch_stress": {"measure": "stress", "at": "notch_root", "component": "xx", "relative_tolerance": 0.02},
    "axis_stress": {"measure": "stress", "at": "axis", "component": "xx", "relative_tolerance": 0.02},
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
CELLS_PER_RADIAN = 2.0 / (0.25 * np.pi)


def double_notched_bar(
    *,
    width: Annotated[PositiveLength, "full width away from the notches"] = 60.0,
    notch_radius: Annotated[PositiveLength, "radius of the notches' round bottom"] = 10.0,
    notch_depth: Annotated[
        PositiveLength, "depth of each notch; as large as the radius it is a semicircle"
    ] = 10.0,
    half_length: Annotated[PositiveLength, "length from the notches' middle to the loaded end"] = 90.0,
    thickness: Annotated[PositiveLength, "thickness"] = 12.0,
    tension: Annotated[Stress, "stress of the full section at the end, along x"] = 50.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The middle of the narrowest section is the origin, the bar along x; notch_root has the largest stress.

    A notch deeper than its radius has straight flanks. Four cells per division around the quarter of its
    bottom; along the spokes and flanks they grow with the distance.
    """
    reach = 0.5 * width - notch_depth + notch_radius
    require(
        (notch_depth >= notch_radius, "notch_depth", notch_depth, f"at least notch_radius {notch_radius:g}"),
        (notch_depth < 0.5 * width, "notch_depth", notch_depth, f"less than half of width {width:g}"),
        (half_length > reach, "half_length", half_length, f"more than {reach:g}"),
    )
    return Problem(
        title="Bar with two opposite notches in tension",
        part=_part(0.5 * width, notch_radius, notch_depth, half_length),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Traction("end", (tension, 0.0)),),
        kind=kind,
        thickness=thickness,
    )


def _part(half: float, r: float, depth: float, length: float) -> Part:
    """Return the quarter; without flanks the notch's and the box's shoulders lie on the bar's edge."""
    high, deep = half - depth + r, depth > r
    diagonal = r * np.sqrt(0.5)
    points = {
        "axis": (0.0, 0.0),
        "box_axis": (high, 0.0),
        "end_axis": (length, 0.0),
        "end_box": (length, high),
        "box": (high, high),
        "notch_side": (r, high),
        "notch_diagonal": (diagonal, high - diagonal),
        "notch_root": (0.0, high - r),
    }
    blocks = [
        ("axis", "box_axis", "notch_diagonal", "notch_root"),
        ("notch_diagonal", "box_axis", "box", "notch_side"),
        ("box_axis", "end_axis", "end_box", "box"),
    ]
    top = ("notch_side", "box", "end_box")
    if deep:
        top = ("notch_edge", "box_edge", "end_edge")
        points |= {"notch_edge": (r, half), "box_edge": (high, half), "end_edge": (length, half)}
        blocks += [
            ("notch_side", "box", "box_edge", "notch_edge"),
            ("box", "end_box", "end_edge", "box_edge"),
        ]
    bottom = (("notch_root", "notch_diagonal"), ("notch_diagonal", "notch_side"))
    flank: tuple[EdgeName, ...] = (("notch_side", "notch_edge"),) if deep else ()
    beside: tuple[EdgeName, ...] = (("end_box", "end_edge"),) if deep else ()
    return Part(
        points=points,
        blocks=tuple(blocks),
        curves=_curves(points, high / r, depth / r, flank),
        boundaries={
            "notch": (*bottom, *flank),
            "edge": ((top[2], top[1]), (top[1], top[0])),
            "end": (("end_axis", "end_box"), *beside),
            "symmetry_x": (("notch_root", "axis"),),
            "symmetry_y": (("axis", "box_axis"), ("box_axis", "end_axis")),
        },
        weights={
            **dict.fromkeys(bottom, 2.0),
            ("axis", "notch_root"): max(1.0, CELLS_PER_RADIAN * np.log(high / r)),
            ("box_axis", "end_axis"): 2.0 * (length - high) / high,
            **dict.fromkeys(flank, max(1.0, CELLS_PER_RADIAN * np.log(depth / r))),
        },
    )


def _curves(
    points: dict[str, tuple[float, float]], spread: float, deep: float, flank: tuple[EdgeName, ...]
) -> dict[EdgeName, Curve]:
    """Return the notch's bottom and the edges along which cells grow away from it."""
    radius, high = points["notch_side"]
    growing: dict[EdgeName, float] = {
        ("notch_root", "axis"): spread,
        ("notch_diagonal", "box_axis"): spread,
        ("notch_side", "box"): spread,
        **dict.fromkeys(flank, deep),
    }
    return {
        ("notch_root", "notch_diagonal"): arc((0.0, high), radius, 270.0, 315.0),
        ("notch_diagonal", "notch_side"): arc((0.0, high), radius, 315.0, 360.0),
        **{(a, b): graded(points[a], points[b], ratio) for (a, b), ratio in growing.items()},
    }
