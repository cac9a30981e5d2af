"""Where a place lies in a mesh: its cells and the local coordinates in each.

A node or a place on an edge belongs to every cell that shares it. On meshes of degree 1 a place on a curved
boundary may lie outside the chord by the sagitta and is then taken from the nearest cell.
"""

import numpy as np

from convergence.errors import Unsuitable
from convergence.fem.mesh import Mesh
from convergence.fem.search import local_places, search

REACH = 1.0  # of a cell's radius: the sagitta of the coarsest cells is less
INSIDE, SHARED = 1e-6, 1e-8


def locate(mesh: Mesh, place: tuple[float, ...]) -> tuple[np.ndarray, np.ndarray]:
    """Return cells (n,) and local coordinates (D, n, 1) that contain a place.

    Unsuitable where the place lies outside the part.
    """
    at = np.array(place, dtype=float)[:, None]
    distance = np.linalg.norm(mesh.nodes - at, axis=0)
    nearest = int(distance.argmin())
    if distance[nearest] < 1e-9 * mesh.part.size:
        local_nodes, cells = np.nonzero(mesh.cell_nodes == nearest)
        return cells, mesh.element.nodes[local_nodes].T[:, :, None]
    found, _ = locate_many(mesh, at)
    cells = np.flatnonzero(np.isin(mesh.cell_nodes, mesh.cell_nodes[:, found]).any(axis=0))
    local = local_places(mesh.nodes, mesh.cell_nodes, mesh.element, cells, np.repeat(at, len(cells), axis=1))
    excess = mesh.element.outside(local)
    sharing = excess <= excess.min() + SHARED
    return cells[sharing], local[:, sharing][:, :, None]


def locate_many(mesh: Mesh, places: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return one cell (n,) and local coordinates (D, n, 1) for each of the places (D, n).

    Unsuitable where a place lies outside the part.
    """
    found = search(mesh.nodes, mesh.cell_nodes, mesh.element, places, reach=REACH)
    doubtful = found.gap > INSIDE
    outside = found.cells < 0
    if doubtful.any():
        outside[doubtful] |= ~mesh.part.contains(places[:, doubtful])
    if outside.any():
        at = tuple(float(x) for x in places[:, outside][:, 0])
        raise Unsuitable([("at", at, "a place on the part")])
    return found.cells, found.local[:, :, None]


def line_points(
    mesh: Mesh, start: tuple[float, ...], end: tuple[float, ...]
) -> tuple[np.ndarray, np.ndarray]:
    """Return Gauss points (D, n) and weights (n,) along a straight line, eight per cell size crossed."""
    a, b = np.array(start), np.array(end)
    length = float(np.linalg.norm(b - a))
    pieces = max(4, int(np.ceil(2.0 * length / mesh.h)))
    at, weight = np.polynomial.legendre.leggauss(4)
    s = ((np.arange(pieces)[:, None] + 0.5 * (at + 1.0)) / pieces).ravel()
    weights = np.tile(0.5 * weight / pieces * length, pieces)
    return a[:, None] + (b - a)[:, None] * s, weights
