"""Mean displacement of a boundary.

A linear functional with a smooth weight: order 2p on a smooth solution (Babuska & Miller 1984, Int. J.
Numer. Meth. Engng 20:1085).
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import BoundaryName, Length
from convergence.fem.edges import edge_basis
from convergence.fem.solution import Solution
from convergence.results import Kind

KIND: Kind = "displacement"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def mean_displacement(
    solution: Solution,
    *,
    boundary: Annotated[BoundaryName, "boundary to average over"],
    component: Annotated[Literal["x", "y"], "direction"] = "y",
) -> Length:
    """Average over the area of the boundary."""
    edges = edge_basis(solution.mesh, boundary, solution.mesh.degree + 2)
    u = solution.displacement["xy".index(component)][edges.nodes]
    values = np.einsum("ne,nq->eq", u, edges.shapes)
    weights = edges.dx * solution.problem.depth(edges.places[0])
    return float((values * weights).sum() / weights.sum())
