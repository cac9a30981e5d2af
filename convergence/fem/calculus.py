"""Derivatives by local coordinates, and small inverses by cofactors, for all cells at once."""

import numpy as np


def derivatives(values: np.ndarray, slopes: np.ndarray) -> np.ndarray:
    """Return dv_i/dlocal_k (i, k, m, q) of values (i, n, m) of the nodes of cells.

    slopes are (n, k, q), or (n, k, m, q) one set per cell.
    """
    if slopes.ndim == 4:
        return np.asarray(np.einsum("inm,nkmq->ikmq", values, slopes, optimize=True))
    components, n, m = values.shape
    ways, points = slopes.shape[1:]
    flat = values.transpose(0, 2, 1).reshape(components * m, n) @ slopes.reshape(n, ways * points)
    return np.asarray(flat.reshape(components, m, ways, points).transpose(0, 2, 1, 3))


def determinant(j: np.ndarray) -> np.ndarray:
    """Return det J (...) of J (d, k, ...), d and k up to 3."""
    if len(j) == 1:
        return np.asarray(j[0, 0])
    if len(j) == 2:
        return np.asarray(j[0, 0] * j[1, 1] - j[0, 1] * j[1, 0])
    return np.asarray(sum(j[0, k] * _cofactor(j, 0, k) for k in range(3)))


def inverse(j: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return det J (...) and dlocal_k/dx_d (k, d, ...) of J (d, k, ...)."""
    det = determinant(j)
    if len(j) == 1:
        return det, 1.0 / j
    if len(j) == 2:
        return det, np.array([[j[1, 1], -j[0, 1]], [-j[1, 0], j[0, 0]]]) / det
    return det, np.array([[_cofactor(j, d, k) for d in range(3)] for k in range(3)]) / det


def _cofactor(j: np.ndarray, d: int, k: int) -> np.ndarray:
    """Return the cofactor of an entry of J (3, 3, ...)."""
    a, b, s, t = (d + 1) % 3, (d + 2) % 3, (k + 1) % 3, (k + 2) % 3
    return np.asarray(j[a, s] * j[b, t] - j[a, t] * j[b, s])
