"""Multigrid without a map of the part: cells of degree 2 over those of degree 1, and below these aggregation.

Smoothed aggregation with the rigid motions as what the coarse levels must not lose (Vaněk, Mandel & Brezina
1996, Computing 56:179, from memory), by PyAMG (Bell, Olson & Schroder 2022, J. Open Source Softw. 7:4142).
"""

import numpy as np
from scipy import sparse

from convergence.fem.element import element
from convergence.fem.gradients import Solve
from convergence.fem.loads import rigid_motions
from convergence.fem.mesh import Mesh

STRONG = 0.08  # couplings below this share are left out of aggregates; measured: 17 steps for 33 at 0
SMOOTHER = ("block_gauss_seidel", {"sweep": "symmetric"})
LARGEST_COARSEST = 300


def vertices(mesh: Mesh) -> np.ndarray:
    """Return the nodes of a mesh that are vertices of its cells."""
    return np.unique(mesh.cell_nodes[: mesh.element.corners])


def from_vertices(mesh: Mesh) -> sparse.csr_matrix:
    """Return the matrix (nodes, vertices) that interpolates linearly in each cell."""
    kind, found = mesh.element, vertices(mesh)
    nodes, first = np.unique(mesh.cell_nodes, return_index=True)
    local, cell = np.divmod(first, mesh.cells)
    corners = np.searchsorted(found, mesh.cell_nodes[: kind.corners, cell])
    weights = element(kind.shape, 1).shapes(kind.nodes.T)[:, local]
    rows = np.broadcast_to(nodes, weights.shape)
    kept = weights > 1e-12
    entries = weights[kept], (rows[kept], corners[kept])
    return sparse.csr_matrix(sparse.coo_matrix(entries, shape=(mesh.nodes.shape[1], len(found))))


def aggregated(
    matrix: sparse.csr_matrix, held: np.ndarray, places: np.ndarray, frame: sparse.csr_matrix | None
) -> Solve:
    """Return one V-cycle for a stiffness matrix of nodes at places (D, n), whose unknowns `held` are zero."""
    from pyamg import smoothed_aggregation_solver

    dimension = len(places)
    arms = places - places.mean(axis=1, keepdims=True)
    motions = rigid_motions(arms / np.abs(arms).max()).transpose(2, 1, 0).reshape(matrix.shape[0], -1)
    if frame is not None:
        motions = frame.T @ motions
    motions[held] = 0.0
    free = np.ones(matrix.shape[0])
    free[held] = 0.0
    kept = sparse.diags_array(free)
    alone = sparse.diags_array((1.0 - free) * matrix.diagonal())
    hierarchy = smoothed_aggregation_solver(
        sparse.bsr_matrix(kept @ matrix @ kept + alone, blocksize=(dimension, dimension)),
        B=motions,
        strength=("symmetric", {"theta": STRONG}),
        presmoother=SMOOTHER,
        postsmoother=SMOOTHER,
        max_coarse=LARGEST_COARSEST,
    )
    cycle = hierarchy.aspreconditioner()
    return lambda residual: np.asarray(cycle @ residual.astype(float), dtype=np.float32)
