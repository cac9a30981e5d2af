"""Cell matrices summed into a sparse matrix whose pattern of entries is known beforehand.

The pattern depends on the nodes of the cells alone. Two counting sorts, by column and then by row, make it;
both are scipy's changes of format, so the work grows with the number of pairs of nodes in cells. Cell
matrices are symmetric: of the nodes a, b of a cell only the pairs a <= b are kept.
"""

from dataclasses import dataclass

import numpy as np
from scipy import sparse

from convergence.fem.workers import workers

PIECE = 100_000  # neighbours of the nodes whose rows are ordered at once: they stay in the cache


def pairs(nodes: int) -> tuple[np.ndarray, np.ndarray]:
    """Return the nodes a <= b of the pairs of a cell's nodes."""
    return np.triu_indices(nodes)


@dataclass(frozen=True, eq=False)
class Pattern:
    """The neighbours of node i are `neighbours[indptr[i]:indptr[i + 1]]`, ascending, itself included.

    `sums` (neighbours, 2 pairs m) adds up the pairs of m cells, then their transposes.
    """

    indptr: np.ndarray
    neighbours: np.ndarray
    sums: sparse.csr_array

    def summed(self, blocks: np.ndarray) -> np.ndarray:
        """Return the blocks (D columns, D rows, neighbours) of the sum of cells' (D, D, pairs, m)."""
        dimension = len(blocks)
        total = np.empty((dimension, dimension, len(self.neighbours)))

        def add(row: int, column: int) -> None:
            parts = np.concatenate([blocks[row, column].ravel(), blocks[column, row].ravel()])
            total[column, row] = self.sums @ parts

        with workers() as pool:
            list(pool.map(lambda place: add(*place), np.ndindex(dimension, dimension)))
        return total

    def matrix(self, blocks: np.ndarray) -> sparse.csr_matrix:
        """Return the matrix of blocks as `summed`; unknowns are interleaved, D at each node."""
        dimension, nodes, count = len(blocks), len(self.indptr) - 1, len(self.neighbours)
        entries = np.empty((dimension * count, dimension))
        indices = np.empty(entries.shape, dtype=np.int32)
        lengths = np.diff(self.indptr)
        step = max(1, PIECE * nodes // max(1, count))

        def fill(first: int) -> None:
            begin, end = self.indptr[first], self.indptr[min(first + step, nodes)]
            order = _by_rows(lengths[first : first + step], dimension)
            at = slice(dimension * begin, dimension * end)
            for column, values in enumerate(blocks):
                entries[at, column] = values[:, begin:end].ravel()[order]
            columns = np.tile(dimension * self.neighbours[begin:end], dimension)[order]
            indices[at] = columns[:, None] + np.arange(dimension, dtype=np.int32)

        with workers() as pool:
            list(pool.map(fill, range(0, nodes, step)))
        ends = np.concatenate([[0], np.cumsum(np.repeat(dimension * lengths, dimension))]).astype(np.int32)
        size = dimension * nodes
        return sparse.csr_matrix((entries.ravel(), indices.ravel(), ends), shape=(size, size))


def _by_rows(lengths: np.ndarray, dimension: int) -> np.ndarray:
    """Return the places of the neighbours of each node, `dimension` times, in `dimension` lists of all."""
    rows = np.repeat(lengths, dimension)
    ends, starts = np.cumsum(rows), np.cumsum(lengths) - lengths
    starts = starts[:, None] + lengths.sum() * np.arange(dimension)
    return np.asarray(np.repeat(starts.ravel() - (ends - rows), rows) + np.arange(ends[-1]))


def pattern(cell_nodes: np.ndarray, nodes: int) -> Pattern:
    """Return the pattern of cells (k, m) that share a number of nodes."""
    k, m = cell_nodes.shape
    owners = np.ascontiguousarray(cell_nodes.T, dtype=np.int32)
    columns = np.repeat(owners, k, axis=0).ravel()
    starts = np.arange(0, k * k * m + 1, k, dtype=np.int32)
    by_column = sparse.csr_array((_numbers(k, m), columns, starts), shape=(k * m, nodes)).tocsc()
    del columns
    entries = (by_column.data, owners.ravel()[by_column.indices], by_column.indptr)
    by_row = sparse.csc_array(entries, shape=(nodes, nodes)).tocsr()
    del by_column, entries
    new = np.empty(k * k * m, dtype=bool)
    new[0] = True
    np.not_equal(by_row.indices[1:], by_row.indices[:-1], out=new[1:])
    new[by_row.indptr[:-1][np.diff(by_row.indptr) > 0]] = True
    slots = np.flatnonzero(new).astype(np.int32)
    whole = (np.ones(len(new)), by_row.data, np.append(slots, np.int32(len(new))))
    sums = sparse.csr_array(whole, shape=(len(slots), k * (k + 1) * m))
    indptr = np.searchsorted(slots, by_row.indptr).astype(np.int32)
    return Pattern(indptr, by_row.indices[slots], sums)


def _numbers(k: int, m: int) -> np.ndarray:
    """Return the numbers (m k k) of the pairs of nodes of cells, those a <= b before the others."""
    a, b = pairs(k)
    first = np.empty((k, k), dtype=np.int32)
    first[b, a] = m * (len(a) + np.arange(len(a)))
    first[a, b] = m * np.arange(len(a))
    return (first + np.arange(m, dtype=np.int32)[:, None, None]).ravel()
