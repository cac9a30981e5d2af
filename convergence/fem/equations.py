"""The equations of a level: multigrid for many unknowns, direct for few and where multigrid fails."""

import numpy as np
from scipy import sparse

from convergence.fem.mesh import Mesh
from convergence.fem.multigrid import multigrid
from convergence.fem.solvers import direct

MOST_DIRECT = 20_000


def solve_equations(
    mesh: Mesh, matrix: sparse.csr_matrix, load: np.ndarray, held: np.ndarray, values: np.ndarray
) -> np.ndarray:
    """Return u with u[held] = values and K u = f elsewhere. SolvingError as `direct`."""
    if len(load) > MOST_DIRECT:
        outcome = multigrid(mesh, matrix, load, held, values)
        if outcome.converged:
            return outcome.u
    return direct(matrix, load, held, values)
