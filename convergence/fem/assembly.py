"""Stiffness and load of plane and axisymmetric elasticity: cell blocks in numpy, sums by scipy.sparse.

Unknowns are interleaved: component c of scalar node n is 2 n + c.
"""

from typing import Any

import numpy as np
from scipy import sparse
from skfem import Basis

from convergence.fem.edges import edge_basis
from convergence.fem.mesh import Mesh
from convergence.fem.problem import BodyForce, FieldFunction, Load, Pressure, Problem, Traction

CHUNK = 20_000
STIFFNESS_ORDER = {("triangle", 1): 1, ("triangle", 2): 4, ("quadrilateral", 1): 5, ("quadrilateral", 2): 7}
HOOP_ORDER = 2  # more where the hoop strain u/x is integrated
LOAD_POINTS = 10


def unknowns(dofs: np.ndarray) -> np.ndarray:
    """Return the two unknowns of each scalar node in the last axis but one, (n, m) -> (2 n, m)."""
    return np.stack([2 * dofs, 2 * dofs + 1], axis=1).reshape(2 * dofs.shape[0], *dofs.shape[1:])


def strain_operator(gradients: np.ndarray, hoop: np.ndarray | None) -> np.ndarray:
    """Return B (4, 2 n, ...) from the shape gradients (n, 2, ...): strains xx, yy, zz, 2xy.

    `hoop` (n, ...) are the shapes over the radius of an axisymmetric problem, None in a plane.
    """
    n = gradients.shape[0]
    operator = np.zeros((4, n, 2, *gradients.shape[2:]))
    operator[0, :, 0] = operator[3, :, 1] = gradients[:, 0]
    operator[1, :, 1] = operator[3, :, 0] = gradients[:, 1]
    if hoop is not None:
        operator[2, :, 0] = hoop
    return operator.reshape(4, 2 * n, *gradients.shape[2:])


def volumes(problem: Problem, basis: Any) -> np.ndarray:
    """Return the volume that each quadrature point stands for, (cells, points)."""
    x = np.asarray(basis.global_coordinates())[0]
    return np.asarray(basis.dx * problem.depth(x))


def _hoop(problem: Problem, basis: Any) -> np.ndarray | None:
    if problem.kind != "axisymmetric":
        return None
    x = np.asarray(basis.global_coordinates())[0]
    return np.array([np.asarray(function[0]) / x for function in basis.basis])


def stiffness(problem: Problem, mesh: Mesh) -> sparse.csr_matrix:
    """Return the stiffness matrix K (N·mm/mm² and so on: force over length)."""
    element = mesh.skfem.elem()
    blocks, rows, columns = [], [], []
    size = 2 * mesh.nodes.shape[1]
    for region, members in mesh.regions.items():
        elasticity = problem.materials[region].elasticity(problem.kind)
        for start in range(0, len(members), CHUNK):
            chosen = members[start : start + CHUNK]
            order = STIFFNESS_ORDER[mesh.shape, mesh.degree] + HOOP_ORDER * (problem.kind == "axisymmetric")
            basis = Basis(mesh.skfem, element, intorder=order, elements=chosen, disable_doflocs=True)
            gradients = np.array([function[0].grad for function in basis.basis])
            b = np.moveaxis(strain_operator(gradients, _hoop(problem, basis)), 2, 0)
            stressed = np.einsum("st,etnq,eq->esnq", elasticity, b, volumes(problem, basis), optimize=True)
            m, s, n, q = b.shape
            left = b.transpose(0, 2, 1, 3).reshape(m, n, s * q)
            block = left @ stressed.transpose(0, 1, 3, 2).reshape(m, s * q, n)
            numbers = unknowns(mesh.skfem.dofs.element_dofs[:, chosen]).T
            blocks.append(block.ravel())
            rows.append(np.repeat(numbers, n, axis=1).ravel())
            columns.append(np.tile(numbers, (1, n)).ravel())
    triplets = (np.concatenate(blocks), (np.concatenate(rows), np.concatenate(columns)))
    return sparse.coo_matrix(triplets, shape=(size, size)).tocsr()


def load_vector(problem: Problem, mesh: Mesh) -> np.ndarray:
    """Return the consistent load vector of all loads."""
    total = np.zeros(2 * mesh.nodes.shape[1])
    for load in problem.loads:
        total += _one_load(load, problem, mesh)
    return total


def _one_load(load: Load, problem: Problem, mesh: Mesh) -> np.ndarray:
    if isinstance(load, BodyForce):
        return _body_load(load, problem, mesh)
    edges = edge_basis(mesh, load.boundary, LOAD_POINTS)
    shapes, weights = edges.shapes[:, None, :], edges.dx * problem.depth(edges.places[0])
    if isinstance(load, Pressure):
        return _integrate(mesh, edges.nodes, shapes, weights, -load.value * edges.normals)
    if isinstance(load, Traction):
        return _integrate(mesh, edges.nodes, shapes, weights, _values(load.value, edges.places))
    force, arm = np.array(load.force), edges.places - np.array(load.centre)[:, None, None]
    direction = force / np.hypot(*force)
    cosine = np.einsum("c,c...->...", direction, arm / np.hypot(*arm))
    vector = _integrate(mesh, edges.nodes, shapes, weights, -np.clip(cosine, 0.0, None) * edges.normals)
    resultant = np.array([vector[::2].sum(), vector[1::2].sum()])
    return np.asarray(vector * (np.hypot(*force) / (resultant @ direction)))


def _body_load(load: BodyForce, problem: Problem, mesh: Mesh) -> np.ndarray:
    cells = np.arange(mesh.cells) if load.region is None else mesh.regions[load.region]
    basis = Basis(mesh.skfem, mesh.skfem.elem(), intorder=2 * mesh.degree + 2, elements=cells)
    shapes = np.array([np.asarray(function[0]) for function in basis.basis])
    values = _values(load.value, np.asarray(basis.global_coordinates()))
    return _integrate(mesh, mesh.skfem.dofs.element_dofs[:, cells], shapes, volumes(problem, basis), values)


def _values(value: tuple[float, float] | FieldFunction, places: np.ndarray) -> np.ndarray:
    """Return a vector or a vector field at places (2, ...)."""
    if callable(value):
        return np.asarray(value(places[0], places[1]))
    return np.asarray(np.multiply.outer(value, np.ones_like(places[0])))


def _integrate(
    mesh: Mesh, dofs: np.ndarray, shapes: np.ndarray, weights: np.ndarray, values: np.ndarray
) -> np.ndarray:
    """Return the integrals of values (2, m, points) times the shapes (n, m or 1, points) of dofs (n, m)."""
    vector = np.zeros(2 * mesh.nodes.shape[1])
    for nodes, shape in zip(dofs, shapes, strict=True):
        weighted = (values * (shape * weights)).sum(axis=2)
        np.add.at(vector, 2 * nodes, weighted[0])
        np.add.at(vector, 2 * nodes + 1, weighted[1])
    return vector
