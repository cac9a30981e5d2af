"""A direct solution of K u = f with prescribed unknowns, by SuperLU or MKL's PARDISO.

SuperLU is ordered for symmetric matrices; PARDISO (Cholesky, the extra `mkl`) is taken where it is installed
and pays. One step of iterative refinement (Golub & Van Loan, Matrix Computations, sect. 3.5.3) keeps
round-off below the differences between fine levels.
"""

import weakref
from collections.abc import Callable
from importlib.util import find_spec
from typing import Any

import numpy as np
from scipy import sparse
from scipy.sparse.csgraph import reverse_cuthill_mckee
from scipy.sparse.linalg import splu

from convergence import numbers
from convergence.errors import SolvingError
from convergence.memory import MB, allowed_memory, peak_memory

RESIDUAL_LIMIT = 1e-8
ROUND_OFF_LIMIT = 1e-5
LEAST_LARGE = 40_000  # unknowns; below, memory is no matter and SuperLU is done before MKL is loaded
BYTES = 35.0  # of a factor, times unknowns × √(entries of a row × unknowns across); measured
Solve = Callable[[np.ndarray], np.ndarray]
SINGULAR = "the supports do not hold the part: the stiffness matrix is singular"


def residual_limit(matrix: Any, u: np.ndarray, scale: float) -> float:
    """Return the largest residual that is accepted of K u = f, whose right-hand side has size `scale`.

    It is 1e-8 of the right-hand side. Slender parts of many cells cannot reach that: K times the rounding
    of u alone leaves more (Higham, Accuracy and Stability, sect. 7.1). That much is accepted up to 1e-5.
    """
    round_off = 10.0 * np.finfo(float).eps * float(np.linalg.norm(matrix.diagonal() * u))
    return max(RESIDUAL_LIMIT * scale, min(round_off, ROUND_OFF_LIMIT * scale), float(np.finfo(float).tiny))


def factorized(matrix: sparse.csc_matrix) -> Solve:
    """Return the inverse of a symmetric positive definite matrix, as a function of right-hand sides.

    SolvingError where the matrix is singular or the factor does not fit in the memory that is left.
    """
    if matrix.shape[0] >= LEAST_LARGE:
        _require_memory(matrix)
        if find_spec("pypardiso") is not None:
            return _Cholesky(matrix).solve
    try:
        factor = splu(
            matrix, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True}
        )
    except RuntimeError as error:
        raise SolvingError(SINGULAR) from error
    solve: Solve = factor.solve
    return solve


class _Cholesky:
    """A factorization by MKL's PARDISO, whose memory is given back with this object."""

    def __init__(self, matrix: sparse.csc_matrix):
        import pypardiso

        self.upper = sparse.triu(matrix, format="csr")
        self.solver = pypardiso.PyPardisoSolver(mtype=2)
        weakref.finalize(self, self.solver.free_memory, everything=True)
        try:
            self.solver.factorize(self.upper)
        except pypardiso.pardiso_wrapper.PyPardisoError as error:
            raise SolvingError(SINGULAR) from error

    def solve(self, right: np.ndarray) -> np.ndarray:
        return np.asarray(self.solver.solve(self.upper, right))


def factor_memory(matrix: sparse.csc_matrix) -> float:
    """Return about how many MB a factor of the matrix needs; within a factor of 2 of what was measured.

    Nested separators of n unknowns in space hold n^(4/3) entries (Lipton, Rose & Tarjan 1979, SIAM J. Numer.
    Anal. 16:346, from memory), which is n √w for w unknowns across. So it stays for slender parts. w is
    the mean distance of a row's first entry from the diagonal in the order of Cuthill and McKee.
    """
    order = reverse_cuthill_mckee(matrix, symmetric_mode=True)
    place = np.empty_like(order)
    place[order] = np.arange(len(order), dtype=order.dtype)
    first = np.minimum.reduceat(place[matrix.indices], matrix.indptr[:-1])
    across = float(np.mean(place - first))
    return BYTES * float(np.sqrt(across * matrix.nnz * matrix.shape[0])) / MB


def _require_memory(matrix: sparse.csc_matrix) -> None:
    """SolvingError where a factor would not fit beside what this level has needed so far."""
    needed, left = factor_memory(matrix), allowed_memory() - peak_memory()
    if needed > left:
        wanted, there = numbers.amounts(needed, max(left, 0.0), numbers.MEMORY)
        raise SolvingError(
            f"multigrid did not converge, and a direct solution of {numbers.count(matrix.shape[0])} unknowns "
            f"would need about {wanted} of memory where {there} are left; cells less stretched, or fewer"
        )


class Factorization:
    """The factorized equations of the free unknowns. SolvingError where the supports leave the part loose."""

    def __init__(self, matrix: sparse.csr_matrix, held: np.ndarray):
        self.free = np.ones(matrix.shape[0], dtype=bool)
        self.free[held] = False
        self.held = held
        self.rows = matrix[self.free]
        self.reduced = self.rows[:, self.free].tocsc()
        self.inverse = factorized(self.reduced)

    def solve(self, load: np.ndarray, values: np.ndarray) -> np.ndarray:
        """Return u with u[held] = values.

        A solution whose residual exceeds `residual_limit` is refused with SolvingError: it is never used.
        """
        u = np.zeros(len(load))
        u[self.held] = values
        right = load[self.free] - self.rows @ u
        part = self.inverse(right)
        part += self.inverse(right - self.reduced @ part)
        residual = np.linalg.norm(self.reduced @ part - right)
        if not np.isfinite(part).all() or residual > residual_limit(
            self.reduced, part, float(np.linalg.norm(right))
        ):
            raise SolvingError(
                f"the solution leaves a residual of {residual:.1e} (load {np.linalg.norm(right):.1e}); "
                "the supports may not hold the part, or the cells are badly shaped"
            )
        u[self.free] = part
        return u
