"""Matrix times vector by the rows of a node, compiled by numba; threads share rows without Python's lock.

Entries stand as in CSR; the columns are read once for a node's rows together. Unsigned indices and contracted
products only: signed ones, or reordered sums of these short rows, made them several times slower.
"""

from typing import Any

import numpy as np
from numba import float32, float64, njit, uint32, uintp, void

TWO, THREE = uintp(2), uintp(3)


def _in_a_plane(
    starts: Any, neighbours: Any, entries: np.ndarray, x: np.ndarray, y: np.ndarray, first: int, last: int
) -> None:
    for node in range(first, last):
        start, end = uintp(starts[node]), uintp(starts[node + uintp(1)])
        top = uintp(4) * start
        low = top + TWO * (end - start)
        p = q = entries[0] * 0
        for place in range(start, end):
            column = TWO * uintp(neighbours[place])
            a, b = x[column], x[column + uintp(1)]
            p += entries[top] * a + entries[top + uintp(1)] * b
            q += entries[low] * a + entries[low + uintp(1)] * b
            top += TWO
            low += TWO
        y[TWO * node] = p
        y[TWO * node + uintp(1)] = q


def _in_space(
    starts: Any, neighbours: Any, entries: np.ndarray, x: np.ndarray, y: np.ndarray, first: int, last: int
) -> None:
    for node in range(first, last):
        start, end = uintp(starts[node]), uintp(starts[node + uintp(1)])
        top = uintp(9) * start
        middle = top + THREE * (end - start)
        low = middle + THREE * (end - start)
        p = q = r = entries[0] * 0
        for place in range(start, end):
            column = THREE * uintp(neighbours[place])
            a, b, c = x[column], x[column + uintp(1)], x[column + TWO]
            p += entries[top] * a + entries[top + uintp(1)] * b + entries[top + TWO] * c
            q += entries[middle] * a + entries[middle + uintp(1)] * b + entries[middle + TWO] * c
            r += entries[low] * a + entries[low + uintp(1)] * b + entries[low + TWO] * c
            top += THREE
            middle += THREE
            low += THREE
        y[THREE * node] = p
        y[THREE * node + uintp(1)] = q
        y[THREE * node + TWO] = r


def compiled(dimension: int) -> Any:
    """Return the product for 2 or 3 unknowns a node, in both precisions, from numba's cache if it has it."""
    kinds = [
        void(uint32[::1], uint32[::1], real[::1], real[::1], real[::1], uintp, uintp)
        for real in (float32, float64)
    ]
    return njit(kinds, nogil=True, cache=True, fastmath={"contract"})(
        {2: _in_a_plane, 3: _in_space}[dimension]
    )
