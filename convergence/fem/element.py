"""Reference cells: their nodes, shape functions and quadrature, from scikit-fem.

A wedge is the product of a triangle and a line, in nodes, shapes and rules.
"""

from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import Any, Literal

import numpy as np
from skfem import (
    ElementHex1,
    ElementHex2,
    ElementLineP1,
    ElementLineP2,
    ElementQuad1,
    ElementQuad2,
    ElementTetP1,
    ElementTetP2,
    ElementTriP1,
    ElementTriP2,
)
from skfem.quadrature import get_quadrature

Shape = Literal["line", "triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge"]

NATIVE: dict[tuple[str, int], Any] = {
    ("line", 1): ElementLineP1,
    ("line", 2): ElementLineP2,
    ("triangle", 1): ElementTriP1,
    ("triangle", 2): ElementTriP2,
    ("quadrilateral", 1): ElementQuad1,
    ("quadrilateral", 2): ElementQuad2,
    ("tetrahedron", 1): ElementTetP1,
    ("tetrahedron", 2): ElementTetP2,
    ("hexahedron", 1): ElementHex1,
    ("hexahedron", 2): ElementHex2,
}
CORNERS = {"line": 2, "triangle": 3, "quadrilateral": 4, "tetrahedron": 4, "hexahedron": 8, "wedge": 6}
DIMENSION = {"line": 1, "triangle": 2, "quadrilateral": 2, "tetrahedron": 3, "hexahedron": 3, "wedge": 3}
VOLUME = {
    "line": 1.0,
    "triangle": 1 / 2,
    "quadrilateral": 1.0,
    "tetrahedron": 1 / 6,
    "hexahedron": 1.0,
    "wedge": 1 / 2,
}
SIMPLICES = ("triangle", "tetrahedron")


@dataclass(frozen=True)
class Element:
    """A reference cell in 0 … 1. The first `corners` nodes are its vertices."""

    shape: Shape
    degree: int

    @property
    def corners(self) -> int:
        return CORNERS[self.shape]

    @property
    def dimension(self) -> int:
        return DIMENSION[self.shape]

    @cached_property
    def nodes(self) -> np.ndarray:
        """Return the places (n, D) of the nodes."""
        if self.shape == "wedge":
            flat, along = _factors(self.degree)
            pairs = [(t, s) for t, s in _wedge_order(self.degree)]
            return np.array([[*flat.nodes[t], *along.nodes[s]] for t, s in pairs])
        return np.asarray(NATIVE[self.shape, self.degree].doflocs, dtype=float)

    @cached_property
    def faces(self) -> tuple[tuple[int, ...], ...]:
        """Return the vertices of each face (edge in a plane, end of a line), in no order."""
        corners = self.nodes[: self.corners]
        beyond = [*corners.T, *(1.0 - corners.T)]
        if self.shape == "wedge":
            beyond = [
                corners[:, 0],
                corners[:, 1],
                1.0 - corners[:, :2].sum(axis=1),
                corners[:, 2],
                1.0 - corners[:, 2],
            ]
        elif self.shape in SIMPLICES:
            beyond = [*corners.T, 1.0 - corners.sum(axis=1)]
        return tuple(tuple(int(v) for v in np.flatnonzero(np.abs(away) < 1e-9)) for away in beyond)

    def shapes(self, local: np.ndarray) -> np.ndarray:
        """Return the shape functions (n, ...) at local places (D, ...)."""
        return self.evaluate(local)[0]

    def gradients(self, local: np.ndarray) -> np.ndarray:
        """Return their derivatives (n, D, ...) by the local coordinates."""
        return self.evaluate(local)[1]

    def rule(self, order: int) -> tuple[np.ndarray, np.ndarray]:
        """Return places (D, q) and weights (q,) of a rule that is exact for polynomials of that order."""
        return _rule(self.shape, order)

    def outside(self, local: np.ndarray) -> np.ndarray:
        """Return how far local places (D, ...) lie outside the cell, 0 inside."""
        beyond = [-coordinate for coordinate in local]
        if self.shape == "wedge":
            beyond += [local[0] + local[1] - 1.0, local[2] - 1.0]
        elif self.shape in SIMPLICES:
            beyond += [local.sum(axis=0) - 1.0]
        else:
            beyond += [coordinate - 1.0 for coordinate in local]
        return np.asarray(np.maximum(np.max(beyond, axis=0), 0.0))

    def evaluate(self, local: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        """Return the shape functions and their derivatives together, as `shapes` and `gradients`."""
        if self.shape == "wedge":
            return _wedge(self.degree, local)
        native = NATIVE[self.shape, self.degree]()
        shapes = np.empty((len(self.nodes), *local.shape[1:]))
        slopes = np.empty((len(self.nodes), *local.shape))
        for node in range(len(self.nodes)):
            shapes[node], parts = native.lbasis(local, node)
            for way, part in enumerate(parts):
                slopes[node, way] = part
        return shapes, slopes


@lru_cache(maxsize=32)
def element(shape: Shape, degree: int) -> Element:
    """Return the reference cell of a shape and degree."""
    return Element(shape, degree)


def _factors(degree: int) -> tuple[Element, Element]:
    return element("triangle", degree), element("line", degree)


def _wedge_order(degree: int) -> list[tuple[int, int]]:
    """Return (node of the triangle, node of the line) of each node, the six vertices first."""
    flat, along = _factors(degree)
    pairs = [(t, s) for s in range(len(along.nodes)) for t in range(len(flat.nodes))]
    return sorted(pairs, key=lambda pair: pair[0] >= flat.corners or pair[1] >= along.corners)


def _wedge(degree: int, local: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    flat, along = _factors(degree)
    (plan, plan_slopes), (line, line_slopes) = flat.evaluate(local[:2]), along.evaluate(local[2:])
    order = _wedge_order(degree)
    shapes = np.array([plan[t] * line[s] for t, s in order])
    slopes = [
        [plan_slopes[t, 0] * line[s], plan_slopes[t, 1] * line[s], plan[t] * line_slopes[s, 0]]
        for t, s in order
    ]
    return shapes, np.array(slopes)


@lru_cache(maxsize=64)
def _rule(shape: Shape, order: int) -> tuple[np.ndarray, np.ndarray]:
    if order <= 1:
        return element(shape, 1).nodes.mean(axis=0)[:, None], np.array([VOLUME[shape]])
    if shape == "wedge":
        (flat, weights), (along, steps) = _rule("triangle", order), _rule("line", order)
        places = np.vstack([np.repeat(flat, len(steps), axis=1), np.tile(along, len(weights))])
        return places, np.repeat(weights, len(steps)) * np.tile(steps, len(weights))
    # scikit-fem's rules of these orders for tetrahedra are exact to one order less than their name (measured)
    claimed = order + 1 if shape == "tetrahedron" and order >= 5 else order
    places, weights = get_quadrature(NATIVE[shape, 1], claimed)
    return np.asarray(places), np.asarray(weights)
