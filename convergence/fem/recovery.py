"""Recovered stress, and the error in the energy norm made from it.

Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng 33:1331 and 33:1365. The patches stand in `patches`.
Recovery never crosses the border of a region. Near a singular corner, or where a patch had to be enlarged
over a coarse mesh, the recovered stress is no better than the element stress.
"""

from collections.abc import Callable
from functools import wraps
from weakref import WeakKeyDictionary

import numpy as np

from convergence.fem.geometry import Geometry, at_rule, interpolate
from convergence.fem.patches import Patches
from convergence.fem.solution import Solution
from convergence.fem.strain import volumes
from convergence.fem.stress import component, stress_at
from convergence.fem.workers import workers

CHUNK = 4_000
FEW = 20_000  # cells
Stress = Callable[[Geometry, np.ndarray], np.ndarray]


def _kept(derived: Callable[[Solution], np.ndarray]) -> Callable[[Solution], np.ndarray]:
    """Keep the result for the latest solution only, and not beyond that solution's own life."""
    latest: WeakKeyDictionary[Solution, np.ndarray] = WeakKeyDictionary()

    @wraps(derived)
    def kept(solution: Solution) -> np.ndarray:
        found = latest.get(solution)
        if found is None:
            latest.clear()
            found = latest[solution] = derived(solution)
        return found

    return kept


@_kept
def recovered_stress(solution: Solution) -> np.ndarray:
    """Return the recovered stress at the nodes of each cell (components, nodes of a cell, cells)."""
    pieces = [(cells, Patches(solution, cells).at_cell_nodes()) for cells in solution.mesh.regions.values()]
    result = np.empty((*pieces[0][1].shape[:2], solution.mesh.cells))
    for cells, values in pieces:
        result[:, :, cells] = values
    return result


@_kept
def recovered_von_mises(solution: Solution) -> np.ndarray:
    """Return the von Mises stress of the recovered stress (nodes of a cell, cells)."""
    return component(recovered_stress(solution), "von_mises")


def nodal_values(solution: Solution, at_cell_nodes: np.ndarray) -> np.ndarray:
    """Return one value per node (..., nodes) of a field that is continuous within regions."""
    values = np.empty((*at_cell_nodes.shape[:-2], solution.mesh.nodes.shape[1]))
    values[..., solution.mesh.cell_nodes] = at_cell_nodes
    return values


@_kept
def energy_error(solution: Solution) -> np.ndarray:
    """Return the squared energy norm (force × length) of recovered minus element stress, per cell."""
    recovered = recovered_stress(solution)
    return _per_cell(
        solution,
        2 * solution.mesh.degree,
        lambda at, cells: interpolate(recovered[:, :, cells], at.shapes) - stress_at(solution, at, cells),
    )


def exact_energy_error(solution: Solution) -> np.ndarray:
    """Return the squared energy norm of exact minus element stress, per cell.

    Its leading term is a polynomial of order 2p, which is enough on fine meshes.
    """
    exact = solution.problem.exact
    assert exact is not None
    order = 2 * solution.mesh.degree + (4 if solution.mesh.cells < FEW else 0)
    return _per_cell(solution, order, lambda at, cells: exact.stress(*at.x) - stress_at(solution, at, cells))


def element_energy(solution: Solution, cells: np.ndarray) -> np.ndarray:
    """Return twice the elastic strain energy of the given cells."""
    order = 2 * solution.mesh.degree
    return _per_cell(solution, order, lambda at, chosen: stress_at(solution, at, chosen), cells)


def cell_volumes(solution: Solution, cells: np.ndarray | None = None) -> np.ndarray:
    """Return the volume of each of the cells, all where None."""
    mesh = solution.mesh
    chosen = np.arange(mesh.cells) if cells is None else cells
    found = np.empty(len(chosen))
    for start in range(0, len(chosen), CHUNK):
        rows = slice(start, start + CHUNK)
        found[rows] = volumes(solution.problem, at_rule(mesh, 2 * mesh.degree, chosen[rows])).sum(axis=1)
    return found


def variation_energy(solution: Solution) -> np.ndarray:
    """Return the squared energy norm of the recovered stress less its mean over the cell, per cell."""
    recovered = recovered_stress(solution)
    order = 2 * solution.mesh.degree

    def varying(at: Geometry, cells: np.ndarray) -> np.ndarray:
        stress = interpolate(recovered[:, :, cells], at.shapes)
        mean = (stress * at.dx).sum(axis=2) / at.dx.sum(axis=1)
        return np.asarray(stress - mean[:, :, None])

    return _per_cell(solution, order, varying)


def recovered_at(solution: Solution, cells: np.ndarray, local: np.ndarray) -> np.ndarray:
    """Return the recovered stress (components, m, q) at local places (D, m, q) of cells."""
    return interpolate(recovered_stress(solution)[:, :, cells], solution.mesh.element.shapes(local))


def _per_cell(solution: Solution, order: int, stress: Stress, cells: np.ndarray | None = None) -> np.ndarray:
    """Return ∫ s.S.s dV of each of the cells (all where None) for a stress of (geometry, cells)."""
    mesh = solution.mesh
    chosen = np.arange(mesh.cells) if cells is None else cells
    norm = np.empty(len(chosen))

    def integrate(region: str, rows: np.ndarray) -> None:
        at = at_rule(mesh, order, chosen[rows])
        values = stress(at, chosen[rows])
        strain = np.tensordot(solution.problem.materials[region].compliance(solution.problem.kind), values, 1)
        norm[rows] = ((values * strain).sum(axis=0) * volumes(solution.problem, at)).sum(axis=1)

    parts = []
    for region, members in mesh.regions.items():
        mine = np.arange(len(chosen)) if len(mesh.regions) == 1 else np.flatnonzero(np.isin(chosen, members))
        parts += [(region, mine[start : start + CHUNK]) for start in range(0, len(mine), CHUNK)]
    with workers() as pool:
        list(pool.map(lambda part: integrate(*part), parts))
    return norm
