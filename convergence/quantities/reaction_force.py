"""Reaction force of a support, from the nodal forces K u − f.

Order 2p on a smooth solution (Babuska & Miller 1984, Int. J. Numer. Meth. Engng 20:1085). Where
equilibrium alone fixes the reaction, it is the same on every mesh and says nothing about the mesh. Where
two supports hold one component of a node, the first one has its force, a share that falls with h only.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

from convergence.dimensions import Force, SupportName
from convergence.fem.solution import Solution
from convergence.quantities._place import axis_of
from convergence.results import Kind

KIND: Kind = "reaction"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def reaction_force(
    solution: Solution,
    *,
    support: Annotated[SupportName, "support that gives the reaction"],
    component: Annotated[Literal["x", "y", "z"], "direction"] = "y",
) -> Force:
    """Force of the support on the part."""
    return float(solution.reaction(support)[axis_of(component, solution.mesh.dimension)])
