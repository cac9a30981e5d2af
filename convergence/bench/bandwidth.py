"""One iteration of a solution against the bytes it must move at the speed of a measured triad.

The triad is that of McCalpin's STREAM, a = b + s c, in two passes of numpy, which move five arrays.
Counted are matrix entries and their columns, read once a product; vectors are left out.
"""

import time
from typing import Any

import numpy as np

from convergence.fem.multigrid import Multigrid
from convergence.fem.products import Matrix, NodeRows
from convergence.fem.solution import Solution

LONG = 20_000_000


def triad() -> float:
    """Return the bytes a second of the fastest of five."""
    a, b, c = (np.full(LONG, value) for value in (0.0, 1.0, 2.0))
    found = []
    for _ in range(5):
        start = time.perf_counter()
        np.multiply(c, 3.0, out=a)
        np.add(a, b, out=a)
        found.append(time.perf_counter() - start)
    return 5 * 8 * LONG / min(found)


def iteration(solution: Solution) -> dict[str, Any]:
    """Return the seconds of an iteration and those its bytes would take at the triad's speed."""
    assert solution.assembled is not None
    grid = Multigrid(solution.mesh, solution.assembled, solution.held)
    start = time.perf_counter()
    outcome = grid.solve(solution.load, solution.held.values)
    seconds = (time.perf_counter() - start) / (outcome.iterations + 1)
    moved = size(grid.product)
    degree = grid.smoothers[0][0]
    for number, level in enumerate(grid.levels):
        products = 2 * degree * (1 if number == 0 else 2)
        moved += products * size(level.matrix) + size(level.up) + size(level.down)
    speed = triad()
    return {
        "iteration": seconds,
        "floor": moved / speed,
        "triad": speed / 1e9,
        "iterations": outcome.iterations,
    }


def size(matrix: Matrix) -> float:
    """Return the bytes of a matrix."""
    if isinstance(matrix, NodeRows):
        return float(matrix.entries.nbytes + matrix.neighbours.nbytes + matrix.starts.nbytes)
    return float(matrix.data.nbytes + matrix.indices.nbytes + matrix.indptr.nbytes)
