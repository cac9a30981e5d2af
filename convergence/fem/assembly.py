"""Stiffness and load of plane and axisymmetric elasticity: cell blocks in numpy, sums by scipy.sparse.

Unknowns are interleaved: component c of scalar node n is 2 n + c.
"""

from typing import Any

import numpy as np
from scipy import sparse
from skfem import Basis, FacetBasis

from convergence.fem.mesh import Mesh
from convergence.fem.problem import BodyForce, FieldFunction, Load, Pressure, Problem, Traction

CHUNK = 20_000
STIFFNESS_ORDER = {("triangle", 1): 1, ("triangle", 2): 4, ("quadrilateral", 1): 5, ("quadrilateral", 2): 7}
HOOP_ORDER = 2  # more where the hoop strain u/x is integrated
LOAD_ORDER = 19


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
    element = mesh.skfem.elem()
    if isinstance(load, BodyForce):
        members = None if load.region is None else mesh.regions[load.region]
        basis = Basis(mesh.skfem, element, intorder=2 * mesh.degree + 2, elements=members)
        return _integrate(basis, problem, mesh, _values(load.value, basis))
    basis = FacetBasis(mesh.skfem, element, facets=mesh.facets[load.boundary], intorder=LOAD_ORDER)
    x, y = np.asarray(basis.global_coordinates())
    normal = np.asarray(basis.normals)
    if isinstance(load, Pressure):
        return _integrate(basis, problem, mesh, -load.value * normal)
    if isinstance(load, Traction):
        return _integrate(basis, problem, mesh, _values(load.value, basis))
    force, arm = np.array(load.force), np.array([x - load.centre[0], y - load.centre[1]])
    direction = force / np.hypot(*force)
    cosine = np.einsum("c,c...->...", direction, arm / np.hypot(*arm))
    vector = _integrate(basis, problem, mesh, -np.clip(cosine, 0.0, None) * normal)
    resultant = np.array([vector[::2].sum(), vector[1::2].sum()])
    return np.asarray(vector * (np.hypot(*force) / (resultant @ direction)))


def _values(value: tuple[float, float] | FieldFunction, basis: Any) -> np.ndarray:
    """Return a vector or a vector field at the points of a basis, (2, cells, points)."""
    x, y = np.asarray(basis.global_coordinates())
    return np.asarray(value(x, y)) if callable(value) else np.multiply.outer(value, np.ones_like(x))


def _integrate(basis: Any, problem: Problem, mesh: Mesh, values: np.ndarray) -> np.ndarray:
    """Return the integrals of values (2, cells, points) times each shape function."""
    weights = volumes(problem, basis)
    vector = np.zeros(2 * mesh.nodes.shape[1])
    dofs = basis.element_dofs if basis.tind is None else mesh.skfem.dofs.element_dofs[:, basis.tind]
    for number, function in enumerate(basis.basis):
        weighted = np.einsum("ceq,eq->ce", values * np.asarray(function[0]), weights)
        np.add.at(vector, 2 * dofs[number], weighted[0])
        np.add.at(vector, 2 * dofs[number] + 1, weighted[1])
    return vector
