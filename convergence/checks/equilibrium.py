"""Balance of forces and moments: loads and reactions, on every level.

The nodal forces K u − f of the supports against the applied loads, moments about the part's middle. It
proves bookkeeping and solver, not the mesh: it holds on any mesh to round-off. Limit: 1e-6 of the load
(common practice for a direct solver). Where another solver printed loads and reactions, these are balanced.
"""

import numpy as np

from convergence import statics
from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder
from convergence.statics import Balance

LIMIT = 1e-6


def record(solution: Solution) -> dict[str, float]:
    """Return out-of-balance force and moment, as shares of the load and of load × half the part's size."""
    nodes = solution.mesh.nodes
    dimension = solution.mesh.dimension
    about = tuple(nodes.mean(axis=1).tolist())
    applied = solution.resultant(solution.load, about)
    reactions = solution.resultant(solution.reactions, about)
    forces = solution.load if np.any(solution.load) else solution.reactions
    if solution.thermal is not None:
        forces = np.concatenate([forces, solution.thermal])
    size = np.linalg.norm(forces.reshape(-1, dimension), axis=1).sum()
    scale = max(float(size), float(np.finfo(float).tiny))
    missing = applied + reactions
    sums = {"load": applied, "reaction": reactions}
    return {
        "force": float(np.linalg.norm(missing[:dimension])) / scale,
        "moment": float(np.linalg.norm(missing[dimension:])) / (scale * 0.5 * solution.mesh.part.size),
        **{
            f"{what}_{axis}": float(total[number])
            for what, total in sums.items()
            for number, axis in enumerate("xyz"[:dimension])
        },
    }


def equilibrium(ladder: Ladder, facts: Facts) -> Check:
    """Pass where force and moment balance on every level, or in the printout of another solver."""
    if facts.balance is not None:
        return _of_printout(facts.balance)
    sums = (f"{what}_{axis}" for what in ("load", "reaction") for axis in "xyz")
    known = [name for name in sums if np.isfinite(ladder.column(f"equilibrium.{name}")).any()]
    columns = recorded(ladder, "equilibrium", "force", "moment", *known)
    if columns is None:
        return not_applicable("equilibrium", "The ladder has no loads and reactions.")
    worst = float(np.nanmax([columns["force"], columns["moment"]]))
    passed = worst <= LIMIT
    finding = (
        f"Loads and reactions balance to {worst:.1e} of the load on every level (allowed {LIMIT:.0e}). "
        "This proves bookkeeping and solver, not the mesh."
        if passed
        else f"Loads and reactions miss each other by {worst:.1e} of the load (allowed {LIMIT:.0e})."
    )
    spoils = {} if passed else {"": "loads and reactions are out of balance"}
    return Check("equilibrium", passed, finding, spoils, values=per_level(columns))


def _of_printout(balance: Balance) -> Check:
    """Return the outcome of a printout, which belongs to no level; too few digits make no statement."""
    spoils = {"": "the printed loads and reactions are out of balance"} if balance.passed is False else {}
    return Check("equilibrium", balance.passed, statics.finding(balance), spoils)
