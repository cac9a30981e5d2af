"""Force through a plane cut of a solid, from stresses integrated over it.

Unlike a reaction it is not in equilibrium by construction, so it measures the mesh. Order as the stress, at
most 2: the outline of the cut is straight between the nodes' tetrahedra, exact where cells have flat faces.
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.dimensions import Direction, Force, Point, PointName, PositiveLength
from convergence.fem.solution import Solution
from convergence.quantities._cut import Component, cut, cut_order
from convergence.quantities._place import Recovery
from convergence.results import Kind

KIND: Kind = "resultant"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress, at most 2."""
    return cut_order(degree, shape, arguments.get("recovery", "recovered"))


def cut_force(
    solution: Solution,
    *,
    at: Annotated[Point | PointName, "point on the plane"],
    normal: Annotated[Direction, "normal of the plane"],
    component: Annotated[Component, "direction of the force"] = "normal",
    radius: Annotated[
        PositiveLength | None, "only within this distance of `at`, all of the plane if not given"
    ] = None,
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Force:
    """Force from the side the normal points to on the other one: along the normal positive in tension."""
    found = cut(solution, "cut_force", at, normal, radius, recovery)
    return found.sum(found.traction, component)
