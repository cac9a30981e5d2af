"""Reaction moment of a support about a point, from the nodal forces K u − f.

Order 2p on a smooth solution (Babuska & Miller 1984, Int. J. Numer. Meth. Engng 20:1085).
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

from convergence.dimensions import Moment, Point, PointName, SupportName
from convergence.errors import require
from convergence.fem.solution import Solution
from convergence.quantities._place import place_of
from convergence.results import Kind

KIND: Kind = "reaction"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def reaction_moment(
    solution: Solution,
    *,
    support: Annotated[SupportName, "support that gives the reaction"],
    about: Annotated[Point | PointName, "point the moment is taken about"],
    component: Annotated[Literal["x", "y", "z"], "axis of the moment, z in a plane"] = "z",
) -> Moment:
    """Moment of the support's forces on the part, counter-clockwise about the axis."""
    found = solution.reaction(support, place_of(solution.mesh.part, about))
    if len(found) == 3:
        require((component == "z", "component", component, "z: the only axis in a plane"))
        return float(found[2])
    return float(found[3 + "xyz".index(component)])
