"""Stress at a point: a component, a principal or the von Mises stress.

Recovered stress: order p + 1 (Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng 33:1331). Direct: the
elements' own stress, averaged over the cells that meet at the point, order p. Recovered stress too keeps
only p on the boundary of triangle meshes and between the vertices of quadratic triangles.
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.corner import Corner
from convergence.dimensions import STRESS, Located, PartPoint, PointName
from convergence.fem.problem import AnyPart
from convergence.fem.solution import Solution
from convergence.fem.stress import Component
from convergence.fem.stress import component as component_of
from convergence.quantities._place import Recovery, place_of, point_stress, stress_order
from convergence.results import Kind

KIND: Kind = "point_stress"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return p + 1 for recovered stress, p for direct stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether the stress is read on this corner of the part."""
    return corner.distance(place_of(part, arguments["at"])) <= 1e-9 * part.size


def stress(
    solution: Solution,
    *,
    at: Annotated[PartPoint | PointName, "point of the part, by name or coordinates"],
    component: Annotated[Component, "component, principal or von Mises stress"] = "von_mises",
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Annotated[Located, STRESS]:
    """Unsuitable where the point lies outside the part."""
    value = float(component_of(point_stress(solution, at, recovery), component))
    return Located(value, *place_of(solution.mesh.part, at))
