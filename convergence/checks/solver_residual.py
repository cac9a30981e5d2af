"""Residual of the equations on every level, against the change between the last two levels.

Iterative and round-off error should stay two to three orders below the discretization error (common
practice; also asked for by Celik et al. 2008, J. Fluids Eng. 130:078001). Limit: 1e-8 of the nodal forces.
"""

import numpy as np

from convergence.checks._ladder import largest_share
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMIT = 1e-8


def record(solution: Solution) -> dict[str, float]:
    """Return ‖K u − f − reactions‖ over the norm of all nodal forces."""
    left = solution.internal - solution.load - solution.reactions
    scale = np.linalg.norm(solution.load) + np.linalg.norm(solution.reactions)
    return {"relative": float(np.linalg.norm(left) / max(scale, np.finfo(float).tiny))}


def solver_residual(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the residual is below the limit on every level."""
    return largest_share(
        ladder,
        "solver_residual",
        "relative",
        limit=LIMIT,
        says="The equations are solved to {worst} of the nodal forces",
        failure="the equations are not solved accurately enough",
        missing="The ladder has no residuals of our own solver.",
    )
