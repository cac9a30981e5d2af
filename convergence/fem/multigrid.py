"""Conjugate gradients for K u = f, preconditioned by geometric multigrid over the part's blocks.

V(1,1) cycles with Chebyshev smoothing (Saad, Iterative Methods for Sparse Linear Systems, 2nd ed., alg. 12.1
and 13.2; Adams et al. 2003, J. Comput. Phys. 188:593). A grid of degree 2 is one of twice the steps, and each
coarser level has half the steps, along all edges or along those in which cells are short (`coarsening`).
Coarse matrices are projected, P' K P, so no coarse mesh is needed. Where coarser grids stop to help, or few
unknowns are left, the rest is solved directly.

Vectors keep their held unknowns, at zero. Cycles run in single precision, the gradients in double.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import partial

import numpy as np
from scipy import sparse

from convergence.errors import SolvingError
from convergence.fem.aggregation import aggregated, from_vertices, vertices
from convergence.fem.coarsening import coarser, family_lengths
from convergence.fem.given_part import GivenPart
from convergence.fem.gradients import Solve, gradients, multiply
from convergence.fem.held import Held
from convergence.fem.mesh import Mesh
from convergence.fem.products import Matrix, NodeRows, in_single, is_compiled
from convergence.fem.solvers import ROUND_OFF_LIMIT, factorized
from convergence.fem.transfer import prolongation

# smoothers to try, by dimension: their degree and the part of the spectrum they damp (measured); the last
# serve cells drawn out in different directions, up to an aspect of 100
SMOOTHERS = {2: ((2, 15.0), (4, 40.0), (12, 400.0)), 3: ((4, 40.0), (12, 400.0))}
LARGEST_COARSEST = 3000
TINY = float(np.finfo(float).tiny)
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

    matrix: Matrix
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
        compiled = is_compiled(matrix.shape[0], mesh.dimension)
        self.product: Matrix = NodeRows(matrix, mesh.dimension) if compiled else matrix
        self.smoothers = SMOOTHERS[mesh.dimension]
        self.coarsest: Solve | None
        try:
            self.levels, self.coarsest = _hierarchy(mesh, matrix, held, self.product)
        except SolvingError:  # singular, or too large for the memory
            self.coarsest = None

    def solve(self, load: np.ndarray, values: np.ndarray, start: np.ndarray | None = None) -> Outcome:
        """Return u with u[held] = values, as near to K u = f elsewhere as 60 iterations a smoother bring it.

        The error is measured in the energy norm, against that of the solution or of a first guess; besides, a
        residual above what rounding leaves to a slender part is refused.
        """
        u = np.zeros(len(load)) if start is None else start.copy()
        u[self.held] = values
        forces = self.matrix @ u
        energy = None if start is None else float(u @ forces)
        coarsest = self.coarsest
        if coarsest is None:
            return Outcome(u, 0, 1.0, False)
        total = 0
        for smoother in self.smoothers:
            right = np.asarray(load - forces)
            right[self.held] = 0.0
            cycle = partial(_cycle, self.levels, coarsest, smoother)
            change, iterations, reached = gradients(self.product, right, self.held, energy, cycle)
            u += change
            total += iterations
            forces = self.matrix @ u
            if reached:
                break
            energy = float(u @ forces)
        rest = np.asarray(load - forces)
        size = max(float(np.linalg.norm(load)), float(np.linalg.norm(rest[self.held])))
        rest[self.held] = 0.0
        residual = float(np.linalg.norm(rest))
        return Outcome(
            u, total, residual / max(size, TINY), reached and residual <= ROUND_OFF_LIMIT * max(size, TINY)
        )


def _cycle(
    levels: list[_Level], coarsest: Solve, smoother: Smoother, residual: np.ndarray, *, finest: bool = True
) -> np.ndarray:
    """Return one V-cycle's answer to a residual, from zero.

    Coarser levels are smoothed more, so that iterations do not grow with the number of levels (the variable
    V-cycle of Bramble & Pasciak 1987, Math. Comp. 49:311, from memory).
    """
    if not levels:
        return coarsest(residual)
    level = levels[0]
    coarser_smoother = (2 * smoother[0], 2.7 * smoother[1]) if finest else smoother
    x = _smooth(level, residual, smoother)
    below = level.coarser(residual - level.times(x))
    x += level.finer(_cycle(levels[1:], coarsest, coarser_smoother, below, finest=False))
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


def _hierarchy(
    mesh: Mesh, matrix: sparse.csr_matrix, held: Held, product: Matrix
) -> tuple[list[_Level], Solve]:
    """Return the levels from fine to coarse and the direct solution, or of given meshes the cycle, below.

    A coarse unknown is held where it would move a held one of the finer level. `product` multiplies by the
    matrix; those of the coarser levels are of its kind.
    """
    levels = []
    numbers, frame, dimension = held.numbers, held.frame, mesh.dimension
    for up in _steps(mesh):
        if matrix.shape[0] <= LARGEST_COARSEST:
            break
        both = sparse.kron(up, sparse.identity(dimension), format="csr")
        if frame is not None:
            both, frame = sparse.csr_matrix(frame.T @ both), None
        down = both.T.tocsr()
        marked = np.zeros(matrix.shape[0])
        marked[numbers] = 1.0
        held_below = np.flatnonzero(abs(down) @ marked > 1e-12)
        levels.append(_level(matrix.diagonal(), in_single(product), numbers, (both, down), held_below))
        matrix, numbers = (
            (down @ (matrix @ both)).T.tocsr(),
            held_below,
        )  # symmetric: turning it sorts its rows
        product = NodeRows(matrix, dimension) if isinstance(product, NodeRows) else matrix
    if isinstance(mesh.part, GivenPart):
        return levels, aggregated(matrix, numbers, mesh.nodes[:, vertices(mesh)], frame)
    return levels, _factored(matrix, numbers)


def _steps(mesh: Mesh) -> Iterator[sparse.csr_matrix]:
    """Yield the matrices between the nodes of one level and the next coarser one, from the finest down."""
    if isinstance(mesh.part, GivenPart):
        if mesh.degree == 2:
            yield from_vertices(mesh)
        return
    lengths = family_lengths(mesh.part)
    steps: Mapping[int, int] = {family: mesh.degree * count for family, count in mesh.counts.items()}
    while (fewer := coarser(lengths, steps)) is not None:
        yield prolongation(mesh.part, (fewer, 1), (steps, 1))
        steps = fewer


def _level(
    diagonal: np.ndarray,
    single: Matrix,
    held: np.ndarray,
    transfers: tuple[sparse.csr_matrix, sparse.csr_matrix],
    held_below: np.ndarray,
) -> _Level:
    inverse = (1.0 / diagonal).astype(np.float32)
    largest = 1.1 * _largest_eigenvalue(single, inverse, held)
    up, down = (each.astype(np.float32) for each in transfers)
    return _Level(single, held, inverse, largest, up, down, held_below)


def _largest_eigenvalue(matrix: Matrix, inverse: np.ndarray, held: np.ndarray) -> float:
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
    inverse = factorized(matrix[free][:, free].tocsc())

    def solve(residual: np.ndarray) -> np.ndarray:
        x = np.zeros_like(residual)
        x[free] = inverse(residual[free].astype(np.float64))
        return x

    return solve
