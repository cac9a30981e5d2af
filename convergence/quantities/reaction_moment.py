"""Reaction moment of a support about a point, counter-clockwise, from the nodal forces K u − f.

Order 2p on a smooth solution (Babuska & Miller 1984, Int. J. Numer. Meth. Engng 20:1085).
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.dimensions import Moment, Point, PointName, SupportName
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
) -> Moment:
    """Moment of the support's forces on the part."""
    return float(solution.reaction(support, place_of(solution.mesh.part, about))[2])
