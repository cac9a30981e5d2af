"""Cells of files in the order of our own cells: which node of a file stands where.

Every node of a cell stands in the middle of some of its vertices (itself, an edge, a face, the whole), so an
order is a list of vertices per node. The orders are those of VTK (Schroeder, Martin, Lorensen, "The
Visualization Toolkit", and vtkCellType.h), which meshio hands on for every kind of file but for turned
linear wedges. Serendipity cells lack the middles of faces and of the cell.
"""

from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from convergence.fem.element import CORNERS, DIMENSION, Shape, element

VERTICES: dict[str, tuple[tuple[int, ...], ...]] = {
    "triangle": ((0, 0), (1, 0), (0, 1)),
    "quadrilateral": ((0, 0), (1, 0), (1, 1), (0, 1)),
    "tetrahedron": ((0, 0, 0), (1, 0, 0), (0, 1, 0), (0, 0, 1)),
    "hexahedron": (
        *((0, 0, 0), (1, 0, 0), (1, 1, 0), (0, 1, 0)),
        *((0, 0, 1), (1, 0, 1), (1, 1, 1), (0, 1, 1)),
    ),
    "wedge": ((0, 0, 0), (1, 0, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (0, 1, 1)),
}
EDGES = {
    "triangle": "01 12 20",
    "quadrilateral": "01 12 23 30",
    "tetrahedron": "01 12 20 03 13 23",
    "hexahedron": "01 12 23 30 45 56 67 74 04 15 26 37",
    "wedge": "01 12 20 34 45 53 03 14 25",
}
MIDDLES = {
    "triangle": "",
    "quadrilateral": "0123",
    "tetrahedron": "",
    "hexahedron": "0374 1265 0154 3267 0123 4567 01234567",
    "wedge": "0143 1254 2035",
}
# orders of the edges that other writers are known to use for the same kinds of cell
OTHER_EDGES = {
    "tetrahedron": ("01 12 20 03 23 13",),
    "hexahedron": ("01 12 23 30 04 15 26 37 45 56 67 74", "01 12 23 30 45 56 67 74 04 15 37 26"),
    "wedge": ("01 12 20 03 14 25 34 45 53",),
}


@dataclass(frozen=True)
class Kind:
    """A kind of cell of a file and how many nodes it has there."""

    shape: Shape
    degree: int
    nodes: int


KINDS: dict[str, Kind] = {
    "triangle": Kind("triangle", 1, 3),
    "triangle6": Kind("triangle", 2, 6),
    "quad": Kind("quadrilateral", 1, 4),
    "quad8": Kind("quadrilateral", 2, 8),
    "quad9": Kind("quadrilateral", 2, 9),
    "tetra": Kind("tetrahedron", 1, 4),
    "tetra10": Kind("tetrahedron", 2, 10),
    "hexahedron": Kind("hexahedron", 1, 8),
    "hexahedron20": Kind("hexahedron", 2, 20),
    "hexahedron27": Kind("hexahedron", 2, 27),
    "wedge": Kind("wedge", 1, 6),
    "wedge15": Kind("wedge", 2, 15),
    "wedge18": Kind("wedge", 2, 18),
}


def kind_of(name: str, nodes: int) -> Kind | None:
    """Return the kind of a block of cells by meshio's name and its nodes a cell, None where we have none."""
    if name in KINDS:
        return KINDS[name]
    shape = name.removeprefix("VTK_LAGRANGE_").lower()
    alike = (kind for kind in KINDS.values() if (kind.shape, kind.nodes) == (shape, nodes))
    return next(alike, None) if name.startswith("VTK_LAGRANGE_") else None


@lru_cache(maxsize=64)
def groups(shape: Shape, degree: int, edges: str = "") -> tuple[tuple[int, ...], ...]:
    """Return the vertices of which each node is the middle, in the order of a file."""
    alone = tuple((vertex,) for vertex in range(CORNERS[shape]))
    if degree == 1:
        return alone
    words = f"{edges or EDGES[shape]} {MIDDLES[shape]}".split()
    return alone + tuple(tuple(int(vertex) for vertex in word) for word in words)


@lru_cache(maxsize=64)
def positions(shape: Shape, degree: int) -> np.ndarray:
    """Return for each node of our cell the position of the same node in the file's cell of all nodes."""
    vertices = np.array(VERTICES[shape], dtype=float)
    theirs = np.array([vertices[list(group)].mean(axis=0) for group in groups(shape, degree)])
    ours = element(shape, degree).nodes
    apart = np.abs(ours[:, None] - theirs[None]).max(axis=2)
    return np.asarray(apart.argmin(axis=1))


@lru_cache(maxsize=64)
def mirrored(shape: Shape, degree: int) -> np.ndarray:
    """Return the order of our nodes that turns a cell inside out: its first two coordinates change places."""
    nodes = element(shape, degree).nodes
    swapped = nodes[:, [1, 0, *range(2, DIMENSION[shape])]]
    return np.asarray(np.abs(swapped[:, None] - nodes[None]).max(axis=2).argmin(axis=1))


def missing(kind: Kind) -> tuple[tuple[int, ...], ...]:
    """Return the vertices of the faces, and of the cell, whose middles a serendipity cell lacks."""
    return groups(kind.shape, kind.degree)[kind.nodes :]


def serendipity(kind: Kind, face: tuple[int, ...]) -> tuple[np.ndarray, np.ndarray]:
    """Return the positions in the file's cell and the weights that make the middle of a face, or of the cell.

    The 8-node quadrilateral has −1/4 at vertices and 1/2 at middles of edges in its middle, the 20-node
    hexahedron −1/4 and 1/4 (Zienkiewicz, Taylor, Zhu, "The Finite Element Method: Its Basis and
    Fundamentals", chapter on shape functions; from memory).
    """
    given = groups(kind.shape, kind.degree)[: kind.nodes]
    members = [at for at, group in enumerate(given) if set(group) <= set(face)]
    edge = 0.5 if len(face) == 4 else 0.25
    return np.array(members), np.array([-0.25 if len(given[at]) == 1 else edge for at in members])
