"""Strain energy against the work of loads and prescribed displacements, on every level.

½ u·K u = ½ (f + reactions)·u (Clapeyron's theorem). It proves the solver, not the mesh. Limit: 1e-8
(common practice for a direct solver).
"""

import numpy as np

from convergence.checks._ladder import largest_share
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMIT = 1e-8


def record(solution: Solution) -> dict[str, float]:
    """Return the difference as a share of the energy."""
    energy = solution.quadratic_energy
    return {"difference": abs(energy - solution.work) / max(abs(energy), float(np.finfo(float).tiny))}


def energy_balance(ladder: Ladder, facts: Facts) -> Check:
    """Pass where energy and work agree on every level."""
    return largest_share(
        ladder,
        "energy_balance",
        "difference",
        limit=LIMIT,
        says="Strain energy and external work differ by at most {worst}",
        failure="strain energy and external work disagree",
        missing="The ladder has no energies of our own solver.",
    )
