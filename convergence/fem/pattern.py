"""Cell matrices summed into a sparse matrix whose pattern of entries is known beforehand.

The pattern depends on the nodes of the cells alone. Two counting sorts, by column and then by row, make it;
both are scipy's changes of format, so the work grows with the number of pairs of nodes in cells.
"""

from dataclasses import dataclass

import numpy as np
from scipy import sparse


@dataclass(frozen=True, eq=False)
class Pattern:
    """The neighbours of node i are `neighbours[indptr[i]:indptr[i + 1]]`, ascending, itself included.

    `slots` (m, k, k) is the place in `neighbours` of the pair (row, column) of a cell's nodes (k, m).
    """

    cell_nodes: np.ndarray
    indptr: np.ndarray
    neighbours: np.ndarray
    slots: np.ndarray

    def columns(self, dimension: int) -> tuple[np.ndarray, np.ndarray]:
        """Return indices and indptr of the CSR matrix with `dimension` unknowns at each node."""
        one = np.ones((1, 1, 1), dtype=np.int8)
        blocks = np.broadcast_to(one, (len(self.neighbours), dimension, dimension))
        size = dimension * (len(self.indptr) - 1)
        matrix = sparse.bsr_array((blocks, self.neighbours, self.indptr), shape=(size, size)).tocsr()
        return matrix.indices, matrix.indptr


def pattern(cell_nodes: np.ndarray, nodes: int) -> Pattern:
    """Return the pattern of cells (k, m) that share a number of nodes."""
    k, m = cell_nodes.shape
    owners = np.ascontiguousarray(cell_nodes.T, dtype=np.int32)
    pairs = np.arange(k * k * m, dtype=np.int32)
    starts = np.arange(0, k * k * m + 1, k, dtype=np.int32)
    columns = np.repeat(owners, k, axis=0).ravel()
    by_column = sparse.csr_array((pairs, columns, starts), shape=(k * m, nodes)).tocsc()
    entries = (by_column.data, owners.ravel()[by_column.indices], by_column.indptr)
    by_row = sparse.csc_array(entries, shape=(nodes, nodes)).tocsr()
    first = np.empty(len(pairs), dtype=bool)
    first[0] = True
    np.not_equal(by_row.indices[1:], by_row.indices[:-1], out=first[1:])
    first[by_row.indptr[:-1][np.diff(by_row.indptr) > 0]] = True
    number = np.cumsum(first, dtype=np.int32)
    indptr = np.concatenate([[0], number]).astype(np.int32)[by_row.indptr]
    slots = pairs
    slots[by_row.data] = number - 1
    return Pattern(cell_nodes, indptr, by_row.indices[first], slots.reshape(m, k, k))


class Sum:
    """A growing sum of cell matrices on a pattern."""

    def __init__(self, on: Pattern, dimension: int):
        self.on, self.dimension = on, dimension
        self.entries = np.zeros(dimension**2 * len(on.neighbours))
        self._lengths = dimension * np.diff(on.indptr)
        self._before = (dimension - 1) * dimension * on.indptr[:-1].astype(np.int64)

    def add(self, cells: np.ndarray, blocks: np.ndarray) -> None:
        """Add blocks (m, D k, D k) of cells."""
        nodes, dimension = self.on.cell_nodes[:, cells].T, self.dimension
        k = nodes.shape[1]
        first = (dimension * self.on.slots[cells] + self._before[nodes][:, :, None]).ravel()
        step = np.repeat(self._lengths[nodes].ravel(), k)
        parts = blocks.reshape(len(blocks), k, dimension, k, dimension)
        for row in range(dimension):
            at = first + row * step
            for column in range(dimension):
                np.add.at(self.entries, at + column, parts[:, :, row, :, column].ravel())

    def matrix(self) -> sparse.csr_matrix:
        """Return the sum."""
        size = len(self._lengths) * self.dimension
        return sparse.csr_matrix((self.entries, *self.on.columns(self.dimension)), shape=(size, size))
