"""Stress of a solution: xx, yy, zz, xy inside cells as the elements give it, and its invariants."""

from typing import Any, Literal

import numpy as np

from convergence.fem.solution import Solution

Component = Literal["xx", "yy", "zz", "xy", "von_mises", "first_principal", "third_principal"]
COMPONENTS = ("xx", "yy", "zz", "xy")


def component(stress: np.ndarray, name: Component) -> np.ndarray:
    """Return a component, principal or von Mises stress of stresses (4, ...) xx, yy, zz, xy.

    The principal stresses are the largest and smallest of the three, the one out of plane included.
    """
    xx, yy, zz, xy = stress
    if name in COMPONENTS:
        return np.asarray(stress[COMPONENTS.index(name)])
    if name == "von_mises":
        squares = (xx - yy) ** 2 + (yy - zz) ** 2 + (zz - xx) ** 2
        return np.asarray(np.sqrt(0.5 * squares + 3.0 * xy**2))
    middle, radius = 0.5 * (xx + yy), np.hypot(0.5 * (xx - yy), xy)
    if name == "first_principal":
        return np.asarray(np.maximum(middle + radius, zz))
    return np.asarray(np.minimum(middle - radius, zz))


def direct_stress(solution: Solution, local: np.ndarray, cells: np.ndarray | None = None) -> np.ndarray:
    """Return the element stress (4, cells, points) at local places (2, points) or (2, cells, points)."""
    mesh = solution.mesh
    chosen = np.arange(mesh.cells) if cells is None else cells
    gradient = displacement_gradient(solution, local, chosen)
    hoop = _hoop_strain(solution, local, chosen, gradient[0, 0])
    strain = np.array([gradient[0, 0], gradient[1, 1], hoop, gradient[0, 1] + gradient[1, 0]])
    stress = np.zeros_like(strain)
    for region, members in mesh.regions.items():
        mine = np.isin(chosen, members)
        elasticity = solution.problem.materials[region].elasticity(solution.problem.kind)
        stress[:, mine] = np.einsum("st,teq->seq", elasticity, strain[:, mine])
    return stress


def _hoop_strain(solution: Solution, local: np.ndarray, cells: np.ndarray, radial: np.ndarray) -> np.ndarray:
    """Return u/x of an axisymmetric problem, du/dx on its axis; zero in a plane."""
    if solution.problem.kind != "axisymmetric":
        return np.zeros_like(radial)
    mesh = solution.mesh
    x = np.broadcast_to(np.asarray(mesh.skfem.mapping().F(local, tind=cells))[0], radial.shape)
    u = displacement_at(solution, local, cells)[0]
    away = x > 1e-9 * mesh.part.size
    return np.where(away, u / np.where(away, x, 1.0), radial)


def displacement_at(solution: Solution, local: np.ndarray, cells: np.ndarray) -> np.ndarray:
    """Return the displacement (2, cells, points) at local places (2, points) or (2, cells, points)."""
    mapping, element = solution.mesh.skfem.mapping(), solution.mesh.skfem.elem()
    total: Any = 0.0
    for number, nodes in enumerate(solution.mesh.skfem.dofs.element_dofs[:, cells]):
        shape = np.asarray(element.gbasis(mapping, local, number, tind=cells)[0])
        total = total + solution.displacement[:, nodes][:, :, None] * shape
    return np.asarray(total)


def displacement_gradient(solution: Solution, local: np.ndarray, cells: np.ndarray) -> np.ndarray:
    """Return du_i/dx_j (2, 2, cells, points)."""
    mapping = solution.mesh.skfem.mapping()
    element = solution.mesh.skfem.elem()
    dofs = solution.mesh.skfem.dofs.element_dofs[:, cells]
    total: Any = 0.0
    for number in range(dofs.shape[0]):
        shape_gradient = np.asarray(element.gbasis(mapping, local, number, tind=cells)[0].grad)
        u = solution.displacement[:, dofs[number]]
        total = total + u[:, None, :, None] * shape_gradient[None]
    return np.asarray(total)


def cell_node_stress(solution: Solution) -> np.ndarray:
    """Return the element stress at the nodes of each cell (4, nodes of a cell, cells)."""
    local = solution.mesh.skfem.elem.doflocs.T
    return np.swapaxes(direct_stress(solution, local), 1, 2)


def nodal_average(solution: Solution, at_cell_nodes: np.ndarray) -> np.ndarray:
    """Return the average (4, nodes) of stresses (4, nodes of a cell, cells) over the cells at a node."""
    dofs = solution.mesh.skfem.dofs.element_dofs
    count = np.bincount(dofs.ravel(), minlength=solution.mesh.nodes.shape[1])
    sums = [
        np.bincount(dofs.ravel(), weights=values.ravel(), minlength=len(count)) for values in at_cell_nodes
    ]
    return np.array(sums) / count
