"""Superconvergent patch recovery of the stress and the error in the energy norm made from it.

Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng 33:1331 (eqs. 9-13) and 33:1365. A polynomial is
fitted to the element stress at the sampling points of the cells around each vertex; nodes between
vertices take the average of their vertices' polynomials. A vertex on the boundary uses the cells
around its inner neighbours, itself included: its own few cells do not determine the polynomial.
Recovery never crosses the border of a region. Near a singular corner, or where a patch had to be
enlarged over a coarse mesh, the recovered stress is no better than the element stress.
"""

from functools import lru_cache
from typing import Any

import numpy as np
from scipy import sparse
from skfem import Basis

from convergence.fem.assembly import volumes
from convergence.fem.solution import Solution
from convergence.fem.stress import direct_stress

GAUSS = 0.5 / np.sqrt(3.0)
SAMPLES = {
    ("triangle", 1): np.array([[1 / 3], [1 / 3]]),
    ("triangle", 2): np.array([[1 / 6, 2 / 3, 1 / 6], [1 / 6, 1 / 6, 2 / 3]]),
    ("quadrilateral", 1): np.array([[0.5], [0.5]]),
    ("quadrilateral", 2): 0.5 + GAUSS * np.array([[-1, 1, 1, -1], [-1, -1, 1, 1]]),
}
POWERS = {
    ("triangle", 1): ((0, 0), (1, 0), (0, 1)),
    ("triangle", 2): ((0, 0), (1, 0), (0, 1), (2, 0), (1, 1), (0, 2)),
    ("quadrilateral", 1): ((0, 0), (1, 0), (0, 1)),  # x y vanishes at the samples of a patch turned by 45°
    ("quadrilateral", 2): ((0, 0), (1, 0), (0, 1), (2, 0), (1, 1), (0, 2), (2, 1), (1, 2), (2, 2)),
}
SMALLEST_EIGENVALUE = 1e-7
THINNEST = 1e-4
RINGS = 3
CHUNK = 20_000


@lru_cache(maxsize=1)
def recovered_stress(solution: Solution) -> np.ndarray:
    """Return the recovered stress xx, yy, zz, xy at the nodes of each cell (4, nodes of a cell, cells)."""
    mesh = solution.mesh
    result = np.empty((4, mesh.skfem.dofs.element_dofs.shape[0], mesh.cells))
    for cells in mesh.regions.values():
        patches = _Patches(solution, cells)
        result[:, :, cells] = patches.at_cell_nodes()
    return result


def nodal_values(solution: Solution, at_cell_nodes: np.ndarray) -> np.ndarray:
    """Return one value per node (..., nodes) of a field that is continuous within regions."""
    values = np.empty((*at_cell_nodes.shape[:-2], solution.mesh.nodes.shape[1]))
    values[..., solution.mesh.skfem.dofs.element_dofs] = at_cell_nodes
    return values


@lru_cache(maxsize=1)
def energy_error(solution: Solution) -> np.ndarray:
    """Return the squared energy norm (force × length) of recovered minus element stress, per cell."""
    basis = _fine_basis(solution, 2 * solution.mesh.degree + 2)
    better = interpolate(basis, recovered_stress(solution))
    return energy_norm_squared(
        solution, better - direct_stress(solution, basis.X), volumes(solution.problem, basis)
    )


def exact_energy_error(solution: Solution) -> np.ndarray:
    """Return the squared energy norm of exact minus element stress, per cell."""
    assert solution.problem.exact is not None
    basis = _fine_basis(solution, 10)
    x, y = np.asarray(basis.global_coordinates())
    difference = solution.problem.exact.stress(x, y) - direct_stress(solution, basis.X)
    return energy_norm_squared(solution, difference, volumes(solution.problem, basis))


def element_energy(solution: Solution, cells: np.ndarray) -> np.ndarray:
    """Return twice the strain energy of the given cells."""
    basis = _fine_basis(solution, 2 * solution.mesh.degree, cells)
    stress = direct_stress(solution, basis.X, cells)
    return energy_norm_squared(solution, stress, volumes(solution.problem, basis), cells)


