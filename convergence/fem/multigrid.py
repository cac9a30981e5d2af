"""Conjugate gradients for K u = f, preconditioned by geometric multigrid over the part's blocks.

V(1,1) cycles with Chebyshev smoothing (Saad, Iterative Methods for Sparse Linear Systems, 2nd ed., alg. 12.1
and 13.2; Adams et al. 2003, J. Comput. Phys. 188:593) on the levels degree 2, degree 1, and then half the
cells along every edge. Coarse matrices are projected, P' K P, so no coarse mesh is needed. Cells of
aspect 5 and more cost iterations.

Vectors keep their held unknowns, at zero. Cycles run in single precision, the gradients in double.
"""

from dataclasses import dataclass
from functools import partial

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import splu

from convergence.fem.gradients import Solve, gradients, multiply
from convergence.fem.held import Held
from convergence.fem.mesh import Mesh
from convergence.fem.solvers import residual_limit
from convergence.fem.transfer import prolongation

# smoothers to try, by dimension: their degree and the part of the spectrum they damp (measured)
SMOOTHERS = {2: ((2, 15.0), (4, 40.0)), 3: ((4, 40.0), (6, 90.0))}
LARGEST_COARSEST = 3000
LANCZOS_STEPS = 8
Smoother = tuple[int, float]


@dataclass(frozen=True, eq=False)
class Outcome:
    """A solution, not to be used unless converged. `residual` is relative to the right-hand side."""

    u: np.ndarray
    iterations: int
    residual: float
    converged: bool


@dataclass(frozen=True, eq=False)
class _Level:
    """A level in single precision: `up` brings displacements to it from the next coarser one."""

    matrix: sparse.csr_matrix
    held: np.ndarray
    inverse_diagonal: np.ndarray
    largest: float
    up: sparse.csr_matrix
    down: sparse.csr_matrix
    held_below: np.ndarray

    def times(self, x: np.ndarray) -> np.ndarray:
        """Return K x of the free unknowns."""
        return multiply(self.matrix, x, self.held)

    def coarser(self, x: np.ndarray) -> np.ndarray:
        """Return forces on the next coarser level."""
        below = np.asarray(self.down @ x)
        below[self.held_below] = 0.0
        return below

    def finer(self, x: np.ndarray) -> np.ndarray:
        """Return displacements of the next coarser level on this one."""
        return np.asarray(self.up @ x)


class Multigrid:
    """The hierarchy below a matrix, made once for any number of right-hand sides."""

    def __init__(self, mesh: Mesh, matrix: sparse.csr_matrix, held: Held):
        self.matrix, self.held = matrix, held.numbers
        self.smoothers = SMOOTHERS[mesh.dimension]
        self.coarsest: Solve | None
        try:
            self.levels, self.coarsest = _hierarchy(mesh, matrix, held)
        except RuntimeError:  # SuperLU on a singular matrix
            self.coarsest = None

    def solve(self, load: np.ndarray, values: np.ndarray, start: np.ndarray | None = None) -> Outcome:
        """Return u with u[held] = values, as near to K u = f elsewhere as 60 iterations a smoother bring it.

        The error is measured in the energy norm, against that of the solution or of a first guess.
        """
        u = np.zeros(len(load)) if start is None else start.copy()
        u[self.held] = values
        forces = self.matrix @ u
        energy = None if start is None else float(u @ forces)
        right = np.asarray(load - forces)
        right[self.held] = 0.0
        coarsest = self.coarsest
        if coarsest is None:
            return Outcome(u, 0, 1.0, False)
        total = 0
        for smoother in self.smoothers:
            cycle = partial(_cycle, self.levels, coarsest, smoother)
            change, iterations, reached = gradients(self.matrix, right, self.held, energy, cycle)
            u += change
            total += iterations
            if reached:
                break
            energy = float(u @ (self.matrix @ u))
            right = load - self.matrix @ u
            right[self.held] = 0.0
        rest = np.asarray(load - self.matrix @ u)
        size = max(float(np.linalg.norm(load)), float(np.linalg.norm(rest[self.held])))
        rest[self.held] = 0.0
        residual = float(np.linalg.norm(rest))
        accepted = reached and residual <= residual_limit(self.matrix, u, size)
        return Outcome(u, total, residual / max(size, float(np.finfo(float).tiny)), accepted)


def _cycle(levels: list[_Level], coarsest: Solve, smoother: Smoother, residual: np.ndarray) -> np.ndarray:
    """Return one V-cycle's answer to a residual, from zero."""
    if not levels:
        return coarsest(residual)
    level = levels[0]
    x = _smooth(level, residual, smoother)
    below = level.coarser(residual - level.times(x))
    x += level.finer(_cycle(levels[1:], coarsest, smoother, below))
    x += _smooth(level, residual - level.times(x), smoother)
    return x


def _smooth(level: _Level, residual: np.ndarray, smoother: Smoother) -> np.ndarray:
    """Return a Chebyshev polynomial of the residual, for the eigenvalues largest / range … largest."""
    degree, damped = smoother
    half = 0.5 * level.largest * (1.0 - 1.0 / damped)
    centre = level.largest - half
    rho = half / centre
    step = level.inverse_diagonal * residual / centre
    x: np.ndarray = step.copy()
    for _ in range(degree - 1):
        residual = residual - level.times(step)
        following = 1.0 / (2.0 * centre / half - rho)
        step *= following * rho
        step += (2.0 * following / half) * (level.inverse_diagonal * residual)
        x += step
        rho = following
    return x


def _hierarchy(mesh: Mesh, matrix: sparse.csr_matrix, held: Held) -> tuple[list[_Level], Solve]:
    """Return the levels from fine to coarse and the direct solution below them.

    A coarse unknown is held where it would move a held one of the finer level.
    """
    levels = []
    degree, counts, dimension = mesh.degree, mesh.counts, mesh.dimension
    numbers, frame = held.numbers, held.frame
    while matrix.shape[0] > LARGEST_COARSEST and (degree > 1 or max(counts.values()) > 1):
        fewer = counts if degree > 1 else {family: -(-count // 2) for family, count in counts.items()}
        up = prolongation(mesh.part, (fewer, 1), (counts, degree))
        counts, degree = fewer, 1
        both = sparse.kron(up, sparse.identity(dimension), format="csr")
        if frame is not None:
            both, frame = sparse.csr_matrix(frame.T @ both), None
        marked = np.zeros(matrix.shape[0])
        marked[numbers] = 1.0
        held_below = np.flatnonzero(abs(both).T @ marked > 1e-12)
        levels.append(_level(matrix, numbers, both, held_below))
        matrix, numbers = (both.T @ (matrix @ both)).tocsr(), held_below
    return levels, _factored(matrix, numbers)


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
        image = root * multiply(matrix, root * vector, held) - beside * earlier
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
