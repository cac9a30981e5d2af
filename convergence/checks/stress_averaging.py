"""Averaged against unaveraged stress at the hot spot of every level.

Where cells meet, their own von Mises stresses differ; half their spread over the average is a plain
witness of the mesh. Up to 5 % is good, up to 10 % acceptable, above 20 % asks for refinement (common
practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.recovery import nodal_values, recovered_stress
from convergence.fem.solution import Solution
from convergence.fem.stress import cell_node_stress, component, nodal_average
from convergence.results import Check, Facts, Ladder

GOOD, LIMIT = 0.05, 0.10


def record(solution: Solution) -> dict[str, float]:
    """Return half the spread over the average at the node with the largest recovered von Mises stress."""
    hot = int(component(nodal_values(solution, recovered_stress(solution)), "von_mises").argmax())
    at_cell_nodes = cell_node_stress(solution)
    mine = solution.mesh.skfem.dofs.element_dofs == hot
    direct = component(at_cell_nodes[:, mine], "von_mises")
    average = float(component(nodal_average(solution, at_cell_nodes)[:, hot], "von_mises"))
    x, y = solution.mesh.nodes[:, hot]
    spread = 0.5 * float(np.ptp(direct)) / max(average, float(np.finfo(float).tiny))
    return {"spread": spread, "average": average, "x": float(x), "y": float(y)}


def _grade(spread: float) -> str:
    if spread <= GOOD:
        return "good"
    return "acceptable" if spread <= LIMIT else "too much: refine there"


def stress_averaging(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the spread at the hot spot of the finest level is within 10 %."""
    columns = recorded(ladder, "stress_averaging", "spread", "average", "x", "y")
    if columns is None:
        return not_applicable("stress_averaging", "The ladder has no element stresses of our own solver.")
    spread, x, y = (float(columns[name][-1]) for name in ("spread", "x", "y"))
    word = _grade(spread)
    finding = (
        f"At the hot spot ({x:.4g}, {y:.4g}) of the finest level the cells' stresses differ from "
        f"their average by {100 * spread:.2g} %: {word}."
    )
    return Check("stress_averaging", spread <= LIMIT, finding, values=per_level(columns))
