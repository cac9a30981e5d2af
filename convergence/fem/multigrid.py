"""Conjugate gradients for K u = f, preconditioned by geometric multigrid over the part's blocks.

V(1,1) cycles with Chebyshev smoothing (Saad, Iterative Methods for Sparse Linear Systems, 2nd ed., alg. 12.1
and 13.2; Adams et al. 2003, J. Comput. Phys. 188:593) on the levels degree 2, degree 1, and then half the
cells along every edge. Coarse matrices are projected, P' K P, so no coarse mesh is needed. Cells of
aspect 5 and more cost iterations.

Vectors keep their held unknowns, at zero. Cycles run in single precision, the gradients in double.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import splu

from convergence.fem.mesh import Mesh
from convergence.fem.solvers import residual_limit
from convergence.fem.transfer import counts_up, degree_up

TOLERANCE = 1e-10
MOST_ITERATIONS = 60
SMOOTHER_DEGREE = 4
SMOOTHED_RANGE = 40.0
LARGEST_COARSEST = 3000
LANCZOS_STEPS = 8
Solve = Callable[[np.ndarray], np.ndarray]


@dataclass(frozen=True, eq=False)
class Outcome:
    """A solution, not to be used unless converged. `residual` is relative to the right-hand side."""

    u: np.ndarray
    iterations: int
    residual: float
    converged: bool


@dataclass(frozen=True, eq=False)
class _Level:
    """A level in single precision: `up` brings scalar nodal values to it from the next coarser one."""

    matrix: sparse.csr_matrix
    held: np.ndarray
    inverse_diagonal: np.ndarray
    largest: float
    up: sparse.csr_matrix
    down: sparse.csr_matrix
    held_below: np.ndarray

    def times(self, x: np.ndarray) -> np.ndarray:
        """Return K x of the free unknowns."""
        return _multiply(self.matrix, x, self.held)


def multigrid(
    mesh: Mesh, matrix: sparse.csr_matrix, load: np.ndarray, held: np.ndarray, values: np.ndarray
) -> Outcome:
    """Return u with u[held] = values, as near to K u = f on the free unknowns as 60 iterations bring it."""
    u = np.zeros(len(load))
    u[held] = values
    right = load - matrix @ u
    right[held] = 0.0
    size = float(np.linalg.norm(right))
    if size == 0.0:
        return Outcome(u, 0, 0.0, True)
    try:
        levels, coarsest = _hierarchy(mesh, matrix, held)
    except RuntimeError:  # SuperLU on a singular matrix
        return Outcome(u, 0, 1.0, False)
    change, iterations, reached = _gradients(
        matrix, right, held, lambda residual: _cycle(levels, coarsest, residual)
    )
    rest = right - _multiply(matrix, change, held)
    residual = float(np.linalg.norm(rest))
    accepted = reached and residual <= residual_limit(matrix, change, right)
    return Outcome(u + change, iterations, residual / size, accepted)


def _gradients(
    matrix: sparse.csr_matrix, right: np.ndarray, held: np.ndarray, precondition: Solve
) -> tuple[np.ndarray, int, bool]:
    """Return the solution, the iterations, and whether their residual reached the tolerance."""
    u, step, rest = np.zeros_like(right), np.zeros_like(right), right.copy()
    size = norm = float(np.linalg.norm(right))
    before = np.inf
    for iteration in range(1, MOST_ITERATIONS + 1):
        correction = norm * precondition((rest / norm).astype(np.float32)).astype(np.float64)
        now = float(rest @ correction)
        step *= now / before
        step += correction
        before = now
        image = _multiply(matrix, step, held)
        work = float(step @ image)
        if not work > 0.0:
            return u, iteration, False
        length = now / work
        u += length * step
        rest -= length * image
        norm = float(np.linalg.norm(rest))
        if not norm > TOLERANCE * size:
            return u, iteration, bool(np.isfinite(norm))
    return u, MOST_ITERATIONS, False


def _cycle(levels: list[_Level], coarsest: Solve, residual: np.ndarray) -> np.ndarray:
    """Return one V-cycle's answer to a residual, from zero."""
    if not levels:
        return coarsest(residual)
    level = levels[0]
    x = _smooth(level, residual)
    below = (level.down @ (residual - level.times(x)).reshape(-1, 2)).ravel()
    below[level.held_below] = 0.0
    x += (level.up @ _cycle(levels[1:], coarsest, below).reshape(-1, 2)).ravel()
    x += _smooth(level, residual - level.times(x))
    return x


