"""Meshes handed to scikit-fem, an independent opinion on our maps and forms; errors against exact fields."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pytest
import skfem

from convergence.fem.geometry import at_rule, interpolate
from convergence.fem.mesh import Mesh
from convergence.fem.solution import Solution
from convergence.fem.strain import volumes

NATIVE = {
    ("line", 1): skfem.MeshLine1,
    ("line", 2): skfem.MeshLine1,  # a rod's cells are straight and their nodes half-way
    ("triangle", 1): skfem.MeshTri1,
    ("triangle", 2): skfem.MeshTri2,
    ("quadrilateral", 1): skfem.MeshQuad1,
    ("quadrilateral", 2): skfem.MeshQuad2,
    ("tetrahedron", 1): skfem.MeshTet1,
    ("tetrahedron", 2): skfem.MeshTet2,
    ("hexahedron", 1): skfem.MeshHex1,
    ("hexahedron", 2): skfem.MeshHex2,
    ("wedge", 1): skfem.MeshWedge1,
}


@dataclass(frozen=True, eq=False)
class Native:
    """Scikit-fem's mesh of the same cells in the same order; `numbers[k]` is our number of its node k."""

    level: Mesh
    mesh: Any
    numbers: np.ndarray

    def facets(self, boundary: str) -> list[np.ndarray]:
        """Return scikit-fem's facets of a boundary, one array for each of our groups."""
        corners = {(2, 2): 2, (2, 3): 2, (3, 3): 3, (3, 6): 3, (3, 4): 4, (3, 9): 4}
        known = {frozenset(facet): number for number, facet in enumerate(self.numbers[self.mesh.facets].T)}
        return [
            np.array([known[frozenset(f)] for f in group[: corners[self.level.dimension, len(group)]].T])
            for group in self.level.facets[boundary]
        ]

    @property
    def element(self) -> Any:
        """Return scikit-fem's element of the cells."""
        quadratic_line = (self.level.shape, self.level.degree) == ("line", 2)
        return skfem.ElementLineP2() if quadratic_line else self.mesh.elem()

    @cached_property
    def unknowns(self) -> np.ndarray:
        """Return our number of each of scikit-fem's unknowns of a vector field."""
        dimension = self.level.dimension
        return (dimension * self.numbers[:, None] + np.arange(dimension)).ravel()

    def basis(self, order: int) -> Any:
        """Return scikit-fem's basis of a scalar field."""
        return skfem.Basis(self.mesh, self.element, **self._rule(order))

    def vector_basis(self, order: int) -> Any:
        """Return scikit-fem's basis of a displacement."""
        basis = skfem.Basis(self.mesh, skfem.ElementVector(self.element), **self._rule(order))
        wanted = np.repeat(self.level.nodes[:, self.numbers], self.level.dimension, axis=1)
        assert np.abs(basis.doflocs - wanted).max() <= 1e-12 * self.level.part.size, "components alternate"
        return basis

    def _rule(self, order: int) -> dict[str, Any]:
        """Return scikit-fem's own rule, ours where that is wrong.

        The weights for wedges add up to 1/4 there, not 1/2; from order 5 on those for tetrahedra miss it.
        """
        if self.level.shape in ("wedge", "tetrahedron"):
            return {"quadrature": self.level.element.rule(order)}
        return {"intorder": order}

    def map(self, local: np.ndarray, cells: np.ndarray) -> np.ndarray:
        """Return the places (D, m, q) of local coordinates (D, m, q) in cells, by scikit-fem's map."""
        return np.asarray(self.mesh.mapping().F(local, tind=cells))


def native(level: Mesh) -> Native:
    """Return a level's mesh in scikit-fem's terms; it numbers vertices first, then nodes between them."""
    kind = NATIVE[level.shape, level.degree]
    vertices, cells = np.unique(level.cell_nodes[: level.element.corners], return_inverse=True)
    cells = cells.reshape(level.element.corners, -1)
    options = {"sort_t": False} if issubclass(kind, skfem.MeshTri1) else {}
    linear = NATIVE[level.shape, 1](level.nodes[:, vertices], cells, **options)
    if level.degree == 1:
        return Native(level, linear, vertices)
    line = level.shape == "line"
    empty = linear if line else kind.from_mesh(linear)
    theirs = skfem.Dofs(linear, skfem.ElementLineP2()).element_dofs if line else empty.dofs.element_dofs
    numbers = np.full(level.nodes.shape[1], -1)
    numbers[theirs] = level.cell_nodes
    assert (numbers[theirs] == level.cell_nodes).all(), "neighbours share their nodes"
    if line:
        return Native(level, linear, numbers)
    return Native(level, kind(level.nodes[:, numbers], cells, **options), numbers)


@pytest.fixture(scope="session")
def as_skfem() -> Callable[[Mesh], Native]:
    return native


@pytest.fixture(scope="session")
def displacement_error() -> Callable[[Solution], float]:
    def error(solution: Solution) -> float:
        """Return the L2 norm of the displacement's error over the volume."""
        level, exact = solution.mesh, solution.problem.exact
        assert exact is not None
        at = at_rule(level, 8)
        found = interpolate(solution.displacement[:, level.cell_nodes], at.shapes)
        squares = ((exact.displacement(*at.x) - found) ** 2).sum(axis=0)
        return float(np.sqrt((squares * volumes(solution.problem, at)).sum()))

    return error
