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


def residual_limit(matrix: Any, u: np.ndarray, right: np.ndarray) -> float:
    """Return the largest residual that is accepted of K u = right.

    It is 1e-8 of the right-hand side. Slender parts of many cells cannot reach that: K times the rounding
    of u alone leaves more (Higham, Accuracy and Stability, sect. 7.1). That much is accepted up to 1e-5.
    """
    scale = float(np.linalg.norm(right))
    round_off = 10.0 * np.finfo(float).eps * float(np.linalg.norm(matrix.diagonal() * u))
    return max(RESIDUAL_LIMIT * scale, min(round_off, ROUND_OFF_LIMIT * scale), float(np.finfo(float).tiny))


def direct(matrix: sparse.csr_matrix, load: np.ndarray, held: np.ndarray, values: np.ndarray) -> np.ndarray:
    """Return u with u[held] = values. SolvingError where the supports leave the part loose.

    A solution whose residual exceeds `residual_limit` is refused: it is never used.
    """
    free = np.ones(len(load), dtype=bool)
    free[held] = False
    u = np.zeros(len(load))
    u[held] = values
    rows = matrix[free]
    right = load[free] - rows @ u
    reduced = rows[:, free].tocsc()
    try:
        factor = splu(
            reduced, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True}
        )
    except RuntimeError as error:
        raise SolvingError("the supports do not hold the part: the stiffness matrix is singular") from error
    u[free] = factor.solve(right)
    u[free] += factor.solve(right - reduced @ u[free])
    residual = np.linalg.norm(reduced @ u[free] - right)
    if not np.isfinite(u).all() or residual > residual_limit(reduced, u[free], right):
        raise SolvingError(
            f"the solution leaves a residual of {residual:.1e} (load {np.linalg.norm(right):.1e}); "
            "the supports may not hold the part, or the cells are badly shaped"
        )
    return u
