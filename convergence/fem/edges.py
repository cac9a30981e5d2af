"""Integration along edges of a mesh: places, outward normals and the shape functions on them.

The shapes of a cell on its edge are the Lagrange polynomials of the edge's own nodes, so nothing has to
be inverted, however small the cells.
"""

from dataclasses import dataclass

import numpy as np

from convergence.fem.mesh import Mesh


@dataclass(frozen=True)
class EdgeBasis:
    """Quadrature on edges: nodes (n, edges), shapes (n, points), the rest (..., edges, points)."""

    nodes: np.ndarray
    shapes: np.ndarray
    places: np.ndarray
    normals: np.ndarray
    dx: np.ndarray


def edge_basis(mesh: Mesh, boundary: str, points: int) -> EdgeBasis:
    """Return the basis of a named boundary with a Gauss rule of `points` per edge."""
    facets = mesh.facets[boundary]
    nodes = mesh.skfem.facets[:, facets]
    if mesh.degree == 2:
        nodes = np.vstack([nodes, mesh.skfem.dofs.facet_dofs[:, facets]])
    at, weight = np.polynomial.legendre.leggauss(points)
    shapes, slopes = _lagrange(mesh.degree, 0.5 * (at + 1.0))
    corners = mesh.nodes[:, nodes]
    places = np.einsum("cne,nq->ceq", corners, shapes)
    tangents = np.einsum("cne,nq->ceq", corners, slopes)
    length = np.hypot(*tangents)
    normals = np.array([tangents[1], -tangents[0]]) / length
    cells = mesh.skfem.t[:, mesh.skfem.f2t[0, facets]]
    inward = mesh.skfem.p[:, cells].mean(axis=1)[:, :, None] - places
    normals *= -np.sign((inward * normals).sum(axis=0))
    return EdgeBasis(nodes, shapes, places, normals, 0.5 * weight * length)


def _lagrange(degree: int, s: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return shapes and slopes (n, points) of start, end and, at degree 2, middle on 0 … 1."""
    one = np.ones_like(s)
    if degree == 1:
        return np.array([1.0 - s, s]), np.array([-one, one])
    shapes = [(1.0 - s) * (1.0 - 2.0 * s), s * (2.0 * s - 1.0), 4.0 * s * (1.0 - s)]
    slopes = [4.0 * s - 3.0, 4.0 * s - 1.0, 4.0 - 8.0 * s]
    return np.array(shapes), np.array(slopes)
