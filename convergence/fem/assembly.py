"""The stiffness matrix: cell matrices in numpy, summed on a pattern that is known beforehand."""

import numpy as np
from scipy import sparse

from convergence.fem.cell_matrices import CellMatrices
from convergence.fem.facets import facet_bases
from convergence.fem.mesh import Mesh
from convergence.fem.pattern import pairs, pattern
from convergence.fem.problem import ElasticSupport, Problem
from convergence.fem.workers import workers

ENTRIES = 40_000  # of cell matrices at once: they stay in the cache
CELLS = 20_000  # at once


def stiffness(problem: Problem, mesh: Mesh) -> sparse.csr_matrix:
    """Return the stiffness matrix of the material (force over length)."""
    cells = np.concatenate(list(mesh.regions.values()))
    on = pattern(mesh.cell_nodes[:, cells], mesh.nodes.shape[1])
    return on.matrix(on.summed(_blocks(problem, mesh)))


def _blocks(problem: Problem, mesh: Mesh) -> np.ndarray:
    """Return the blocks (D, D, pairs, m) of all cells, region by region."""
    each = CellMatrices(problem, mesh)
    total = np.empty((mesh.dimension, mesh.dimension, len(each.first), mesh.cells))

    def fill(start: int, cells: np.ndarray, elasticity: np.ndarray) -> None:
        total[..., start : start + len(cells)] = each.blocks(cells, elasticity)

    size, start = max(1, ENTRIES // len(mesh.cell_nodes) ** 2), 0
    with workers() as pool:
        waiting = []
        for region, members in mesh.regions.items():
            elasticity = problem.materials[region].elasticity(problem.kind)
            for cells in np.split(members, range(size, len(members), size)):
                waiting.append(pool.submit(fill, start, cells, elasticity))
                start += len(cells)
    for task in waiting:
        task.result()
    return total


def stretching(problem: Problem, mesh: Mesh, displacement: np.ndarray) -> np.ndarray:
    """Return K u of the material for interleaved unknowns, cell by cell: K itself is never in memory."""
    each, total = CellMatrices(problem, mesh), np.zeros((mesh.dimension, mesh.nodes.shape[1]))
    u, apart = displacement.reshape(-1, mesh.dimension).T, each.first != each.second
    for region, members in mesh.regions.items():
        elasticity = problem.materials[region].elasticity(problem.kind)
        for start in range(0, len(members), CELLS):
            cells = members[start : start + CELLS]
            blocks, nodes = each.blocks(cells, elasticity), mesh.cell_nodes[:, cells]
            first, second = nodes[each.first], nodes[each.second]
            forces = np.einsum("cdpm,dpm->cpm", blocks, u[:, second])
            back = np.einsum("cdpm,cpm->dpm", blocks[:, :, apart], u[:, first[apart]])
            for row, force, other in zip(total, forces, back, strict=True):
                row += np.bincount(first.ravel(), force.ravel(), minlength=len(row))
                row += np.bincount(second[apart].ravel(), other.ravel(), minlength=len(row))
    return total.T.ravel()


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
        first, second = pairs(len(facets.nodes))
        products = shapes[first] * shapes[second]
        blocks = np.einsum("pq,cdfq,fq->cdpf", products, springs, weights, optimize=True)
        on = pattern(facets.nodes, mesh.nodes.shape[1])
        total = total + on.matrix(on.summed(blocks))
    return total
