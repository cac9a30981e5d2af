"""What models with an exact stress field share: tractions on straight edges and the strain energy."""

from collections.abc import Iterable

import numpy as np

from convergence.fem.loads import FieldFunction
from convergence.fem.part import EdgeName, Part
from convergence.fem.problem import Exact

GAUSS_POINTS = 40


def traction_of(stress: FieldFunction, normal: tuple[float, float]) -> FieldFunction:
    """Return the traction (2, ...) of a stress field on planes with a fixed outward normal."""

    def traction(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        xx, yy, _, xy = stress(x, y)
        return np.array([xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]])

    return traction


def energy_of(exact: Exact, part: Part, edges: Iterable[EdgeName], thickness: float) -> float:
    """Return half the work of the exact tractions on straight edges, each with the part on its left.

    This is the strain energy where the other edges do no work (Clapeyron's theorem). The Gauss rule of
    40 points is exact to rounding where the field is smooth on the edges.
    """
    at, weight = np.polynomial.legendre.leggauss(GAUSS_POINTS)
    work = 0.0
    for start, end in edges:
        x, y = part.edge(start, end, 0.5 * (at + 1.0))
        dx, dy = np.subtract(part.points[end], part.points[start])
        length = float(np.hypot(dx, dy))
        traction = traction_of(exact.stress, (dy / length, -dx / length))(x, y)
        work += 0.5 * length * float(weight @ (traction * exact.displacement(x, y)).sum(axis=0))
    return 0.5 * thickness * work
