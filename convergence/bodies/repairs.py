"""What is wrong with the cells of a file: turned inside out, folded, without volume, or three at one face."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

import numpy as np

from convergence.bodies.conventions import mirrored
from convergence.fem.calculus import derivatives, determinant
from convergence.fem.element import SIMPLICES, Element
from convergence.fem.outer_facets import facet_keys

CHUNK = 200_000
FLAT = 1e-12  # of the Jacobian that a cell of its longest side could have: below it is rounding


@dataclass(frozen=True, eq=False)
class Turned:
    """Cells the right way round where they can be; (m,) which were turned, are folded, are flat."""

    cell_nodes: np.ndarray
    turned: np.ndarray
    folded: np.ndarray
    flat: np.ndarray


def turn(nodes: np.ndarray, shape: Element, cell_nodes: np.ndarray) -> Turned:
    """Return cells (k, m) with a positive Jacobian where turning them inside out gives one."""
    low, high, size = jacobian_range(nodes, shape, cell_nodes)
    flat = np.maximum(np.abs(low), np.abs(high)) <= FLAT * size
    turned = ~flat & (high < -FLAT * size)
    folded = ~flat & ~turned & (low <= FLAT * size)
    if turned.any():
        cell_nodes = cell_nodes.copy()
        cell_nodes[:, turned] = cell_nodes[mirrored(shape.shape, shape.degree)][:, turned]
    return Turned(cell_nodes, turned, folded, flat)


def jacobian_range(
    nodes: np.ndarray, shape: Element, cell_nodes: np.ndarray
) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return the lowest and highest Jacobian (m,) at nodes and quadrature points, and (longest side)^D."""
    low, high, size = np.empty((3, cell_nodes.shape[1]))
    local = np.hstack([shape.nodes.T, shape.rule(2 * shape.degree + 1)[0]])
    for part, places, jacobian in jacobians(nodes, shape, cell_nodes, local):
        low[part], high[part] = jacobian.min(axis=1), jacobian.max(axis=1)
        size[part] = np.ptp(places, axis=1).max(axis=0) ** len(nodes)
    return low, high, size


def jacobians(
    nodes: np.ndarray, shape: Element, cell_nodes: np.ndarray, local: np.ndarray
) -> Iterator[tuple[slice, np.ndarray, np.ndarray]]:
    """Yield cells in parts: which, the places (D, k, m) of their nodes, the Jacobian (m, q) at local places.

    That of straight triangles and tetrahedra is the same everywhere and has q = 1.
    """
    straight = shape.degree == 1 and shape.shape in SIMPLICES
    slopes = shape.gradients(local)
    for start in range(0, cell_nodes.shape[1], CHUNK):
        part = slice(start, start + CHUNK)
        places = nodes[:, cell_nodes[:, part]]
        if straight:
            yield part, places, determinant(places[:, 1:] - places[:, :1])[:, None]
        else:
            yield part, places, determinant(derivatives(places, slopes))


def face_keys(shape: Element, cell_nodes: np.ndarray, size: int) -> np.ndarray:
    """Return a number (faces of a cell, m) of each face of each cell, the same for the same vertices."""
    return np.array([facet_keys(cell_nodes[list(face)], size) for face in shape.faces])


def shared_faces(keys: list[np.ndarray]) -> tuple[int, np.ndarray]:
    """Return how many faces belong to two cells or more, and the keys of those of three or more."""
    every = np.concatenate([part.ravel() for part in keys])
    every.sort()
    again = every[1:] == every[:-1]
    thrice = np.unique(every[2:][again[1:] & again[:-1]])
    return int(again.sum()), thrice


def joined(nodes: np.ndarray, apart: float) -> np.ndarray:
    """Return for each node (D, n) the lowest number of the nodes that lie within `apart` of it, in chains."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components
    from scipy.spatial import cKDTree

    order, new = _sorted_places(nodes)
    first, place = order[new], np.empty(nodes.shape[1], dtype=np.int64)
    place[order] = np.cumsum(new) - 1
    pairs = cKDTree(nodes[:, first].T).query_pairs(apart, output_type="ndarray")
    links = coo_array((np.ones(len(pairs), dtype=bool), pairs.T), shape=(len(first), len(first)))
    _, part = connected_components(links, directed=False)
    lowest = np.full(part.max() + 1, nodes.shape[1])
    np.minimum.at(lowest, part, first)
    return np.asarray(lowest[part][place])


def _sorted_places(nodes: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return nodes sorted by place, the lowest number of a place first, and which are the first of theirs."""
    order = np.lexsort(nodes)
    ordered = nodes[:, order]
    new = np.ones(len(order), dtype=bool)
    new[1:] = (ordered[:, 1:] != ordered[:, :-1]).any(axis=0)
    return order, new


def used_nodes(count: int, cells: Iterable[np.ndarray]) -> np.ndarray:
    """Return the numbers, rising, of the nodes among `count` that cells use."""
    used = np.zeros(count, dtype=bool)
    for part in cells:
        used[part] = True
    return np.flatnonzero(used)


def coincident(nodes: np.ndarray) -> int:
    """Return how many nodes (D, n) lie exactly where another with a lower number lies."""
    return int((~_sorted_places(nodes)[1]).sum())
