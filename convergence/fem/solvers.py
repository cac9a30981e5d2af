"""A direct solution of K u = f with prescribed unknowns, by SuperLU ordered for symmetric matrices.

One step of iterative refinement (Golub & Van Loan, Matrix Computations, sect. 3.5.3) keeps round-off below
the differences between fine levels.
"""

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import splu

from convergence.errors import SolvingError

RESIDUAL_LIMIT = 1e-8


def direct(matrix: sparse.csr_matrix, load: np.ndarray, held: np.ndarray, values: np.ndarray) -> np.ndarray:
    """Return u with u[held] = values. SolvingError where the supports leave the part loose.

    A solution whose relative residual exceeds 1e-8 is refused: it is never used.
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
    scale = np.linalg.norm(right)
    if not np.isfinite(u).all() or residual > RESIDUAL_LIMIT * max(scale, np.finfo(float).tiny):
        raise SolvingError(
            f"the solution leaves a residual of {residual:.1e} (load {scale:.1e}); "
            "the supports may not hold the part, or the cells are badly shaped"
        )
    return u
