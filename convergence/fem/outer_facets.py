"""The facets between a mesh and its outside: those that one cell only has, turned outward."""

from functools import lru_cache

import numpy as np

from convergence.fem.element import Element, Shape, element

FACET_SHAPE: dict[tuple[int, int], Shape] = {(2, 2): "line", (3, 3): "triangle", (3, 4): "quadrilateral"}


def outer_facets(
    shape: Shape, degree: int, cell_nodes: np.ndarray
) -> tuple[tuple[np.ndarray, np.ndarray], ...]:
    """Return the outer facets of cells (k, m), grouped by their shape: node numbers (n, f), cell behind (f,).

    Nodes are in the order of the facet's own element, turned as `facets.facet_bases` wants them: the normal
    points outward where the cells are not inverted. Facets of three cells or more are no outer ones.
    """
    kind = element(shape, degree)
    size = int(cell_nodes.max(initial=0)) + 1
    by_shape: dict[int, list[tuple[int, ...]]] = {}
    for local in facet_nodes(shape, degree):
        by_shape.setdefault(len(local), []).append(local)
    groups = []
    for faces in by_shape.values():
        nodes = np.concatenate([cell_nodes[list(local)] for local in faces], axis=1)
        cells = np.tile(np.arange(cell_nodes.shape[1]), len(faces))
        corners = facet_element(kind.dimension, degree, len(faces[0])).corners
        _, first, count = np.unique(facet_keys(nodes[:corners], size), return_index=True, return_counts=True)
        single = np.sort(first[count == 1])
        groups.append((nodes[:, single], cells[single]))
    return tuple(groups)


def facet_keys(vertices: np.ndarray, size: int) -> np.ndarray:
    """Return a number for each facet (k, f) of a mesh of `size` nodes, the same in any order of its vertices.

    A quadrilateral is told by its three smallest vertices.
    """
    rows = np.sort(vertices, axis=0)[:3].astype(np.int64)
    keys = rows[0]
    for row in rows[1:]:
        keys = keys * size + row
    return np.asarray(keys)


def facet_element(dimension: int, degree: int, nodes: int) -> Element:
    """Return the element of facets of so many nodes in a plane or a solid."""
    shapes: tuple[Shape, ...] = ("line",) if dimension == 2 else ("triangle", "quadrilateral")
    return next(found for shape in shapes if len((found := element(shape, degree)).nodes) == nodes)


def facet_corners(dimension: int, nodes: int) -> int:
    """Return the number of vertices of a facet of so many nodes."""
    return 2 if dimension == 2 else 3 if nodes in (3, 6) else 4


@lru_cache(maxsize=32)
def facet_nodes(shape: Shape, degree: int) -> tuple[tuple[int, ...], ...]:
    """Return the local nodes of each facet of a cell as `outer_facets` turns and orders them."""
    kind = element(shape, degree)
    return tuple(_ordered(kind, face) for face in kind.faces)


def _ordered(kind: Element, face: tuple[int, ...]) -> tuple[int, ...]:
    corners = kind.nodes[list(face)]
    ring = _around(corners) if kind.dimension == 3 else [0, 1]
    if _inward(kind, corners[ring]):
        ring = ring[::-1]
    own = element(FACET_SHAPE[kind.dimension, len(face)], kind.degree)
    straight = element(own.shape, 1)
    places = straight.shapes(own.nodes.T).T @ corners[ring]
    return tuple(int(np.linalg.norm(kind.nodes - at, axis=1).argmin()) for at in places)


def _around(corners: np.ndarray) -> list[int]:
    """Return the order of the corners of a flat face around its middle."""
    arms = corners - corners.mean(axis=0)
    normal = np.cross(arms[0], arms[1])
    across = np.cross(normal, arms[0])
    angle = np.arctan2(arms @ across / np.linalg.norm(across), arms @ arms[0] / np.linalg.norm(arms[0]))
    return [int(k) for k in np.argsort(angle)]


def _inward(kind: Element, ring: np.ndarray) -> bool:
    """Return whether the normal of a facet, as `facets.facet_bases` takes it, points into the cell."""
    outward = ring.mean(axis=0) - kind.nodes[: kind.corners].mean(axis=0)
    if kind.dimension == 2:
        along = ring[1] - ring[0]
        return bool(along[1] * outward[0] - along[0] * outward[1] < 0.0)
    return bool(np.cross(ring[1] - ring[0], ring[2] - ring[0]) @ outward < 0.0)
