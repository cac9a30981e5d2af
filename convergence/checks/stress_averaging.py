"""Averaged against unaveraged stress around the hot spot of every level.

Where cells meet, their own von Mises stresses differ; half their spread over the average at the hot spot is
a plain witness of the mesh. A hot spot in a corner has one cell only, so all nodes of the cells that touch
it are looked at. Materials are not mixed: stress jumps where they meet. Up to 5 % is good, up to 10 %
acceptable, more asks for refinement (common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, place_words, recorded
from convergence.fem.recovery import recovered_von_mises
from convergence.fem.solution import Solution
from convergence.fem.stress import component, direct_stress
from convergence.results import Check, Facts, Ladder

GOOD, LIMIT = 0.05, 0.10


def record(solution: Solution) -> dict[str, float]:
    """Return half the largest spread around the node of the largest recovered von Mises stress, and where."""
    mesh = solution.mesh
    recovered = recovered_von_mises(solution)
    place, cell = np.unravel_index(recovered.argmax(), recovered.shape)
    hot = int(mesh.cell_nodes[place, cell])
    region = next(cells for cells in mesh.regions.values() if cell in cells)
    nodes = mesh.cell_nodes[:, region]
    touching = (nodes == hot).any(axis=0)
    around = np.isin(nodes, nodes[:, touching]).any(axis=0)
    near, nodes = region[around], nodes[:, around]
    stress = np.swapaxes(direct_stress(solution, mesh.element.nodes.T, near), 1, 2)
    direct = component(stress, "von_mises")
    high, low = np.full((2, mesh.nodes.shape[1]), [[-np.inf], [np.inf]])
    np.maximum.at(high, nodes, direct)
    np.minimum.at(low, nodes, direct)
    average = float(component(stress[:, nodes == hot].mean(axis=1), "von_mises"))
    wanted = mesh.cell_nodes[:, region[touching]]
    spread = 0.5 * float((high - low)[wanted].max()) / max(average, float(np.finfo(float).tiny))
    at = dict(zip("xyz", mesh.nodes[:, hot].tolist(), strict=False))
    return {"spread": spread, "average": average, **at}


def _grade(spread: float) -> str:
    if spread <= GOOD:
        return "good"
    return "acceptable" if spread <= LIMIT else "too much: refine there"


def stress_averaging(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the spread around the hot spot of the finest level is within 10 %."""
    columns = recorded(ladder, "stress_averaging", "spread", "average", "x", "y")
    if columns is None:
        return not_applicable("stress_averaging", "The ladder has no element stresses of our own solver.")
    spread = float(columns["spread"][-1])
    place = place_words(ladder, "stress_averaging")
    word = _grade(spread)
    finding = (
        f"Around the hot spot {place} of the finest level the cells' stresses differ from "
        f"their average by up to {100 * spread:.2g} %: {word}."
    )
    return Check("stress_averaging", spread <= LIMIT, finding, values=per_level(columns))
