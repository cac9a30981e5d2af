"""`python -m convergence.bench.map_coverage`: how many nodes' intervals hold the exact value, in JSON.

Models whose exact field is known, plane and solid, linear and quadratic cells, three levels of ratio 1.5 that
share few nodes: coarse values are read inside cells.
"""

import json
from typing import Any

import numpy as np

from convergence import rooms
from convergence.bench.cases import STEEL
from convergence.bodies.nodal_fields import DISPLACEMENT, STRESS, NodalFields, nodal_fields
from convergence.bodies.pointwise import NOISE, JudgedField, PointwiseMap, Reading, pointwise
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenPart
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import solve

CELLS: dict[str, tuple[Shape, ...]] = {
    "thick_cylinder": ("triangle", "quadrilateral"),
    "perforated_plate": ("triangle", "quadrilateral"),
    "curved_bar": ("triangle", "quadrilateral"),
    "exact_cantilever": ("triangle", "quadrilateral"),
    "hollow_cylinder": ("tetrahedron", "hexahedron"),
}
DIVISIONS = {2: (4, 6, 9), 3: (2, 3, 4)}
READINGS = (
    *(Reading(DISPLACEMENT, name, "displacement", 0.02) for name in ("magnitude", "x", "y")),
    *(Reading(STRESS, name, "point_stress", 0.05) for name in ("von_mises", "xx", "yy", "xy")),
)


def coverage() -> list[dict[str, Any]]:
    """Return model, cells, reading, nodes, and how many of them are covered, for each map."""
    rows = []
    for model, shapes in CELLS.items():
        problem = rooms.find("models", model)(material=STEEL)
        for shape in shapes:
            for degree in (1, 2):
                found, exact = _map(problem, shape, degree)
                for field in found.fields:
                    cells = {"model": model, "shape": shape, "degree": degree, "field": field.reading.name}
                    held = _held(field, field.reading.of(exact))
                    rows.append(cells | {"nodes": len(held), "held": int(held.sum())})
    return rows


def _map(problem: Problem, shape: Shape, degree: int) -> tuple[PointwiseMap, dict[str, np.ndarray]]:
    """Return the map of a problem, and its exact fields at the nodes."""
    levels: list[NodalFields] = []
    sizes = []
    part = problem.part
    assert not isinstance(part, GivenPart)
    for divisions in DIVISIONS[part.dimension]:
        counts = part.divisions(size=None, divisions=divisions)
        made = mesh(part, counts, shape=shape, degree=degree)
        levels.append(nodal_fields(solve(problem, made)))
        sizes.append(made.h)
    exact, nodes = problem.exact, levels[-1].nodes
    assert exact is not None
    fields = {DISPLACEMENT: exact.displacement(*nodes), STRESS: exact.stress(*nodes)}
    coarser = [[level] for level in levels[:-1]]
    return pointwise(levels[-1], coarser, sizes, READINGS, corners_known=True), fields


def _held(field: JudgedField, exact: np.ndarray) -> np.ndarray:
    """Return which nodes' intervals hold the exact value, to noise."""
    noise = NOISE * np.ptp(field.values)
    return np.asarray((field.low - noise <= exact) & (exact <= field.high + noise))


if __name__ == "__main__":
    print(json.dumps({"rows": coverage()}))
