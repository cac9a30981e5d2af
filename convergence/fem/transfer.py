"""Prolongation between meshes of one part: from one grid of nodes to a finer one.

A field of the coarse grid is read at the fine nodes in the blocks' own parameters, so the matrices depend on
the numbers of cells alone: curved boundaries and levels that are not nested need nothing more. A grid of
degree 2 is one of twice the cells. Linear along every direction of a block, for triangles and tetrahedra too:
conjugate gradients need fewer iterations than with the field that is linear in each triangle (11 against
18 at best, never more).
"""

from collections.abc import Mapping

import numpy as np
from scipy import sparse

from convergence.fem.grid import Grids
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart
from convergence.fem.solid_mesh import used_nodes
from convergence.fem.solid_part import SolidPart

Counts = Mapping[int, int]


def prolongation(part: AnyPart, coarse: tuple[Counts, int], fine: tuple[Counts, int]) -> sparse.csr_matrix:
    """Return the matrix (fine nodes, coarse nodes) between two grids, each its counts and degree."""
    if isinstance(part, Part):
        return _plane(part, coarse, fine)
    if not isinstance(part, SolidPart):
        raise TypeError("a part without blocks has no grids")
    plan = _plane(part.plan, coarse, fine)
    (few, low), (many, high) = coarse, fine
    steps = [_chain(high * many[family], low * few[family]) for family in part.layer_families]
    whole = sparse.csr_matrix(sparse.kron(_joined(steps), plan, format="csr"))
    if not part.filled:
        return whole
    rows, columns = (used_nodes(part, *grid) for grid in (fine, coarse))
    return sparse.csr_matrix(whole[rows][:, columns])


def _plane(part: Part, coarse: tuple[Counts, int], fine: tuple[Counts, int]) -> sparse.csr_matrix:
    coarse_grids, fine_grids = Grids(part, *coarse), Grids(part, *fine)
    size = fine_grids.size
    columns, weights = np.zeros((4, size), dtype=np.int64), np.zeros((4, size))
    for wanted, ids in zip(fine_grids.blocks, coarse_grids.blocks, strict=True):
        i, x = places_along(wanted.shape[0] - 1, ids.shape[0] - 1)
        j, y = places_along(wanted.shape[1] - 1, ids.shape[1] - 1)
        corners = [ids[np.ix_(i + right, j + up)] for right, up in ((0, 0), (1, 0), (1, 1), (0, 1))]
        columns[:, wanted.ravel()] = np.reshape(corners, (4, -1))
        weights[:, wanted.ravel()] = _weights(x[:, None], y[None, :]).reshape(4, -1)
    rows = np.tile(np.arange(size), 4)
    matrix = sparse.csr_matrix((weights.ravel(), (rows, columns.ravel())), shape=(size, coarse_grids.size))
    matrix.eliminate_zeros()
    return matrix


def _chain(fine: int, coarse: int) -> sparse.csr_matrix:
    """Return the matrix (fine + 1, coarse + 1) along one layer."""
    cell, x = places_along(fine, coarse)
    rows = np.tile(np.arange(fine + 1), 2)
    entries = (np.concatenate([1.0 - x, x]), (rows, np.concatenate([cell, cell + 1])))
    matrix = sparse.csr_matrix(entries, shape=(fine + 1, coarse + 1))
    matrix.eliminate_zeros()
    return matrix


def _joined(steps: list[sparse.csr_matrix]) -> sparse.csr_matrix:
    """Return the matrix along all layers, which share the nodes between them."""
    sizes = np.array([step.shape for step in steps]) - 1
    starts = np.concatenate([[[0, 0]], np.cumsum(sizes, axis=0)])
    rows, columns, values = [], [], []
    for number, (step, (row, column)) in enumerate(zip(steps, starts, strict=False)):
        entries = sparse.coo_matrix(step if number == 0 else step[1:])
        rows.append(entries.row + row + (number > 0))
        columns.append(entries.col + column)
        values.append(entries.data)
    shape = tuple(starts[-1] + 1)
    placed = (np.concatenate(values), (np.concatenate(rows), np.concatenate(columns)))
    return sparse.csr_matrix(placed, shape=shape)


def places_along(fine: int, coarse: int) -> tuple[np.ndarray, np.ndarray]:
    """Return the coarse cell of every fine node of an edge and its place 0 … 1 in it."""
    scaled = np.arange(fine + 1) * coarse
    cell = np.minimum(scaled // fine, coarse - 1)
    return cell, (scaled - cell * fine) / fine


def _weights(x: np.ndarray, y: np.ndarray) -> np.ndarray:
    """Return the weights (4, n, m) of a cell's corners a, b, c, d."""
    return np.array([(1.0 - x) * (1.0 - y), x * (1.0 - y), x * y, (1.0 - x) * y])
