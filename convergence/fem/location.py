"""Where a place lies in a mesh: its cells and the local coordinates in each.

A node or a place on an edge belongs to every cell that shares it. Elsewhere the cell is found among the
nearest ones by inverting its map; on meshes of degree 1 a place on a curved boundary may lie outside the
chord by the sagitta and is then taken from the nearest cell.
"""

import numpy as np

from convergence.errors import Unsuitable
from convergence.fem.mesh import Mesh

CANDIDATES, MANY = 12, 200
NEWTON_STEPS = 20
INSIDE, SHARED = 1e-6, 1e-8


def locate(mesh: Mesh, place: tuple[float, ...]) -> tuple[np.ndarray, np.ndarray]:
    """Return cells (n,) and local coordinates (D, n, 1) that contain a place.

    Unsuitable where the place lies outside the part.
    """
    distance = np.linalg.norm(mesh.nodes - np.array(place)[:, None], axis=0)
    nearest = int(distance.argmin())
    if distance[nearest] < 1e-9 * mesh.part.size:
        local_nodes, cells = np.nonzero(mesh.cell_nodes == nearest)
        return cells, mesh.element.nodes[local_nodes].T[:, :, None]
    cells, local, excess = _search(mesh, np.array(place)[:, None])
    sharing = excess[0] <= excess[0].min() + SHARED
    return cells[0, sharing], local[:, 0, sharing][:, :, None]


def locate_many(mesh: Mesh, places: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return one cell (n,) and local coordinates (D, n, 1) for each of the places (D, n)."""
    cells, local, excess = _search(mesh, places)
    rows, best = np.arange(len(excess)), excess.argmin(axis=1)
    return cells[rows, best], local[:, rows, best][:, :, None]


def _search(mesh: Mesh, places: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return for the cells around each place: numbers (n, k), local places (D, n, k), excess (n, k)."""
    found = _around(mesh, places, CANDIDATES)
    doubtful = found[2].min(axis=1) > INSIDE
    if not doubtful.any():
        return found
    outside = doubtful.copy()
    outside[doubtful] = ~mesh.part.contains(places[:, doubtful])
    if outside.any():
        at = tuple(float(x) for x in places[:, outside][:, 0])
        raise Unsuitable([("at", at, "a place on the part")])
    return _around(mesh, places, MANY)


def _around(mesh: Mesh, places: np.ndarray, count: int) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    from scipy.spatial import KDTree

    centres = mesh.nodes[:, mesh.cell_nodes[: mesh.element.corners]].mean(axis=1)
    count = min(count, mesh.cells)
    cells = KDTree(centres.T).query(places.T, k=count)[1].reshape(-1, count)
    local = _invert(mesh, cells.ravel(), np.repeat(places, count, axis=1))
    return cells, local.reshape(len(places), -1, count), mesh.element.outside(local).reshape(-1, count)


def _invert(mesh: Mesh, cells: np.ndarray, places: np.ndarray) -> np.ndarray:
    """Return local coordinates (D, n) of each place in its cell by Newton; infinite where it fails."""
    kind = mesh.element
    corners = mesh.nodes[:, mesh.cell_nodes[:, cells]]
    middle = kind.nodes[: kind.corners].mean(axis=0)
    local = np.repeat(middle[:, None], len(cells), axis=1)
    for _ in range(NEWTON_STEPS):
        miss = places - np.einsum("dnm,nm->dm", corners, kind.shapes(local))
        jacobian = np.einsum("dnm,nkm->mdk", corners, kind.gradients(local))
        # the map of a cell far from the place may fold there: any step leads on
        jacobian[np.linalg.det(jacobian) == 0.0] = np.eye(len(places))
        step = np.linalg.solve(jacobian, miss.T[:, :, None])[:, :, 0].T
        local = np.clip(local + step, -3.0, 4.0)
        if np.abs(step).max() < 1e-12:
            break
    local[:, np.abs(step).max(axis=0) > 1e-8] = np.inf
    return local


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
