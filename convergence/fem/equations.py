"""The equations of a level, prepared once for any number of right-hand sides.

Multigrid for many unknowns, a direct factorization for few and where multigrid fails.
"""

import numpy as np
from scipy import sparse

from convergence.fem.held import Held
from convergence.fem.mesh import Mesh
from convergence.fem.multigrid import Multigrid
from convergence.fem.solvers import Factorization

MOST_DIRECT = {1: 10**9, 2: 20_000, 3: 6_000}


class Equations:
    """K u = f with held unknowns. The hierarchy or factorization is made at the first solution, then kept."""

    def __init__(self, mesh: Mesh, matrix: sparse.csr_matrix, held: Held):
        self.held, self.whole = held, matrix
        frame = held.frame
        self.matrix = matrix if frame is None else sparse.csr_matrix(frame.T @ matrix @ frame)
        self._mesh = mesh
        self._multigrid: Multigrid | None = None
        self._direct: Factorization | None = None
        self._few = matrix.shape[0] <= MOST_DIRECT[mesh.dimension]

    def solve(self, load: np.ndarray, values: np.ndarray, start: np.ndarray | None = None) -> np.ndarray:
        """Return u in the part's coordinates with the held unknowns at `values`. SolvingError as the solvers.

        `start` is a first guess, in the part's coordinates, for the solver that can use one.
        """
        right = self.held.turned(load)
        if not self._few:
            self._multigrid = self._multigrid or Multigrid(self._mesh, self.matrix, self.held)
            outcome = self._multigrid.solve(right, values, None if start is None else self.held.turned(start))
            if outcome.converged:
                return self.held.back(outcome.u)
            self._few = True
        self._direct = self._direct or Factorization(self.matrix, self.held.numbers)
        return self.held.back(self._direct.solve(right, values))
