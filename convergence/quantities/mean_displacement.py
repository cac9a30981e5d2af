"""Mean displacement of a boundary or of a region.

A linear functional with a smooth weight: order 2p on a smooth solution (Babuska & Miller 1984, Int. J.
Numer. Meth. Engng 20:1085).
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import BoundaryName, Length, RegionName
from convergence.errors import require
from convergence.fem.facets import facet_bases
from convergence.fem.geometry import at_rule, interpolate
from convergence.fem.solution import Solution
from convergence.fem.strain import volumes
from convergence.quantities._place import axis_of
from convergence.results import Kind

KIND: Kind = "displacement"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def mean_displacement(
    solution: Solution,
    *,
    boundary: Annotated[BoundaryName | None, "boundary to average over"] = None,
    region: Annotated[RegionName | None, "region to average over instead"] = None,
    component: Annotated[Literal["x", "y", "z"], "direction"] = "y",
) -> Length:
    """Average over area or volume. Unsuitable where boundary and region are both given, or neither."""
    either = "either `boundary` or `region`"
    require(((boundary is None) != (region is None), "boundary", boundary, either))
    mesh = solution.mesh
    u = solution.displacement[axis_of(component, mesh.dimension)]
    order = 2 * mesh.degree + 2
    if boundary is not None:
        parts = [
            (facets.nodes, facets.shapes, facets.dx * solution.problem.depth(facets.places[0]))
            for facets in facet_bases(mesh, boundary, order)
        ]
    else:
        cells = mesh.regions[str(region)]
        at = at_rule(mesh, order, cells)
        parts = [(mesh.cell_nodes[:, cells], at.shapes, volumes(solution.problem, at))]
    total = sum(float((interpolate(u[nodes], shapes) * weights).sum()) for nodes, shapes, weights in parts)
    return total / sum(float(np.sum(weights)) for _, _, weights in parts)
