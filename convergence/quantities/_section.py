"""Traction on a straight section of a plane part."""

from dataclasses import dataclass

import numpy as np

from convergence.dimensions import Point
from convergence.errors import require
from convergence.fem.location import line_points
from convergence.fem.solution import Solution
from convergence.quantities._place import Recovery, line_stress, place_of


@dataclass(frozen=True)
class Section:
    """Traction (2, n) from the right of start → end on the left, at `arm` (n,) from its middle.

    `areas` (n,) are the shares of the section; `along` points from start to end, `normal` to the right.
    """

    traction: np.ndarray
    arm: np.ndarray
    areas: np.ndarray
    along: np.ndarray
    normal: np.ndarray


def section(
    solution: Solution, measure: str, start: Point | str, end: Point | str, recovery: Recovery
) -> Section:
    """Return the section between two places. Unsuitable where the part is no plane or the line leaves it."""
    mesh = solution.mesh
    require((mesh.dimension == 2, "measure", measure, "a plane part; cut_force or cut_moment in a solid"))
    a, b = np.array(place_of(mesh.part, start)), np.array(place_of(mesh.part, end))
    length = float(np.hypot(*(b - a)))
    require((length > 0.0, "end", end, "another point than `start`"))
    places, weights = line_points(mesh, tuple(a), tuple(b))
    xx, yy, _, xy = line_stress(solution, places, recovery)
    along = (b - a) / length
    normal = np.array([along[1], -along[0]])
    traction = np.array([xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]])
    arm = along @ (places - 0.5 * (a + b)[:, None])
    return Section(traction, arm, weights * solution.problem.depth(places[0]), along, normal)
