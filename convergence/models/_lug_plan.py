"""The plan of a lug: blocks around a pin hole in a round head, and below them down to the base."""

from collections.abc import Mapping
from dataclasses import replace
from itertools import pairwise

import numpy as np

from convergence.fem.part import Curve, EdgeName, Part, arc, graded

SECTORS = 16
STEP = 360.0 / SECTORS
HOLE, BOSS, RIM = (
    [f"{name}_{int(STEP * place)}" for place in range(SECTORS)] for name in ("hole", "boss", "rim")
)
NECK = ("rim_225", "rim_247", "rim_270", "rim_292", "rim_315")
BASE = ("base_left", "base_2", "base_middle", "base_4", "base_right")


RING = tuple(range(SECTORS + 4, 2 * SECTORS + 4))  # the blocks between the hole and the boss's edge


def lug_plan(head: float, hole: float, height: float, direction: float, boss: float | None = None) -> Part:
    """Return the plan; with a boss's radius, points and a ring of blocks (RING) between it and the hole."""
    if boss is None:
        return _plate(HOLE, head, hole, height, direction)
    plate = _plate(BOSS, head, boss, height, direction)
    circle = dict(zip(HOLE, BOSS, strict=True))
    share = hole / boss
    points = {name: (share * x, share * y) for name, (x, y) in ((n, plate.points[circle[n]]) for n in HOLE)}
    bore = list(zip(HOLE, HOLE[1:] + HOLE[:1], strict=True))
    step = STEP * np.arange(SECTORS) + direction
    spokes = {
        (name, outer): graded(points[name], plate.points[outer], boss / hole)
        for name, outer in circle.items()
    }
    return replace(
        plate,
        points={**plate.points, **points},
        blocks=(*plate.blocks, *((a, circle[a], circle[b], b) for a, b in bore)),
        curves={
            **plate.curves,
            **spokes,
            **{edge: arc((0.0, 0.0), hole, at, at + STEP) for edge, at in zip(bore, step, strict=True)},
        },
        boundaries={**plate.boundaries, "hole": tuple(bore)},
        weights={
            **plate.weights,
            (HOLE[0], BOSS[0]): max(1.0, np.log(boss / hole) / np.radians(STEP)),
        },
    )


def _plate(names: list[str], head: float, hole: float, height: float, direction: float) -> Part:
    """Sixteen blocks around a circle, four below; the circle's points turn with the pull, by half a step."""
    nearest = round(direction / STEP)
    turn = direction - STEP * nearest
    around = [names[(place - nearest) % SECTORS] for place in range(SECTORS)]
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
