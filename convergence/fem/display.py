"""What the figures need of a solved level, as plain arrays; cells of degree 2 are cut into four."""

import numpy as np

from convergence.fem.mesh import Mesh
from convergence.fem.recovery import cell_volumes, energy_error, nodal_values, recovered_stress
from convergence.fem.solution import Solution
from convergence.fem.stress import component
from convergence.fields import Fields

PLACES = {
    "triangle": ((0, 0), (1, 0), (0, 1), (0.5, 0), (0.5, 0.5), (0, 0.5)),
    "quadrilateral": ((0, 0), (1, 0), (1, 1), (0, 1), (0.5, 0), (1, 0.5), (0.5, 1), (0, 0.5), (0.5, 0.5)),
}
PIECES = {
    "triangle": ((0, 3, 5), (3, 1, 4), (5, 4, 2), (3, 4, 5)),
    "quadrilateral": ((0, 4, 8, 7), (4, 1, 5, 8), (8, 5, 2, 6), (7, 8, 6, 3)),
}


def display(solution: Solution) -> Fields:
    """Return the fields of a solution."""
    mesh = solution.mesh
    recovered = recovered_stress(solution)
    pieces = _pieces(mesh.shape, mesh.degree, mesh.skfem.elem.doflocs)
    dofs = mesh.skfem.dofs.element_dofs
    cells = np.concatenate([dofs[list(piece)] for piece in pieces], axis=1)
    return Fields(
        points=mesh.nodes,
        cells=cells,
        edges=_edges(mesh),
        boundary=_boundary(cells),
        displacement=solution.displacement,
        von_mises=component(nodal_values(solution, recovered), "von_mises"),
        error=np.tile(energy_error(solution) / cell_volumes(solution), len(pieces)),
    )


def _pieces(shape: str, degree: int, doflocs: np.ndarray) -> list[tuple[int, ...]]:
    """Return the local nodes of each piece of a cell, in scikit-fem's numbering."""
    corners = len(PIECES[shape][0])
    if degree == 1:
        return [tuple(range(corners))]
    number = [int(np.hypot(*(doflocs - place).T).argmin()) for place in PLACES[shape]]
    return [tuple(number[node] for node in piece) for piece in PIECES[shape]]


def _edges(mesh: Mesh) -> np.ndarray:
    """Return the nodes along each edge (2, e), with the one in the middle (3, e) at degree 2."""
    start, end = mesh.skfem.facets
    if mesh.degree == 1:
        return np.array([start, end])
    return np.array([start, mesh.skfem.dofs.facet_dofs[0], end])


def _boundary(cells: np.ndarray) -> np.ndarray:
    """Return the segments (2, b) that belong to one cell only."""
    segments = np.array([cells, np.roll(cells, -1, axis=0)]).reshape(2, -1)
    _, first, count = np.unique(np.sort(segments, axis=0), axis=1, return_index=True, return_counts=True)
    return segments[:, first[count == 1]]
