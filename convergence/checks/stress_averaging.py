"""Averaged against unaveraged stress around the hot spot of every level.

Where cells meet, their own von Mises stresses differ; half their spread over the average at the hot spot is
a plain witness of the mesh. A hot spot in a corner has one cell only, so all nodes of the cells that touch
it are looked at. Up to 5 % is good, up to 10 % acceptable, more asks for refinement (common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.recovery import nodal_values, recovered_stress
from convergence.fem.solution import Solution
from convergence.fem.stress import cell_node_stress, component, nodal_average
from convergence.results import Check, Facts, Ladder

GOOD, LIMIT = 0.05, 0.10


def record(solution: Solution) -> dict[str, float]:
    """Return half the largest spread around the node of the largest recovered von Mises stress, and where."""
    hot = int(component(nodal_values(solution, recovered_stress(solution)), "von_mises").argmax())
    at_cell_nodes = cell_node_stress(solution)
    dofs = solution.mesh.skfem.dofs.element_dofs
    direct = component(at_cell_nodes, "von_mises")
    high, low = np.full((2, solution.mesh.nodes.shape[1]), [[-np.inf], [np.inf]])
    np.maximum.at(high, dofs, direct)
    np.minimum.at(low, dofs, direct)
    around = np.unique(dofs[:, (dofs == hot).any(axis=0)])
    average = float(component(nodal_average(solution, at_cell_nodes)[:, hot], "von_mises"))
    x, y = solution.mesh.nodes[:, hot]
    spread = 0.5 * float((high - low)[around].max()) / max(average, float(np.finfo(float).tiny))
    return {"spread": spread, "average": average, "x": float(x), "y": float(y)}


def _grade(spread: float) -> str:
    if spread <= GOOD:
        return "good"
    return "acceptable" if spread <= LIMIT else "too much: refine there"


def stress_averaging(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the spread around the hot spot of the finest level is within 10 %."""
    columns = recorded(ladder, "stress_averaging", "spread", "average", "x", "y")
    if columns is None:
        return not_applicable("stress_averaging", "The ladder has no element stresses of our own solver.")
    spread, x, y = (float(columns[name][-1]) for name in ("spread", "x", "y"))
    word = _grade(spread)
    finding = (
        f"Around the hot spot ({x:.4g}, {y:.4g}) of the finest level the cells' stresses differ from "
        f"their average by up to {100 * spread:.2g} %: {word}."
    )
    return Check("stress_averaging", spread <= LIMIT, finding, values=per_level(columns))
