"""A direct solution of K u = f with prescribed unknowns, by SuperLU ordered for symmetric matrices.

One step of iterative refinement (Golub & Van Loan, Matrix Computations, sect. 3.5.3) keeps round-off below
the differences between fine levels.
"""

from typing import Any

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import splu

from convergence.errors import SolvingError

RESIDUAL_LIMIT = 1e-8
ROUND_OFF_LIMIT = 1e-5


def residual_limit(matrix: Any, u: np.ndarray, scale: float) -> float:
    """Return the largest residual that is accepted of K u = f, whose right-hand side has size `scale`.

    It is 1e-8 of the right-hand side. Slender parts of many cells cannot reach that: K times the rounding
    of u alone leaves more (Higham, Accuracy and Stability, sect. 7.1). That much is accepted up to 1e-5.
    """
    round_off = 10.0 * np.finfo(float).eps * float(np.linalg.norm(matrix.diagonal() * u))
    return max(RESIDUAL_LIMIT * scale, min(round_off, ROUND_OFF_LIMIT * scale), float(np.finfo(float).tiny))


class Factorization:
    """The factorized equations of the free unknowns. SolvingError where the supports leave the part loose."""

    def __init__(self, matrix: sparse.csr_matrix, held: np.ndarray):
        self.free = np.ones(matrix.shape[0], dtype=bool)
        self.free[held] = False
        self.held = held
        self.rows = matrix[self.free]
        self.reduced = self.rows[:, self.free].tocsc()
        try:
            self.factor = splu(
                self.reduced,
                permc_spec="MMD_AT_PLUS_A",
                diag_pivot_thresh=0.0,
                options={"SymmetricMode": True},
            )
        except RuntimeError as error:
            message = "the supports do not hold the part: the stiffness matrix is singular"
            raise SolvingError(message) from error

    def solve(self, load: np.ndarray, values: np.ndarray) -> np.ndarray:
        """Return u with u[held] = values.

        A solution whose residual exceeds `residual_limit` is refused with SolvingError: it is never used.
        """
        u = np.zeros(len(load))
        u[self.held] = values
        right = load[self.free] - self.rows @ u
        part = self.factor.solve(right)
        part += self.factor.solve(right - self.reduced @ part)
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
