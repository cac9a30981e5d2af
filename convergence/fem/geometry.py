"""Isoparametric cells in space: places, shape functions, their gradients and the signed Jacobian."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from convergence.fem.calculus import derivatives, inverse
from convergence.fem.mesh import Mesh


@dataclass(frozen=True, eq=False)
class Geometry:
    """Points of cells: x (D, m, q), shapes (n, q) or (n, m, q), slopes (n, D, ...) by local coordinates.

    `det` (m, q) is the signed Jacobian, `inward` (D, D, m, q) dlocal_k/dx_d; `dx` (m, q) is det times the
    weights of a rule, zero where none was given.
    """

    x: np.ndarray
    shapes: np.ndarray
    slopes: np.ndarray
    inward: np.ndarray
    det: np.ndarray
    dx: np.ndarray

    @cached_property
    def gradients(self) -> np.ndarray:
        """Return the gradients of the shapes (n, D, m, q)."""
        kind = "nkq,kdmq->ndmq" if self.slopes.ndim == 3 else "nkmq,kdmq->ndmq"
        return np.asarray(np.einsum(kind, self.slopes, self.inward))

    def gradient(self, values: np.ndarray) -> np.ndarray:
        """Return dv_i/dx_d (i, D, m, q) of values (i, n, m) of the nodes of the cells."""
        local, inward = derivatives(values, self.slopes), self.inward
        ways = range(len(inward))
        return np.array([[sum(part[k] * inward[k, d] for k in ways) for d in ways] for part in local])


def at_rule(mesh: Mesh, order: int, cells: np.ndarray | None = None) -> Geometry:
    """Return the geometry at the points of a quadrature rule of that order."""
    local, weights = mesh.element.rule(order)
    return geometry(mesh, local, cells, weights)


def geometry(
    mesh: Mesh,
    local: np.ndarray,
    cells: np.ndarray | None = None,
    weights: np.ndarray | None = None,
    basis: tuple[np.ndarray, np.ndarray] | None = None,
) -> Geometry:
    """Return the geometry of cells (all where None) at local places (D, q), or (D, m, q) one set per cell.

    `basis` are the element's shapes and slopes there where they are known.
    """
    corners = mesh.nodes[:, mesh.cell_nodes if cells is None else mesh.cell_nodes[:, cells]]
    shapes, slopes = basis or mesh.element.evaluate(local)
    det, inward = inverse(derivatives(corners, slopes))
    dx = det * (weights if weights is not None else 0.0)
    return Geometry(interpolate(corners, shapes), shapes, slopes, inward, det, dx)


def interpolate(values: np.ndarray, shapes: np.ndarray) -> np.ndarray:
    """Return (..., m, q) from values (..., n, m) of the nodes of cells and shapes (n, q) or (n, m, q)."""
    if shapes.ndim == 2:
        return np.asarray(np.swapaxes(values, -1, -2) @ shapes)
    return np.asarray(np.einsum("...nm,nmq->...mq", values, shapes))
