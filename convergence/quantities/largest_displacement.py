"""Largest displacement of the part, its size, with the place where it stands.

Order p + 1 at a node (Aubin-Nitsche, textbook result), but not above 2: a largest value between two nodes is
missed by O(h²) (Taylor's theorem).
"""

from collections.abc import Mapping
from typing import Annotated, Any

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import LENGTH, Located
from convergence.fem.problem import AnyPart
from convergence.fem.solution import Solution
from convergence.results import Kind

KIND: Kind = "displacement"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2, for degree 2 too."""
    return 2.0


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a force acts on a point: the displacement there has no limit."""
    return corner.exponent <= 0.0


def largest_displacement(solution: Solution) -> Annotated[Located, LENGTH]:
    """The largest over the nodes of the mesh."""
    size = np.linalg.norm(solution.displacement, axis=0)
    node = int(size.argmax())
    return Located(float(size[node]), *(float(x) for x in solution.mesh.nodes[:, node]))
