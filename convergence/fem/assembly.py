"""The stiffness matrix: cell matrices in numpy, summed on a pattern that is known beforehand.

K_ab[i, j] = C[i k, j l] ∫ dN_a/dx_k dN_b/dx_l: one batched product of gradients a chunk, then one product
with the elasticity. Around an axis N/x counts as a further gradient, for the hoop strain.
"""

from collections.abc import Iterator

import numpy as np
from scipy import sparse

from convergence.fem.facets import facet_bases
from convergence.fem.geometry import Geometry, geometry
from convergence.fem.mesh import Mesh
from convergence.fem.pattern import Sum, pattern
from convergence.fem.problem import ElasticSupport, Problem
from convergence.fem.strain import strain_forms, strain_gradients, strain_operator, volumes

ENTRIES = 40_000  # of cell matrices at once: they stay in the cache
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


def stiffness(problem: Problem, mesh: Mesh) -> sparse.csr_matrix:
    """Return the stiffness matrix of the material (force over length)."""
    total = Sum(pattern(mesh.cell_nodes, mesh.nodes.shape[1]), mesh.dimension)
    for region, members in mesh.regions.items():
        elasticity = problem.materials[region].elasticity(problem.kind)
        for cells in _chunks(mesh, members):
            total.add(cells, _cell_matrices(problem, mesh, cells, elasticity))
    return total.matrix()


def _chunks(mesh: Mesh, members: np.ndarray) -> Iterator[np.ndarray]:
    size = max(1, ENTRIES // mesh.cell_nodes.shape[0] ** 2)
    for start in range(0, len(members), size):
        yield members[start : start + size]


def _cell_matrices(problem: Problem, mesh: Mesh, cells: np.ndarray, elasticity: np.ndarray) -> np.ndarray:
    """Return the matrices (m, D k, D k) of cells of one material."""
    local, weights = stiffness_rule(problem, mesh)
    at = geometry(mesh, local, cells, weights)
    if mesh.formulation == "mean dilatation":
        return _by_operator(problem, mesh, at, cells, elasticity)
    forms = strain_forms(problem.kind, mesh.dimension)
    coupled = np.einsum("sik,st,tjl->klij", forms, elasticity, forms)
    g = strain_gradients(problem, at)  # (k, G, m, q)
    k, ways, m, q = g.shape
    left = np.ascontiguousarray(g.transpose(2, 0, 1, 3)).reshape(m, k * ways, q)
    products = (left * volumes(problem, at)[:, None, :]) @ left.transpose(0, 2, 1)
    pairs = products.reshape(m, k, ways, k, ways).transpose(0, 1, 3, 2, 4).reshape(-1, ways * ways)
    d = mesh.dimension
    blocks = (pairs @ coupled.reshape(ways * ways, d * d)).reshape(m, k, k, d, d)
    return np.asarray(blocks.transpose(0, 1, 3, 2, 4).reshape(m, k * d, k * d))


def _by_operator(
    problem: Problem, mesh: Mesh, at: Geometry, cells: np.ndarray, elasticity: np.ndarray
) -> np.ndarray:
    """Return the matrices by the strain operator B, ∫ B'.D.B."""
    b = np.moveaxis(strain_operator(problem, mesh, at, cells), 2, 0)
    stressed = np.einsum("st,etnq,eq->enqs", elasticity, b, volumes(problem, at), optimize=True)
    m, s, n, q = b.shape
    left = b.transpose(0, 2, 3, 1).reshape(m, n, q * s)
    return np.asarray(left @ stressed.reshape(m, n, q * s).transpose(0, 2, 1))


def foundation(problem: Problem, mesh: Mesh, support: ElasticSupport) -> sparse.csr_matrix:
    """Return the stiffness of an elastic foundation."""
    size = mesh.dimension * mesh.nodes.shape[1]
    total = sparse.csr_matrix((size, size))
    for facets in facet_bases(mesh, support.boundary, 2 * mesh.degree + 2):
        normal = np.einsum("cfq,dfq->cdfq", facets.normals, facets.normals)
        across = np.eye(mesh.dimension)[:, :, None, None] - normal
        springs = support.normal * normal + support.tangential * across
        weights = facets.dx * problem.depth(facets.places[0])
        shapes = facets.shapes
        blocks = np.einsum("iq,jq,cdfq,fq->ficjd", shapes, shapes, springs, weights, optimize=True)
        width = len(facets.nodes) * mesh.dimension
        on_facets = Sum(pattern(facets.nodes, mesh.nodes.shape[1]), mesh.dimension)
        on_facets.add(np.arange(facets.nodes.shape[1]), blocks.reshape(-1, width, width))
        total = total + on_facets.matrix()
    return total