def _smooth(level: _Level, residual: np.ndarray) -> np.ndarray:
    """Return a Chebyshev polynomial of the residual, for the eigenvalues largest / 40 … largest."""
    half = 0.5 * level.largest * (1.0 - 1.0 / SMOOTHED_RANGE)
    centre = level.largest - half
    rho = half / centre
    step = level.inverse_diagonal * residual / centre
    x: np.ndarray = step.copy()
    for _ in range(SMOOTHER_DEGREE - 1):
        residual = residual - level.times(step)
        following = 1.0 / (2.0 * centre / half - rho)
        step *= following * rho
        step += (2.0 * following / half) * (level.inverse_diagonal * residual)
        x += step
        rho = following
    return x


def _multiply(matrix: sparse.csr_matrix, x: np.ndarray, held: np.ndarray) -> np.ndarray:
    image = np.asarray(matrix @ x)
    image[held] = 0.0
    return image


def _hierarchy(mesh: Mesh, matrix: sparse.csr_matrix, held: np.ndarray) -> tuple[list[_Level], Solve]:
    """Return the levels from fine to coarse and the direct solution below them.

    A coarse unknown is held where it would move a held one of the finer level.
    """
    levels = []
    degree, counts = mesh.degree, mesh.counts
    while matrix.shape[0] > LARGEST_COARSEST and (degree > 1 or max(counts.values()) > 1):
        if degree > 1:
            up, degree = degree_up(mesh), 1
        else:
            fewer = {family: -(-count // 2) for family, count in counts.items()}
            up, counts = counts_up(mesh.part, fewer, counts), fewer
        both = sparse.kron(up, sparse.identity(2), format="csr")
        marked = np.zeros(matrix.shape[0])
        marked[held] = 1.0
        held_below = np.flatnonzero(both.T @ marked)
        levels.append(_level(matrix, held, up, held_below))
        matrix, held = (both.T @ (matrix @ both)).tocsr(), held_below
    return levels, _factored(matrix, held)


def _level(
    matrix: sparse.csr_matrix, held: np.ndarray, up: sparse.csr_matrix, held_below: np.ndarray
) -> _Level:
    single = sparse.csr_matrix(
        (matrix.data.astype(np.float32), matrix.indices, matrix.indptr), shape=matrix.shape
    )
    inverse = (1.0 / matrix.diagonal()).astype(np.float32)
    largest = 1.1 * _largest_eigenvalue(single, inverse, held)
    up = up.astype(np.float32)
    return _Level(single, held, inverse, largest, up, up.T.tocsr(), held_below)


def _largest_eigenvalue(matrix: sparse.csr_matrix, inverse: np.ndarray, held: np.ndarray) -> float:
    """Return the largest eigenvalue of D^-1 K from below, by Lanczos steps; some per cent are missing."""
    root = np.sqrt(inverse)
    vector = np.random.default_rng(0).standard_normal(len(root), dtype=np.float32)
    vector[held] = 0.0
    vector /= np.linalg.norm(vector)
    earlier, beside = np.zeros_like(vector), 0.0
    diagonal, off = [], []
    for _ in range(LANCZOS_STEPS):
        image = root * _multiply(matrix, root * vector, held) - beside * earlier
        along = float(image @ vector)
        image -= along * vector
        beside = float(np.linalg.norm(image))
        diagonal.append(along)
        off.append(beside)
        earlier, vector = vector, image / beside
    small = np.diag(diagonal) + np.diag(off[:-1], 1) + np.diag(off[:-1], -1)
    return float(np.linalg.eigvalsh(small)[-1])


def _factored(matrix: sparse.csr_matrix, held: np.ndarray) -> Solve:
    free = np.ones(matrix.shape[0], dtype=bool)
    free[held] = False
    factor = splu(matrix[free][:, free].tocsc(), permc_spec="MMD_AT_PLUS_A")

    def solve(residual: np.ndarray) -> np.ndarray:
        x = np.zeros_like(residual)
        x[free] = factor.solve(residual[free].astype(np.float64))
        return np.asarray(x)

    return solve
