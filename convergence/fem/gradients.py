"""Preconditioned conjugate gradients that stop on the error in the energy norm.

Saad, Iterative Methods for Sparse Linear Systems, 2nd ed., alg. 9.1; r·M r is the squared energy norm of the
error to the degree that the preconditioner M is the inverse of K.
"""

from collections.abc import Callable

import numpy as np

from convergence.fem.products import Matrix

TOLERANCE = 1e-10
MOST_ITERATIONS = 60
Solve = Callable[[np.ndarray], np.ndarray]


def gradients(
    matrix: Matrix,
    right: np.ndarray,
    held: np.ndarray,
    energy: float | None,
    precondition: Solve,
) -> tuple[np.ndarray, int, bool]:
    """Return the solution, the iterations, and whether its error fell to the tolerance of `energy`.

    `energy` is u·K u of the solution, that of the first cycle where None.
    """
    u, step, rest = np.zeros_like(right), np.zeros_like(right), right.copy()
    before = np.inf
    for iteration in range(MOST_ITERATIONS + 1):
        norm = float(np.linalg.norm(rest))
        if norm == 0.0:
            return u, iteration, True
        correction = norm * precondition((rest / norm).astype(np.float32)).astype(np.float64)
        now = float(rest @ correction)
        energy = now if energy is None else energy
        if now <= TOLERANCE**2 * energy or iteration == MOST_ITERATIONS:
            return u, iteration, bool(0.0 <= now <= TOLERANCE**2 * energy)
        step *= now / before
        step += correction
        before = now
        image = multiply(matrix, step, held)
        work = float(step @ image)
        if not work > 0.0:
            return u, iteration, False
        length = now / work
        u += length * step
        rest -= length * image
    raise AssertionError("the last iteration returns")


def multiply(matrix: Matrix, x: np.ndarray, held: np.ndarray) -> np.ndarray:
    """Return K x with zeros at the held unknowns."""
    image = np.asarray(matrix @ x)
    image[held] = 0.0
    return image
