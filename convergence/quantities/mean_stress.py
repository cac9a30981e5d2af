"""Mean stress along a straight line, component by component before invariants are formed.

Averages stay finite where a line ends at most weak singularities, which makes them a substitute for
a peak that has no limit (common practice). Order as the stress.
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.dimensions import PartPoint, PointName, Stress
from convergence.fem.location import line_points
from convergence.fem.solution import Solution
from convergence.fem.stress import Component
from convergence.fem.stress import component as component_of
from convergence.quantities._place import Recovery, line_stress, place_of, stress_order
from convergence.results import Kind

KIND: Kind = "point_stress"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def mean_stress(
    solution: Solution,
    *,
    start: Annotated[PartPoint | PointName, "first end of the line"],
    end: Annotated[PartPoint | PointName, "second end of the line"],
    component: Annotated[Component, "component, principal or von Mises stress"] = "von_mises",
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Stress:
    """Unsuitable where the line leaves the part."""
    a, b = place_of(solution.mesh.part, start), place_of(solution.mesh.part, end)
    places, weights = line_points(solution.mesh, a, b)
    mean = line_stress(solution, places, recovery) @ weights / weights.sum()
    return float(component_of(mean, component))
