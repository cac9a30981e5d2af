"""Force through a straight section, from stresses integrated along it.

Unlike a reaction it is not in equilibrium by construction, so it measures the mesh. The force acts
from the material on the right of the direction start → end upon that on its left. Order as the stress.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import Force, PartPoint, PointName
from convergence.fem.location import line_points
from convergence.fem.solution import Solution
from convergence.quantities._place import Recovery, line_stress, place_of, stress_order
from convergence.results import Kind

KIND: Kind = "resultant"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def section_force(
    solution: Solution,
    *,
    start: Annotated[PartPoint | PointName, "first end of the section"],
    end: Annotated[PartPoint | PointName, "second end of the section"],
    component: Annotated[Literal["normal", "shear", "x", "y"], "direction of the force"] = "normal",
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Force:
    """Normal is to the right of start → end, positive in tension; shear is positive from start to end."""
    a, b = np.array(place_of(solution.mesh.part, start)), np.array(place_of(solution.mesh.part, end))
    places, weights = line_points(solution.mesh, tuple(a), tuple(b))
    xx, yy, _, xy = line_stress(solution, places, recovery)
    along = (b - a) / np.hypot(*(b - a))
    normal = np.array([along[1], -along[0]])
    traction = np.array([xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]])
    force = traction @ (weights * solution.problem.depth(places[0]))
    directions = {"normal": normal, "shear": along, "x": np.array([1.0, 0.0]), "y": np.array([0.0, 1.0])}
    return float(force @ directions[component])