def cell_volumes(solution: Solution, cells: np.ndarray | None = None) -> np.ndarray:
    """Return the volume of each of the cells, all where None."""
    basis = _fine_basis(solution, 2 * solution.mesh.degree, cells)
    return np.asarray(volumes(solution.problem, basis).sum(axis=1))


def energy_norm_squared(
    solution: Solution, stress: np.ndarray, weights: np.ndarray, cells: np.ndarray | None = None
) -> np.ndarray:
    """Return ∫ s.S.s dV of each of the cells (all where None) from stresses (4, cells, points).

    `weights` (cells, points) is the volume that each point stands for.
    """
    chosen = np.arange(solution.mesh.cells) if cells is None else cells
    norm = np.empty(len(chosen))
    for region, members in solution.mesh.regions.items():
        mine = np.isin(chosen, members)
        compliance = solution.problem.materials[region].compliance()
        values = stress[:, mine]
        norm[mine] = np.einsum("seq,st,teq,eq->e", values, compliance, values, weights[mine], optimize=True)
    return norm


def recovered_at(solution: Solution, cells: np.ndarray, local: np.ndarray) -> np.ndarray:
    """Return the recovered stress (4, cells, points) at local coordinates (2, cells, points)."""
    element, mapping = solution.mesh.skfem.elem(), solution.mesh.skfem.mapping()
    at_nodes = recovered_stress(solution)[:, :, cells]
    count = at_nodes.shape[1]
    shapes = np.array([np.asarray(element.gbasis(mapping, local, i, tind=cells)[0]) for i in range(count)])
    return np.asarray(np.einsum("sne,neq->seq", at_nodes, shapes))


def interpolate(basis: Any, at_cell_nodes: np.ndarray) -> np.ndarray:
    """Return a field at the points of a basis, (4, cells, points)."""
    shapes = np.array([np.broadcast_to(np.asarray(f[0]), basis.dx.shape) for f in basis.basis])
    return np.asarray(np.einsum("sne,neq->seq", at_cell_nodes, shapes, optimize=True))


def _fine_basis(solution: Solution, order: int, cells: np.ndarray | None = None) -> Any:
    native = solution.mesh.skfem
    return Basis(native, native.elem(), intorder=order, elements=cells, disable_doflocs=True)


