"""The product of a stiffness matrix with a vector: scipy's, or compiled rows of nodes on two threads.

Compiled where numba is installed and the finest matrix is large enough to repay its start: `is_compiled`
alone decides. Sums are the same up to their rounding, so solutions agree within the solver's tolerance.
"""

from concurrent.futures import ThreadPoolExecutor
from copy import copy
from importlib.util import find_spec
from typing import Any

import numpy as np
from scipy import sparse

# unknowns by dimension that repay numba's start of 0.3 s from a warm cache; rows are short in a plane
LEAST_COMPILED = {2: 500_000, 3: 100_000}
LEAST_SHARED = 20_000  # nodes that repay a second thread
Matrix = Any  # what has `@`: a sparse matrix or NodeRows


def is_compiled(unknowns: int, dimension: int) -> bool:
    """Return whether products of a hierarchy whose finest matrix has so many unknowns are compiled."""
    return unknowns > LEAST_COMPILED[dimension] and find_spec("numba") is not None


def in_single(matrix: Matrix) -> Matrix:
    """Return a matrix in single precision; the places of its entries are shared."""
    if isinstance(matrix, NodeRows):
        return matrix.single()
    entries = (matrix.data.astype(np.float32), matrix.indices, matrix.indptr)
    return sparse.csr_matrix(entries, shape=matrix.shape)


class NodeRows:
    """A matrix whose unknowns stand node by node, `dimension` at each, for compiled products.

    The entries are shared with the matrix where all unknowns of a node have the same columns.
    """

    def __init__(self, matrix: sparse.csr_matrix, dimension: int):
        from convergence.fem.kernels import compiled

        self.multiply = compiled(dimension)
        self.nodes = matrix.shape[0] // dimension
        self.helper = ThreadPoolExecutor(1) if self.nodes >= LEAST_SHARED else None
        if not self._take(matrix, dimension):
            self._take(matrix.tobsr((dimension, dimension)).tocsr(), dimension)

    def _take(self, matrix: sparse.csr_matrix, dimension: int) -> bool:
        """Take rows and entries; return whether a product with them is that of the matrix."""
        lengths = np.diff(matrix.indptr).reshape(-1, dimension)
        counts = lengths[:, 0] // dimension
        if (lengths != dimension * counts[:, None]).any():
            return False
        inside = np.arange(counts.sum(), dtype=np.int32)
        inside -= np.repeat(np.cumsum(counts) - counts, counts).astype(np.int32)
        first = np.repeat(matrix.indptr[:-1:dimension], counts) + dimension * inside
        self.starts = (matrix.indptr[::dimension] // dimension**2).astype(np.uint32)
        self.neighbours = (matrix.indices[first] // dimension).astype(np.uint32)
        self.entries = matrix.data
        x = np.random.default_rng(0).random(matrix.shape[0]).astype(matrix.dtype)
        image = matrix @ x
        return bool(np.abs(self @ x - image).max() <= 1e-5 * np.abs(image).max())

    def single(self) -> "NodeRows":
        """Return the same matrix in single precision."""
        other = copy(self)
        other.entries = self.entries.astype(np.float32)
        return other

    def __matmul__(self, x: np.ndarray) -> np.ndarray:
        y = np.empty_like(x)
        whole: tuple[Any, ...] = (self.starts, self.neighbours, self.entries, x, y)
        half, nodes = np.uint64(self.nodes // 2), np.uint64(self.nodes)
        if self.helper is None:
            self.multiply(*whole, np.uint64(0), nodes)
            return y
        other = self.helper.submit(lambda: self.multiply(*whole, np.uint64(0), half))
        self.multiply(*whole, half, nodes)
        other.result()
        return y
