"""Integration over a boundary of a mesh: places, outward normals and the shape functions on its facets."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from convergence.fem.element import Shape, element
from convergence.fem.geometry import interpolate
from convergence.fem.mesh import Mesh

SHAPES: dict[tuple[int, int, int], Shape] = {
    (1, 1, 1): "line",
    (2, 1, 2): "line",
    (2, 2, 3): "line",
    (3, 1, 3): "triangle",
    (3, 2, 6): "triangle",
    (3, 1, 4): "quadrilateral",
    (3, 2, 9): "quadrilateral",
}


@dataclass(frozen=True)
class FacetBasis:
    """Quadrature on facets of one shape.

    nodes (n, f), shapes (n, q), slopes (n, D - 1, q), places and normals (D, f, q), dx (f, q).
    """

    nodes: np.ndarray
    shapes: np.ndarray
    places: np.ndarray
    normals: np.ndarray
    dx: np.ndarray


def facet_bases(mesh: Mesh, boundary: str, order: int) -> Iterator[FacetBasis]:
    """Yield the bases of a named boundary, one for each shape of its facets, exact to that order."""
    for nodes in mesh.facets[boundary]:
        yield _basis(mesh, nodes, order)


def _basis(mesh: Mesh, nodes: np.ndarray, order: int) -> FacetBasis:
    if mesh.dimension == 1:
        return _end(mesh, nodes)
    kind = element(SHAPES[mesh.dimension, mesh.degree, len(nodes)], mesh.degree)
    local, weights = kind.rule(order)
    shapes, slopes = kind.evaluate(local)
    corners = mesh.nodes[:, nodes]
    tangents = np.einsum("dnf,nkq->kdfq", corners, slopes)
    if mesh.dimension == 2:
        across = np.array([tangents[0, 1], -tangents[0, 0]])
    else:
        across = np.cross(tangents[0], tangents[1], axis=0)
    size = np.linalg.norm(across, axis=0)
    return FacetBasis(nodes, shapes, interpolate(corners, shapes), across / size, weights * size)


def _end(mesh: Mesh, nodes: np.ndarray) -> FacetBasis:
    """Return the basis of an end of a rod, which is a point of measure one."""
    places = mesh.nodes[:, nodes[0]][:, :, None]
    outward = np.where(places > mesh.nodes.mean(), 1.0, -1.0)
    one = np.ones((1, 1))
    return FacetBasis(nodes, one, places, outward, one)