class _Patches:
    """The fitted polynomials of all vertices of one region."""

    def __init__(self, solution: Solution, cells: np.ndarray):
        mesh = solution.mesh
        key = (mesh.shape, mesh.degree)
        self.solution, self.cells, self.powers = solution, cells, POWERS[key]
        numbers, local = np.unique(mesh.skfem.t[:, cells], return_inverse=True)
        self.t = local.reshape(-1, len(cells))
        self.centre = mesh.nodes[:, numbers]
        at = np.asarray(mesh.skfem.mapping().F(SAMPLES[key], tind=cells))
        self.samples = np.broadcast_to(at, (2, len(cells), SAMPLES[key].shape[1]))
        stress = direct_stress(solution, SAMPLES[key], cells)
        self.stress = np.broadcast_to(stress, (4, *self.samples.shape[1:]))
        self.frame = np.zeros((len(numbers), 2, 2))
        self.coefficients = self._fit(self._incidence())

    def _incidence(self) -> sparse.csr_matrix:
        """Return vertices × cells: which cells the patch of a vertex has."""
        corners, m = self.t.shape
        n = self.centre.shape[1]
        pairs = (self.t.ravel(), np.tile(np.arange(m), corners))
        touch = sparse.csr_matrix((np.ones(corners * m), pairs), shape=(n, m))
        edges = np.sort(np.array([self.t, np.roll(self.t, -1, axis=0)]).reshape(2, -1), axis=0)
        keys, count = np.unique(edges[0].astype(np.int64) * n + edges[1], return_counts=True)
        outer = np.zeros(n, dtype=bool)
        outer[np.divmod(keys[count == 1], n)[0]] = outer[np.divmod(keys[count == 1], n)[1]] = True
        inner_neighbours = (touch @ touch.T) @ sparse.diags_array((~outer).astype(float))
        extended = sparse.diags_array(outer.astype(float)) @ (inner_neighbours @ touch)
        return sparse.csr_matrix(touch + extended)

    def _fit(self, patches: sparse.csr_matrix) -> np.ndarray:
        """Return the coefficients (vertices, terms, 4); enlarge by rings of cells, then drop terms."""
        n = self.centre.shape[1]
        coefficients = np.zeros((n, len(self.powers), 4))
        open_ones = np.arange(n)
        neighbours = sparse.csr_matrix(patches.T @ patches)
        for terms in (len(self.powers), 3, 1):
            for _ in range(RINGS):
                done = self._solve(patches, open_ones, terms, coefficients)
                open_ones = open_ones[~done]
                if len(open_ones) == 0:
                    return coefficients
                chosen = sparse.diags_array(np.isin(np.arange(n), open_ones).astype(float))
                patches = sparse.csr_matrix(patches + chosen @ (patches @ neighbours))
        raise AssertionError("a constant can always be fitted")

    def _solve(
        self, patches: sparse.csr_matrix, chosen: np.ndarray, terms: int, out: np.ndarray
    ) -> np.ndarray:
        done = np.zeros(len(chosen), dtype=bool)
        for start in range(0, len(chosen), CHUNK):
            part = chosen[start : start + CHUNK]
            rows = patches[part]
            owner = np.repeat(np.arange(len(part)), np.diff(rows.indptr))
            offset = self.samples[:, rows.indices] - self.centre[:, part[owner], None]
            spread = np.add.reduceat(np.einsum("ipq,jpq->pij", offset, offset), rows.indptr[:-1], axis=0)
            count = np.diff(rows.indptr)[:, None, None] * self.samples.shape[2]
            frame = _even_frame(spread / count)
            basis = _monomials(np.einsum("pij,jpq->ipq", frame[owner], offset), self.powers[:terms])
            moments = np.add.reduceat(np.einsum("apq,bpq->pab", basis, basis), rows.indptr[:-1], axis=0)
            right = np.einsum("apq,spq->pas", basis, self.stress[:, rows.indices])
            right = np.add.reduceat(right, rows.indptr[:-1], axis=0)
            good = np.linalg.eigvalsh(moments / count)[:, 0] > SMALLEST_EIGENVALUE
            out[part[good], :terms] = np.linalg.solve(moments[good], right[good])
            self.frame[part[good]] = frame[good]
            done[start : start + CHUNK] = good
        return done

    def at_cell_nodes(self) -> np.ndarray:
        """Return the recovered stress (4, nodes of a cell, cells)."""
        mesh = self.solution.mesh
        local = mesh.skfem.elem.doflocs
        places = mesh.nodes[:, mesh.skfem.dofs.element_dofs[:, self.cells]]
        result = np.empty((4, len(local), len(self.cells)))
        corners = self.t.shape[0]
        for node, at in enumerate(local):
            distance = np.hypot(*(local[:corners] - at).T)
            owners = np.flatnonzero(distance < distance.min() + 1e-9)
            result[:, node] = np.mean([self._evaluate(self.t[o], places[:, node]) for o in owners], axis=0)
        return result

    def _evaluate(self, vertices: np.ndarray, places: np.ndarray) -> np.ndarray:
        offset = np.einsum("eij,je->ie", self.frame[vertices], places - self.centre[:, vertices])
        basis = _monomials(offset, self.powers)
        return np.asarray(np.einsum("te,ets->se", basis, self.coefficients[vertices]))


def _even_frame(spread: np.ndarray) -> np.ndarray:
    """Return (n, 2, 2) that maps offsets to even coordinates of size one, however thin their patch is.

    `spread` (n, 2, 2) are the mean products of the offsets.
    """
    size = np.trace(spread, axis1=1, axis2=2)[:, None, None]
    factor = np.linalg.cholesky(spread + (THINNEST**2 * size + np.finfo(float).tiny) * np.eye(2))
    return np.asarray(0.5 * np.linalg.inv(factor))


def _monomials(offset: np.ndarray, powers: tuple[tuple[int, int], ...]) -> np.ndarray:
    x, y = offset
    return np.array([x**i * y**j for i, j in powers])
