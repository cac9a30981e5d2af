"""The singular corner that a stress sits on, and grows at; corners in words."""

import numpy as np

from convergence.corner import Corner
from convergence.results import Facts, Ladder

NEAR = 2.0
STRESS_KINDS = ("peak_stress", "point_stress", "unknown")
AT_POINT = {"force": "where a force acts", "support": "where a support takes a force"}


def described(corner: Corner) -> str:
    """Return "the free-free corner heel of 270° at (0, 0)", and the like for edges and for points."""
    shape = "corner" if len(corner.path) == 1 else "edge"
    one, other = corner.sides
    if one == "point":
        return f"the point {corner.name} {corner.where}, {AT_POINT[other]}"
    if corner.sides == ("bonded", "bonded"):
        shape = "point" if shape == "corner" else shape
        return f"the {shape} {corner.name} {corner.where}, where materials meet"
    return f"the {one}-{other} {shape} {corner.name} of {corner.opening:.4g}° {corner.where}"


def growing_corner(ladder: Ladder, facts: Facts, name: str) -> Corner | None:
    """Return the corner where the value stands, if it grows there or the levels are too few to tell.

    A point stress stands on a corner or not; a peak counts within two cells of it on the finest level.
    """
    f = ladder.column(name)
    if len(f) >= 3 and not abs(f[-1]) > abs(f[-2]):
        return None
    if facts.kinds.get(name) == "point_stress":
        return next(iter(facts.covered.get(name, ())), None)
    columns = [ladder.column(f"{name}.{axis}") for axis in "xyz"]
    place = tuple(float(column[-1]) for column in columns if len(column) and np.isfinite(column[-1]))
    if not facts.corners or not place:
        return None
    distance = {corner: corner.distance(place) for corner in facts.corners}
    near = [corner for corner in distance if distance[corner] <= NEAR * float(ladder.h[-1])]
    return min(near, key=lambda corner: distance[corner], default=None)
