"""Peak stress in a region, on a boundary or near a point, with the place where it stands.

The largest value over the nodes (the smallest for the third principal stress). Its order is that of
the stress, but not above 2: a peak between two nodes is missed by O(h²) (Taylor's theorem). At a
singular corner it has no limit.
"""

from collections.abc import Mapping
from typing import Annotated, Any

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import (
    STRESS,
    BoundaryName,
    Located,
    Point,
    PointName,
    PositiveLength,
    RegionName,
)
from convergence.errors import require
from convergence.fem.held import boundary_nodes
from convergence.fem.problem import AnyPart
from convergence.fem.recovery import recovered_stress
from convergence.fem.solution import Solution
from convergence.fem.stress import Component, cell_node_stress
from convergence.fem.stress import component as component_of
from convergence.quantities._place import Recovery, place_of, stress_order
from convergence.results import Kind

KIND: Kind = "peak_stress"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress, at most 2."""
    return min(2.0, stress_order(degree, shape, arguments.get("recovery", "recovered")))


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a corner of the part can be the place of the peak."""
    boundary, region = arguments.get("boundary"), arguments.get("region")
    if boundary is not None and not part.boundary_points(boundary) & set(corner.points):
        return False
    inside = region is None or region not in part.regions or part.region_points(region) & set(corner.points)
    if not inside:
        return False
    if arguments.get("near") is not None:
        return bool(corner.distance(place_of(part, arguments["near"])) <= arguments["radius"] * (1.0 + 1e-9))
    return True


def peak_stress(
    solution: Solution,
    *,
    component: Annotated[Component, "component, principal or von Mises stress"] = "von_mises",
    region: Annotated[RegionName | None, "only in this region"] = None,
    boundary: Annotated[BoundaryName | None, "only on this boundary"] = None,
    near: Annotated[Point | PointName | None, "only within `radius` of this point"] = None,
    radius: Annotated[PositiveLength | None, "distance from `near`"] = None,
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Annotated[Located, STRESS]:
    """Unsuitable where `near` and `radius` are not given together, or no node is left."""
    require(
        ((near is None) == (radius is None), "radius", radius, "`near` and `radius` together, or neither")
    )
    mesh = solution.mesh
    dofs = mesh.cell_nodes
    allowed = np.ones(dofs.shape, dtype=bool)
    if region is not None:
        allowed &= np.isin(np.arange(mesh.cells), mesh.regions[region])[None, :]
    if boundary is not None:
        allowed &= np.isin(dofs, boundary_nodes(mesh, boundary))
    if near is not None and radius is not None:
        place = np.array(place_of(mesh.part, near))
        distance = np.linalg.norm(mesh.nodes - place[:, None], axis=0)
        allowed &= (distance <= radius * (1.0 + 1e-9))[dofs]
    require(
        (bool(allowed.any()), "radius", radius, "a region, boundary and radius that hold at least one node")
    )
    at_nodes = recovered_stress(solution) if recovery == "recovered" else cell_node_stress(solution)
    values = component_of(at_nodes, component)
    sign = -1.0 if component == "third_principal" else 1.0
    best = np.unravel_index(np.where(allowed, sign * values, -np.inf).argmax(), values.shape)
    return Located(float(values[best]), *(float(x) for x in mesh.nodes[:, dofs[best]]))
