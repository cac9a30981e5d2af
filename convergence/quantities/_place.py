"""Places given as coordinates or by the name of a point of the part, and stress there."""

from typing import Literal

import numpy as np

from convergence.dimensions import Point
from convergence.fem.location import locate, locate_many
from convergence.fem.part import Part
from convergence.fem.recovery import recovered_at
from convergence.fem.solution import Solution
from convergence.fem.stress import direct_stress

Recovery = Literal["recovered", "direct"]


def place_of(part: Part, at: Point | str) -> Point:
    """Return the coordinates of a place."""
    if isinstance(at, str):
        x, y = part.points[at]
        return float(x), float(y)
    return at


def point_stress(solution: Solution, at: Point | str, recovery: Recovery) -> np.ndarray:
    """Return the stress (4,) at a place; element stresses are averaged over the cells that meet there."""
    cells, local = locate(solution.mesh, place_of(solution.mesh.part, at))
    if recovery == "direct":
        return np.asarray(direct_stress(solution, local, cells)[:, :, 0].mean(axis=1))
    return np.asarray(recovered_at(solution, cells, local)[:, :, 0].mean(axis=1))


def line_stress(solution: Solution, places: np.ndarray, recovery: Recovery) -> np.ndarray:
    """Return the stress (4, n) at the places (2, n)."""
    cells, local = locate_many(solution.mesh, places)
    if recovery == "direct":
        return direct_stress(solution, local, cells)[:, :, 0]
    return recovered_at(solution, cells, local)[:, :, 0]


def stress_order(degree: int, shape: str, recovery: Recovery) -> float:
    """Return p for element stress, p + 1 for recovered stress (Zienkiewicz & Zhu 1992).

    Quadratic triangles have no sampling points of order p + 1, so their recovered stress is of order p
    too, though many times more accurate (measured; vertices inside may do better).
    """
    if recovery == "direct" or (shape == "triangle" and degree == 2):
        return float(degree)
    return float(degree + 1)
