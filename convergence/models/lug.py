"""Eye plate with a pin hole: round head, straight shank, clamped base, e.g. the davit's hanging lug.

The pin presses on half of the hole with a cosine distribution (common practice). Both ends of the base
are singular corners (Williams 1952, J. Appl. Mech. 19:526).
"""

from collections.abc import Mapping
from itertools import pairwise
from typing import Annotated

import numpy as np

from convergence.dimensions import Degrees, Force, PositiveLength
from convergence.errors import require
from convergence.fem.loads import BearingLoad
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Curve, EdgeName, Part, arc, graded
from convergence.fem.problem import Problem, Support

QUANTITIES = {
    "hole_stress": {
        "measure": "peak_stress",
        "boundary": "hole",
        "component": "first_principal",
        "relative_tolerance": 0.03,
    },
    "pin_travel": {"measure": "displacement", "at": "hole_0", "component": "y", "relative_tolerance": 0.01},
    "shank_stress": {"measure": "stress", "at": "rim_225", "component": "yy", "relative_tolerance": 0.02},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
SECTORS = 16
STEP = 360.0 / SECTORS
HOLE = [f"hole_{int(STEP * place)}" for place in range(SECTORS)]
RIM = [f"rim_{int(STEP * place)}" for place in range(SECTORS)]
NECK = ("rim_225", "rim_247", "rim_270", "rim_292", "rim_315")
BASE = ("base_left", "base_2", "base_middle", "base_4", "base_right")


def lug(
    *,
    head_radius: Annotated[PositiveLength, "radius of the head, half of the shank's width"] = 40.0,
    hole_radius: Annotated[PositiveLength, "radius of the pin hole"] = 16.0,
    height: Annotated[PositiveLength, "from the clamped base to the middle of the hole"] = 90.0,
    thickness: Annotated[PositiveLength, "thickness"] = 20.0,
    force: Annotated[Force, "pull of the pin, positive"] = 25000.0,
    angle: Annotated[
        Degrees, "direction of the pull, counter-clockwise from straight away from the base"
    ] = 0.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The hole's middle is the origin, the base lies on y = -height.

    Points hole_0, hole_22, hole_45 ... are named by their angle from the pull, counter-clockwise; the
    pressure begins and ends at hole_270 and hole_90. Points rim_0, rim_22 ... count from the x axis.
    """
    require(
        (hole_radius < head_radius, "hole_radius", hole_radius, f"less than head_radius {head_radius:g}"),
        (height > head_radius, "height", height, f"more than head_radius {head_radius:g}"),
        (force > 0.0, "force", force, "a positive pull; `angle` turns it"),
    )
    direction = np.radians(90.0 + angle)
    pull = (force * float(np.cos(direction)), force * float(np.sin(direction)))
    return Problem(
        title="Lug with a pin hole",
        part=_part(head_radius, hole_radius, height, 90.0 + angle),
        materials={"body": material},
        supports=(Support("base", x=0.0, y=0.0, boundary="base"),),
        loads=(BearingLoad("hole", pull, centre=(0.0, 0.0)),),
        kind=kind,
        thickness=thickness,
    )


def _part(head: float, hole: float, height: float, direction: float) -> Part:
    """Sixteen blocks around the hole, four below; the hole's points turn with the pull, by half a step."""
    nearest = round(direction / STEP)
    turn = direction - STEP * nearest
    around = [HOLE[(place - nearest) % SECTORS] for place in range(SECTORS)]
    rim = list(zip(RIM, RIM[1:] + RIM[:1], strict=True))
    bore = list(zip(around, around[1:] + around[:1], strict=True))
    below = list(zip(pairwise(NECK), pairwise(BASE), strict=True))
    points = _points(around, head, hole, height, turn)
    return Part(
        points=points,
        blocks=(
            *(_sector(place, rim[place], bore[place]) for place in range(SECTORS)),
            *((*foot, neck[1], neck[0]) for neck, foot in below[:2]),
            *((foot[1], neck[1], neck[0], foot[0]) for neck, foot in below[2:]),
        ),
        curves=_curves(points, rim, bore, head, hole, turn),
        boundaries={
            "hole": tuple(bore),
            "head": tuple(rim[:8]),
            "left": (*rim[8:10], ("rim_225", "base_left")),
            "right": (("base_right", "rim_315"), *rim[14:]),
            "base": tuple(pairwise(BASE)),
        },
        weights={
            **dict.fromkeys(rim, 1.0),
            (around[0], RIM[0]): max(1.0, np.log(head / hole) / np.radians(STEP)),
            ("base_left", "rim_225"): max(1.0, 2.0 * (height - head) / head),
        },
    )


def _sector(place: int, rim: EdgeName, bore: EdgeName) -> tuple[str, str, str, str]:
    """Return a block around the hole; triangles are cut so that the neck's blunt angles are halved."""
    if place % 4 < 2:
        return bore[1], bore[0], rim[0], rim[1]
    return bore[0], rim[0], rim[1], bore[1]


def _points(
    around: list[str], head: float, hole: float, height: float, turn: float
) -> dict[str, tuple[float, float]]:
    """Return all points; below the middle of the hole the rim is a box of the shank's width."""
    points: dict[str, tuple[float, float]] = {}
    for place, name in enumerate(around):
        at, turned = np.radians(STEP * place), np.radians(STEP * place + turn)
        reach = head if place <= 8 else head / max(abs(np.cos(at)), abs(np.sin(at)))
        points[RIM[place]] = (float(reach * np.cos(at)), float(reach * np.sin(at)))
        points[name] = (float(hole * np.cos(turned)), float(hole * np.sin(turned)))
    return points | {foot: (points[neck][0], -height) for foot, neck in zip(BASE, NECK, strict=True)}


def _curves(
    points: Mapping[str, tuple[float, float]],
    rim: list[EdgeName],
    bore: list[EdgeName],
    head: float,
    hole: float,
    turn: float,
) -> dict[EdgeName, Curve]:
    curves: dict[EdgeName, Curve] = {}
    for place in range(SECTORS):
        start, end = STEP * place, STEP * (place + 1)
        curves[bore[place]] = arc((0.0, 0.0), hole, start + turn, end + turn)
        spoke = (bore[place][0], rim[place][0])
        curves[spoke] = graded(points[spoke[0]], points[spoke[1]], head / hole)
        if place < 8:
            curves[rim[place]] = arc((0.0, 0.0), head, start, end)
    return curves
