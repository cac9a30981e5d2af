"""A singular corner of a plane part, or an edge of a solid."""

from dataclasses import dataclass

import numpy as np


@dataclass(frozen=True)
class Corner:
    """A singular corner of a plane, or an edge of a solid: opening in degrees, its two sides, exponent.

    `path` are the places along it (one in a plane), `points` the part's own points on it.
    """

    name: str
    path: tuple[tuple[float, ...], ...]
    points: tuple[str, ...]
    opening: float
    sides: tuple[str, str]
    exponent: float

    @property
    def where(self) -> str:
        """Return "at (x, y)", or "from (x, y, z) to (x, y, z)" for an edge."""
        ends = [f"({', '.join(f'{x:.4g}' for x in place)})" for place in (self.path[0], self.path[-1])]
        if len(self.path) == 1:
            return f"at {ends[0]}"
        return f"all around through {ends[0]}" if ends[0] == ends[1] else f"from {ends[0]} to {ends[1]}"

    def distance(self, place: tuple[float, ...]) -> float:
        """Return how far a place is from the corner."""
        corners, at = np.array(self.path), np.array(place)
        if len(corners) == 1:
            return float(np.linalg.norm(corners[0] - at))
        start, along = corners[:-1], np.diff(corners, axis=0)
        squares = np.maximum((along**2).sum(axis=1), np.finfo(float).tiny)
        share = np.clip(((at - start) * along).sum(axis=1) / squares, 0.0, 1.0)
        return float(np.linalg.norm(start + share[:, None] * along - at, axis=1).min())
