"""Cells of degree 2 cut into linear ones of half the size, between their own nodes.

A tetrahedron leaves an octahedron in its middle, which is cut along its shortest diagonal (Bey 1995,
Computing 55:355, sect. 2, from memory, has the choices).
"""

from functools import lru_cache

import numpy as np

from convergence.fem.element import Shape, element

DIAGONALS = (((0, 1), (2, 3)), ((0, 2), (1, 3)), ((0, 3), (1, 2)))  # edges of a tetrahedron, opposite ones


@lru_cache(maxsize=8)
def pieces(shape: Shape) -> np.ndarray:
    """Return the places (t, D, corners) of the vertices of all kinds of pieces in a cell.

    Of a tetrahedron the first four are at its corners, then come four for each of three diagonals.
    """
    corners = element(shape, 1).nodes
    at_corners = [0.5 * (corners + corner) for corner in corners]
    middle: list[np.ndarray] = []
    if shape == "triangle":
        middle = [_turned(corners)]
    elif shape == "wedge":
        middle = [
            np.column_stack([_turned(corners[:, :2]), half[:, 2]]) for half in (at_corners[0], at_corners[3])
        ]
    elif shape == "tetrahedron":
        middle = [piece for diagonal in DIAGONALS for piece in _octahedron(corners, diagonal)]
    return np.array([*at_corners, *middle]).transpose(0, 2, 1)


def _turned(corners: np.ndarray) -> np.ndarray:
    """Return the triangle between the middles of the sides of triangles that lie on each other."""
    middle = corners.mean(axis=0)
    return np.asarray(middle - 0.5 * (corners - middle))


def _octahedron(corners: np.ndarray, diagonal: tuple[tuple[int, int], ...]) -> list[np.ndarray]:
    """Return four tetrahedra around a diagonal between the middles of opposite edges."""
    low, high = (corners[list(edge)].mean(axis=0) for edge in diagonal)
    others = [pair for pair in DIAGONALS if pair != diagonal]
    ring = [corners[list(others[k % 2][k // 2])].mean(axis=0) for k in range(4)]
    found = []
    for k in range(4):
        piece = np.array([low, high, ring[k], ring[(k + 1) % 4]])
        turned = np.linalg.det(piece[1:] - piece[0]) < 0.0
        found.append(piece[[1, 0, 2, 3]] if turned else piece)
    return found


@lru_cache(maxsize=8)
def piece_nodes(shape: Shape) -> np.ndarray:
    """Return the local nodes (t, corners) of the pieces, among those of the cell of degree 2."""
    nodes = element(shape, 2).nodes
    away = np.linalg.norm(pieces(shape).transpose(0, 2, 1)[:, :, None] - nodes, axis=3)
    return np.asarray(away.argmin(axis=2))


def split(shape: Shape, cell_nodes: np.ndarray, nodes: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return the pieces (corners, 2^D m) of cells of degree 2, those of a cell together, and their kinds."""
    many = cell_nodes.shape[1]
    kinds = np.tile(np.arange(len(piece_nodes(shape)))[:, None], many)
    if shape == "tetrahedron":
        kinds = np.concatenate([kinds[:4], 4 + 4 * _shortest(cell_nodes, nodes) + np.arange(4)[:, None]])
    table = piece_nodes(shape)
    cells = np.array(
        [np.take_along_axis(cell_nodes, table[kinds, corner], axis=0) for corner in range(table.shape[1])]
    )
    return cells.transpose(0, 2, 1).reshape(len(cells), -1), kinds.T.ravel()


def _shortest(cell_nodes: np.ndarray, nodes: np.ndarray) -> np.ndarray:
    """Return which diagonal (m,) of the octahedron in each tetrahedron is the shortest."""
    corners, places = element("tetrahedron", 1).nodes, element("tetrahedron", 2).nodes
    lengths = []
    for diagonal in DIAGONALS:
        ends = [
            cell_nodes[int(np.linalg.norm(places - corners[list(edge)].mean(axis=0), axis=1).argmin())]
            for edge in diagonal
        ]
        lengths.append(np.linalg.norm(nodes[:, ends[0]] - nodes[:, ends[1]], axis=0))
    return np.asarray(np.argmin(np.round(np.array(lengths) / np.max(lengths), 9), axis=0))
