"""Displacement at a point.

Order p + 1 away from singular corners (Aubin-Nitsche, textbook result; a logarithm for p = 1 is left out).
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import Length, PartPoint, PointName
from convergence.fem.location import locate
from convergence.fem.problem import AnyPart
from convergence.fem.solution import Solution
from convergence.fem.stress import displacement_at
from convergence.quantities._place import axis_of, place_of
from convergence.results import Kind

KIND: Kind = "displacement"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return p + 1."""
    return float(degree + 1)


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether the displacement is read where a force acts on a point."""
    distance = corner.distance(place_of(part, arguments["at"]))
    return corner.exponent <= 0.0 and distance <= 1e-9 * part.size


def displacement(
    solution: Solution,
    *,
    at: Annotated[PartPoint | PointName, "point of the part, by name or coordinates"],
    component: Annotated[Literal["x", "y", "z", "magnitude"], "direction"] = "y",
) -> Length:
    """Unsuitable where the point lies outside the part."""
    cells, local = locate(solution.mesh, place_of(solution.mesh.part, at))
    u = displacement_at(solution, local[:, :1], cells[:1])[:, 0, 0]
    if component == "magnitude":
        return float(np.linalg.norm(u))
    return float(u[axis_of(component, len(u))])
