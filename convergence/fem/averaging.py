"""Averaged against unaveraged stress around a node.

Where cells meet, their own von Mises stresses differ; half their spread over the average is a plain witness
of the mesh. A node in a corner has one cell only, so all nodes of the cells that touch it are looked at.
Materials are not mixed: stress jumps where they meet.
"""

import numpy as np

from convergence.fem.solution import Solution
from convergence.fem.stress import component, direct_stress


def stress_spread(solution: Solution, node: int, region: np.ndarray) -> tuple[float, float]:
    """Return half the largest spread around a node of the cells of a region over the average, and that."""
    mesh = solution.mesh
    nodes = mesh.cell_nodes[:, region]
    touching = (nodes == node).any(axis=0)
    around = np.isin(nodes, nodes[:, touching]).any(axis=0)
    near, nodes = region[around], nodes[:, around]
    stress = np.swapaxes(direct_stress(solution, mesh.element.nodes.T, near), 1, 2)
    direct = component(stress, "von_mises")
    high, low = np.full((2, mesh.nodes.shape[1]), [[-np.inf], [np.inf]])
    np.maximum.at(high, nodes, direct)
    np.minimum.at(low, nodes, direct)
    average = float(component(stress[:, nodes == node].mean(axis=1), "von_mises"))
    wanted = mesh.cell_nodes[:, region[touching]]
    return 0.5 * float((high - low)[wanted].max()) / max(average, float(np.finfo(float).tiny)), average
