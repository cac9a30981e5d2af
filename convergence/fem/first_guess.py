"""A first guess for a level: the displacement of a coarser mesh of the same part, read at the finer nodes.

It is read in the parameters of the part's blocks with the polynomials of the coarser cells, so levels
need not be nested and the guess is as good as the coarser solution.
"""

from collections.abc import Mapping

import numpy as np

from convergence.fem.grid import Grids
from convergence.fem.mesh import Mesh
from convergence.fem.part import Part
from convergence.fem.solid_part import SolidPart
from convergence.fem.transfer import places_along


def first_guess(counts: Mapping[int, int], unknowns: np.ndarray, fine: Mesh) -> np.ndarray | None:
    """Return the interleaved unknowns of a mesh from those of a mesh of other counts and the same degree.

    None for rods and parts with open layers.
    """
    part, degree = fine.part, fine.degree
    values = unknowns.reshape(-1, fine.dimension)
    if isinstance(part, Part):
        return _plane(values, Grids(part, counts, degree), Grids(part, fine.counts, degree)).ravel()
    if not isinstance(part, SolidPart) or part.filled:
        return None
    before, after = (Grids(part.plan, cells, degree) for cells in (counts, fine.counts))
    layers = values.reshape(-1, before.size, fine.dimension)
    starts = part.plane_numbers(counts, degree)
    found = [layers[:1]]
    for start, end, family in zip(starts, starts[1:], part.layer_families, strict=False):
        steps = degree * fine.counts[family]
        found.append(_along(steps, counts[family], degree, layers[start : end + 1])[1:])
    through = np.moveaxis(np.concatenate(found), 0, 1)
    return np.moveaxis(_plane(through, before, after), 1, 0).ravel()


def _plane(values: np.ndarray, coarse: Grids, fine: Grids) -> np.ndarray:
    """Return values (fine nodes, ...) from values (coarse nodes, ...) of a plane part's grids."""
    result = np.empty((fine.size, *values.shape[1:]))
    for ids, wanted in zip(coarse.blocks, fine.blocks, strict=True):
        block = values[ids]
        for axis in range(2):
            cells = (ids.shape[axis] - 1) // coarse.degree
            turned = _along(wanted.shape[axis] - 1, cells, coarse.degree, np.moveaxis(block, axis, 0))
            block = np.moveaxis(turned, 0, axis)
        result[wanted.ravel()] = block.reshape(-1, *values.shape[1:])
    return result


def _along(fine: int, coarse: int, degree: int, values: np.ndarray) -> np.ndarray:
    """Return values (degree coarse + 1, ...) of nodes along an edge, read at fine + 1 equal steps."""
    cell, s = places_along(fine, coarse)
    s = s.reshape(-1, *[1] * (values.ndim - 1))
    shapes = [1.0 - s, s] if degree == 1 else [(1 - s) * (1 - 2 * s), 4 * s * (1 - s), s * (2 * s - 1)]
    total = np.zeros((fine + 1, *values.shape[1:]))
    for number, shape in enumerate(shapes):
        total += shape * values[degree * cell + number]
    return total
