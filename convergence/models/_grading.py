"""Cells that grow away from a corner: what models with a corner of interest share."""

from collections.abc import Iterable, Mapping
from typing import Annotated

from convergence.dimensions import RATIO, Bounds
from convergence.fem.part import Curve, EdgeName, graded

Grading = Annotated[
    float,
    RATIO,
    Bounds(1.0, 100.0, closed=True),
    "how many times longer cells are at the far end of the edges that leave the corner; 1 is even",
]


def away_from(
    corner: str,
    points: Mapping[str, tuple[float, float]],
    blocks: Iterable[tuple[str, str, str, str]],
    grading: float,
) -> dict[EdgeName, Curve]:
    """Return the straight edges of blocks that leave a corner, their cells growing along them.

    The opposite edges of the blocks stay even: the cells at the corner become small in both directions, the
    others are not drawn out. Quadratic cells need a grading below 9 where such an edge has one cell.
    """
    places = [(block, block.index(corner)) for block in blocks if corner in block]
    ends = {block[(place + step) % 4] for block, place in places for step in (1, 3)}
    return {(corner, end): graded(points[corner], points[end], grading) for end in sorted(ends)}
