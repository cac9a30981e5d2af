"""Force through a straight section of a plane part, from stresses integrated along it.

Unlike a reaction it is not in equilibrium by construction, so it measures the mesh. The force acts
from the material on the right of the direction start → end upon that on its left. Order as the stress.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import Force, PartPoint, PointName
from convergence.fem.solution import Solution
from convergence.quantities._place import Recovery, stress_order
from convergence.quantities._section import section
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
    cut = section(solution, "section_force", start, end, recovery)
    directions = {
        "normal": cut.normal,
        "shear": cut.along,
        "x": np.array([1.0, 0.0]),
        "y": np.array([0.0, 1.0]),
    }
    return float(cut.traction @ cut.areas @ directions[component])
