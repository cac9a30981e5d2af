"""Stress of a solution inside cells as the elements give it, and its invariants.

Stresses have the components of `strain`: xx, yy, zz, xy in a plane, yz and zx behind them in a solid.
"""

from typing import Literal

import numpy as np

from convergence.fem.geometry import Geometry, geometry, interpolate
from convergence.fem.solution import Solution
from convergence.fem.strain import HOOP, ON_AXIS, is_heated, strain_operator, thermal_strain, unknowns

Component = Literal["xx", "yy", "zz", "xy", "yz", "zx", "von_mises", "first_principal", "third_principal"]
COMPONENTS = ("xx", "yy", "zz", "xy", "yz", "zx")


def component(stress: np.ndarray, name: Component) -> np.ndarray:
    """Return a component, principal or von Mises stress of stresses (1, 4 or 6, ...).

    The principal stresses are the largest and smallest of the three, the one out of plane included. A
    component that the stress does not have is zero.
    """
    if name in COMPONENTS:
        row = COMPONENTS.index(name)
        return np.asarray(stress[row]) if row < len(stress) else np.zeros_like(stress[0])
    if len(stress) == 1:
        if name == "von_mises":
            return np.asarray(np.abs(stress[0]))
        return np.asarray(np.clip(stress[0], *((0.0, None) if name == "first_principal" else (None, 0.0))))
    xx, yy, zz, *shear = stress
    if name == "von_mises":
        squares = (xx - yy) ** 2 + (yy - zz) ** 2 + (zz - xx) ** 2
        return np.asarray(np.sqrt(0.5 * squares + 3.0 * sum(part**2 for part in shear)))
    last = name == "first_principal"
    if len(stress) == 6:
        return np.asarray(_principal(stress)[..., -1 if last else 0])
    middle, radius = 0.5 * (xx + yy), np.hypot(0.5 * (xx - yy), shear[0])
    return np.asarray(np.maximum(middle + radius, zz) if last else np.minimum(middle - radius, zz))


def _principal(stress: np.ndarray) -> np.ndarray:
    """Return the principal stresses (..., 3), rising."""
    xx, yy, zz, xy, yz, zx = stress
    tensor = np.array([[xx, xy, zx], [xy, yy, yz], [zx, yz, zz]])
    return np.asarray(np.linalg.eigvalsh(np.moveaxis(tensor, (0, 1), (-2, -1))))


def direct_stress(solution: Solution, local: np.ndarray, cells: np.ndarray | None = None) -> np.ndarray:
    """Return the element stress (components, m, q) at local places (D, q) or (D, m, q) of cells."""
    chosen = np.arange(solution.mesh.cells) if cells is None else cells
    return stress_at(solution, geometry(solution.mesh, local, chosen), chosen)


def stress_at(solution: Solution, at: Geometry, cells: np.ndarray) -> np.ndarray:
    """Return the element stress (components, m, q) at points of cells."""
    strain = strain_at(solution, at, cells)
    stress = np.empty_like(strain)
    problem, regions = solution.problem, solution.mesh.regions
    for region, members in regions.items():
        mine = slice(None) if len(regions) == 1 else np.flatnonzero(np.isin(cells, members))
        elastic = strain[:, mine]
        if is_heated(problem):
            elastic = elastic - thermal_strain(problem, region, at.x[:, mine])
        elasticity = problem.materials[region].elasticity(problem.kind)
        stress[:, mine] = np.tensordot(elasticity, elastic, 1)
    return stress


def strain_at(solution: Solution, at: Geometry, cells: np.ndarray) -> np.ndarray:
    """Return the strain (components, m, q) at points of cells."""
    if solution.mesh.formulation == "mean dilatation":
        operator = strain_operator(solution.problem, solution.mesh, at, cells)
        u = solution.unknowns[unknowns(solution.mesh.cell_nodes[:, cells], solution.mesh.dimension)]
        return np.asarray(np.einsum("snmq,nm->smq", operator, u, optimize=True))
    g = gradient_at(solution, at, cells)
    if len(g) == 1:
        return np.asarray(g[0])
    if len(g) == 3:
        shear = [g[0, 1] + g[1, 0], g[1, 2] + g[2, 1], g[2, 0] + g[0, 2]]
        return np.array([g[0, 0], g[1, 1], g[2, 2], *shear])
    strain = np.array([g[0, 0], g[1, 1], np.zeros_like(g[0, 0]), g[0, 1] + g[1, 0]])
    if solution.problem.kind == "axisymmetric":
        x = at.x[0]
        u = interpolate(solution.displacement[:, solution.mesh.cell_nodes[:, cells]], at.shapes)[0]
        away = x > ON_AXIS * solution.mesh.part.size
        strain[HOOP] = np.where(away, u / np.where(away, x, 1.0), strain[0])
    return strain


def gradient_at(solution: Solution, at: Geometry, cells: np.ndarray) -> np.ndarray:
    """Return du_i/dx_j (D, D, m, q) at points of cells."""
    u = solution.displacement[:, solution.mesh.cell_nodes[:, cells]]
    return at.gradient(u)


def displacement_at(solution: Solution, local: np.ndarray, cells: np.ndarray) -> np.ndarray:
    """Return the displacement (D, m, q) at local places (D, q) or (D, m, q) of cells."""
    u = solution.displacement[:, solution.mesh.cell_nodes[:, cells]]
    return interpolate(u, solution.mesh.element.shapes(local))


def cell_node_stress(solution: Solution) -> np.ndarray:
    """Return the element stress at the nodes of each cell (components, nodes of a cell, cells)."""
    return np.swapaxes(direct_stress(solution, solution.mesh.element.nodes.T), 1, 2)
