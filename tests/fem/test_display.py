"""What a solved level leaves for the figures: plain arrays that agree with the mesh."""

from itertools import product

import numpy as np
import pytest

from convergence.fem.display import display
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.recovery import energy_error
from convergence.fem.solution import Solution, solve
from convergence.models.thick_cylinder import thick_cylinder


def solved(shape: str, degree: int) -> Solution:
    problem = thick_cylinder(material=Material(210000.0, 0.3), length=2.0)
    counts = problem.part.divisions(size=None, divisions=4)
    return solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))


@pytest.mark.parametrize(("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2))))
def test_fields(shape: str, degree: int) -> None:
    solution = solved(shape, degree)
    fields = display(solution)
    level = solution.mesh
    pieces = 4 if degree == 2 else 1
    assert fields.cells.shape == (3 if shape == "triangle" else 4, pieces * level.cells)
    assert fields.points.shape == fields.displacement.shape == (2, level.nodes.shape[1])
    x, y = fields.points[:, fields.cells]
    areas = 0.5 * (x * np.roll(y, -1, axis=0) - y * np.roll(x, -1, axis=0)).sum(axis=0)
    assert (areas > 0.0).all(), "counter-clockwise"
    # chords of arcs of 90 / 18 degrees at most cost a²/6 of the ring's area
    assert areas.sum() == pytest.approx(level.measure, rel=np.radians(5.0) ** 2 / 6.0)
    assert fields.von_mises.shape == (level.nodes.shape[1],) and (fields.von_mises > 0.0).all()
    # the errors per area and thickness, spread over the pieces, make up the whole error again
    assert fields.error.shape == (pieces * level.cells,)
    share = np.tile(level.cell_measures, pieces) * 2.0 / pieces
    total = energy_error(solution).sum()
    assert fields.error @ share == pytest.approx(total, rel=1e-9)


@pytest.mark.parametrize(("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2))))
def test_the_boundary_is_one_closed_line_on_the_outline(shape: str, degree: int) -> None:
    fields = display(solved(shape, degree))
    ends, count = np.unique(fields.boundary, return_counts=True)
    assert (count == 2).all()
    x, y = fields.points[:, ends]
    r = np.hypot(x, y)
    on_arc = np.isclose(r, 30.0) | np.isclose(r, 45.0)
    assert (on_arc | np.isclose(x, 0.0, atol=1e-9) | np.isclose(y, 0.0, atol=1e-9)).all()
    start, end = fields.points[:, fields.boundary[0]], fields.points[:, fields.boundary[1]]
    length = np.hypot(*(end - start)).sum()
    # straight sides exactly, arcs by chords of 5 degrees at most: a²/24
    assert length == pytest.approx(30.0 + 0.5 * np.pi * 75.0, rel=np.radians(5.0) ** 2 / 24.0)
