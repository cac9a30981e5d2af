"""Matrix times vector by the rows of a node, compiled by numba; threads share rows without Python's lock.

Entries stand as in CSR; the columns are read once for a node's rows together, with unsigned indices: signed
ones were several times slower. Rows in space are long: their part of the vector is collected, and each row is
one vectorized sum. In a plane that is slower.
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
    most: Any = uintp(0)
    for node in range(first, last):
        most = max(most, THREE * (uintp(starts[node + uintp(1)]) - uintp(starts[node])))
    near = np.empty(most, x.dtype)
    for node in range(first, last):
        start = uintp(starts[node])
        count = uintp(starts[node + uintp(1)]) - start
        for place in range(count):
            column, at = THREE * uintp(neighbours[start + place]), THREE * place
            near[at], near[at + uintp(1)], near[at + TWO] = x[column], x[column + uintp(1)], x[column + TWO]
        width = THREE * count
        for row in range(3):
            total, begin = x.dtype.type(0), THREE * THREE * start + uintp(row) * width
            for term in range(width):
                total += entries[begin + term] * near[term]
            y[THREE * node + uintp(row)] = total


def compiled(dimension: int) -> Any:
    """Return the product for 2 or 3 unknowns a node, in both precisions, from numba's cache if it has it."""
    kinds = [
        void(uint32[::1], uint32[::1], real[::1], real[::1], real[::1], uintp, uintp)
        for real in (float32, float64)
    ]
    rows, freedom = {2: (_in_a_plane, {"contract"}), 3: (_in_space, {"contract", "reassoc"})}[dimension]
    return njit(kinds, nogil=True, cache=True, fastmath=freedom)(rows)
