"""Faces of cells cut into straight pieces between their nodes, as figures and straight geometry want them."""

import numpy as np

from convergence.fem.element import Element

PLACES = {
    "line": ((0,), (1,), (0.5,)),
    "triangle": ((0, 0), (1, 0), (0, 1), (0.5, 0), (0.5, 0.5), (0, 0.5)),
    "quadrilateral": ((0, 0), (1, 0), (1, 1), (0, 1), (0.5, 0), (1, 0.5), (0.5, 1), (0, 0.5), (0.5, 0.5)),
}
CUTS = {
    "line": ((0, 2), (2, 1)),
    "triangle": ((0, 3, 5), (3, 1, 4), (5, 4, 2), (3, 4, 5)),
    "quadrilateral": ((0, 4, 8, 7), (4, 1, 5, 8), (8, 5, 2, 6), (7, 8, 6, 3)),
}


def pieces(kind: Element) -> list[tuple[int, ...]]:
    """Return the local nodes of each piece of a face or an edge, counter-clockwise."""
    places = np.array(PLACES[kind.shape][: kind.corners if kind.degree == 1 else None])
    number = [int(np.linalg.norm(kind.nodes - place, axis=1).argmin()) for place in places]
    if kind.degree == 1:
        return [tuple(number)]
    return [tuple(number[node] for node in piece) for piece in CUTS[kind.shape]]
