"""Matrices of cells as blocks of the pairs of their nodes, for many cells at once.

K_ab[i, j] = C[i k, j l] ∫ dN_a/dx_k dN_b/dx_l is a sum of products of derivatives on the reference cell,
which are constants, times products of the map's derivatives and the elasticity: two products of large
matrices. Around an axis N/x counts as a further gradient, for the hoop strain.
"""

import numpy as np

from convergence.fem.geometry import Geometry, geometry
from convergence.fem.mesh import Mesh
from convergence.fem.pattern import pairs
from convergence.fem.problem import Problem
from convergence.fem.strain import strain_forms, strain_maps, strain_operator, volumes

# quadrature orders that keep the rate of convergence on curved cells; quadrilaterals have more, so that
# published sequences of exactly integrated cells are met
ORDER = {
    ("line", 1): 1,
    ("line", 2): 2,
    ("triangle", 1): 1,
    ("triangle", 2): 2,
    ("quadrilateral", 1): 5,
    ("quadrilateral", 2): 7,
    ("tetrahedron", 1): 1,
    ("tetrahedron", 2): 2,
    ("hexahedron", 1): 3,
    ("hexahedron", 2): 5,
    ("wedge", 1): 3,
    ("wedge", 2): 5,
}
HOOP_ORDER = 2  # more where the hoop strain u/x is integrated


def stiffness_rule(problem: Problem, mesh: Mesh) -> tuple[np.ndarray, np.ndarray]:
    """Return the quadrature rule (D, q), (q,) of the stiffness."""
    return mesh.element.rule(ORDER[mesh.shape, mesh.degree] + HOOP_ORDER * (problem.kind == "axisymmetric"))


class CellMatrices:
    """The matrices of a mesh's cells; `first` and `second` are the nodes of the pairs."""

    def __init__(self, problem: Problem, mesh: Mesh):
        self.problem, self.mesh = problem, mesh
        self.first, self.second = pairs(len(mesh.cell_nodes))
        self.local, self.weights = stiffness_rule(problem, mesh)
        self.forms = strain_forms(problem.kind, mesh.dimension)
        self.basis = mesh.element.evaluate(self.local)
        shapes, slopes = self.basis
        kinds = np.moveaxis(slopes, 1, 0)
        if problem.kind == "axisymmetric":
            kinds = np.concatenate([kinds, shapes[None]])
        products = np.einsum("kpq,lpq->pklq", kinds[:, self.first], kinds[:, self.second])
        self.products = products.reshape(len(self.first), -1)

    def blocks(self, cells: np.ndarray, elasticity: np.ndarray) -> np.ndarray:
        """Return the blocks (D, D, pairs, m) of cells of one material."""
        at = geometry(self.mesh, self.local, cells, self.weights, self.basis)
        d = self.mesh.dimension
        if self.mesh.formulation == "mean dilatation":
            whole = self._by_operator(at, cells, elasticity)
            return np.asarray(whole[:, self.first, :, self.second].transpose(2, 3, 0, 1))
        coupled = np.einsum("sik,st,tjl->ijkl", self.forms, elasticity, self.forms).reshape(d * d, -1)
        maps = strain_maps(self.problem, at).transpose(1, 0, 3, 2)  # (G, K, q, m)
        weighted = maps * volumes(self.problem, at).T
        spread = weighted[:, None, :, None] * maps[None, :, None]  # (G, G, K, K, q, m)
        stressed = coupled @ spread.reshape(len(maps) ** 2, -1)
        return np.asarray(self.products @ stressed.reshape(d, d, -1, len(cells)))

    def _by_operator(self, at: Geometry, cells: np.ndarray, elasticity: np.ndarray) -> np.ndarray:
        """Return the matrices (m, k, D, k, D) by the strain operator B, ∫ B'.D.B."""
        b = np.moveaxis(strain_operator(self.problem, self.mesh, at, cells), 2, 0)
        stressed = np.einsum("st,etnq,eq->enqs", elasticity, b, volumes(self.problem, at), optimize=True)
        m, s, n, q = b.shape
        left = b.transpose(0, 2, 3, 1).reshape(m, n, q * s)
        whole = left @ stressed.reshape(m, n, q * s).transpose(0, 2, 1)
        d = self.mesh.dimension
        return np.asarray(whole.reshape(m, n // d, d, n // d, d))
