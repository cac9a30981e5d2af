"""Moment through a plane cut of a solid, from stresses integrated over it.

Order as the stress, at most 2: the outline of the cut is straight between the nodes' tetrahedra, exact where
cells have flat faces.
"""

from collections.abc import Mapping
from typing import Annotated, Any

import numpy as np

from convergence.dimensions import Direction, Moment, Point, PointName, PositiveLength
from convergence.fem.solution import Solution
from convergence.quantities._cut import Component, cut, cut_order
from convergence.quantities._place import Recovery
from convergence.results import Kind

KIND: Kind = "resultant"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress, at most 2."""
    return cut_order(degree, shape, arguments.get("recovery", "recovered"))


def cut_moment(
    solution: Solution,
    *,
    at: Annotated[Point | PointName, "point on the plane, and the one the moment is taken about"],
    normal: Annotated[Direction, "normal of the plane"],
    component: Annotated[Component, "axis of the moment, normal is torsion"] = "z",
    radius: Annotated[
        PositiveLength | None, "only within this distance of `at`, all of the plane if not given"
    ] = None,
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Moment:
    """Moment of the side the normal points to on the other one, counter-clockwise about the axis."""
    found = cut(solution, "cut_moment", at, normal, radius, recovery)
    return found.sum(np.cross(found.arm, found.traction, axis=0), component)
