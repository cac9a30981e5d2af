"""Places given as coordinates or by the name of a point of the part, and stress there."""

from typing import Literal

import numpy as np

from convergence.dimensions import Point
from convergence.errors import require
from convergence.fem.location import locate, locate_many
from convergence.fem.problem import AnyPart
from convergence.fem.recovery import recovered_at
from convergence.fem.solution import Solution
from convergence.fem.stress import direct_stress

Recovery = Literal["recovered", "direct"]


def place_of(part: AnyPart, at: Point | str) -> Point:
    """Return the coordinates of a place."""
    if isinstance(at, str):
        return tuple(float(x) for x in part.points[at])  # type: ignore[return-value]
    return at


def axis_of(component: str, dimension: int) -> int:
    """Return the number of a direction; Unsuitable where the part does not have it."""
    axes = "xyz"[:dimension]
    require((component in axes, "component", component, f"one of {', '.join(axes)}"))
    return axes.index(component)


def unit(direction: tuple[float, ...], key: str, dimension: int) -> np.ndarray:
    """Return a direction of length one; Unsuitable where it has none, or not the part's dimension."""
    vector = np.array(direction)
    size = float(np.linalg.norm(vector))
    right = f"[{', '.join('xyz'[:dimension])}], not all 0"
    require((len(vector) == dimension and size > 0.0, key, direction, right))
    return np.asarray(vector / size)


def stress_in(solution: Solution, cells: np.ndarray, local: np.ndarray, recovery: Recovery) -> np.ndarray:
    """Return the stress (components, m, q) at local places (D, m, q) of cells."""
    if recovery == "direct":
        return direct_stress(solution, local, cells)
    return recovered_at(solution, cells, local)


def point_stress(solution: Solution, at: Point | str, recovery: Recovery) -> np.ndarray:
    """Return the stress (components,) at a place; element stress is averaged over the cells meeting there."""
    cells, local = locate(solution.mesh, place_of(solution.mesh.part, at))
    return np.asarray(stress_in(solution, cells, local, recovery)[:, :, 0].mean(axis=1))


def line_stress(solution: Solution, places: np.ndarray, recovery: Recovery) -> np.ndarray:
    """Return the stress (components, n) at the places (D, n)."""
    cells, local = locate_many(solution.mesh, places)
    return stress_in(solution, cells, local, recovery)[:, :, 0]


def tensor(stress: np.ndarray) -> np.ndarray:
    """Return stresses (4 or 6, ...) as symmetric tensors (3, 3, ...)."""
    xx, yy, zz, xy, yz, zx = [*stress, *(np.zeros_like(stress[0]) for _ in range(6 - len(stress)))]
    return np.array([[xx, xy, zx], [xy, yy, yz], [zx, yz, zz]])


def components(stress: np.ndarray) -> np.ndarray:
    """Return tensors (3, 3, ...) as stresses (6, ...)."""
    return np.array([stress[i, j] for i, j in ((0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (2, 0))])


def stress_order(degree: int, shape: str, recovery: Recovery) -> float:
    """Return p for element stress, p + 1 for recovered stress (Zienkiewicz & Zhu 1992).

    Quadratic triangles, tetrahedra and wedges have no sampling points of order p + 1, so their recovered
    stress is of order p too, though many times more accurate (measured; vertices inside may do better).

    Linear ones keep p + 1 inside and in the mean over smooth faces and lines (measured 1.7 to 2). Where
    boundaries meet it is not promised: measured 1.0 on the edges of a bore at its planes of symmetry, 1.9 at
    the corner of a beam. No order above p is sure at such places; the observed one tells.
    """
    if recovery == "direct" or (shape in ("triangle", "tetrahedron", "wedge") and degree == 2):
        return float(degree)
    return float(degree + 1)
