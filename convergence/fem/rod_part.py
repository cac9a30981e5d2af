"""A straight rod along x, of one or several pieces: the simplest part."""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np


@dataclass(frozen=True)
class RodPart:
    """Points by their place x, rising; a piece lies between each two, and its cells are equal.

    The boundaries are the two ends, by the names of their points; `regions` are pieces by index.
    """

    points: Mapping[str, tuple[float, ...]]
    regions: Mapping[str, tuple[int, ...]] = field(default_factory=dict)

    @property
    def dimension(self) -> int:
        return 1

    @property
    def ends(self) -> tuple[str, str]:
        names = list(self.points)
        return names[0], names[-1]

    @property
    def boundaries(self) -> Mapping[str, tuple[str, ...]]:
        """Return the two ends, each named by its point."""
        return {name: (name,) for name in self.ends}

    @property
    def stations(self) -> np.ndarray:
        """Return x of all points."""
        return np.array([x for (x,) in self.points.values()])

    @property
    def size(self) -> float:
        """Return the length."""
        return float(np.ptp(self.stations))

    def boundary_points(self, boundary: str) -> set[str]:
        """Return the names of the points on a boundary."""
        return {boundary}

    def region_points(self, region: str) -> set[str]:
        """Return the names of the points of a region."""
        names = list(self.points)
        return {names[piece + end] for piece in self.regions[region] for end in (0, 1)}

    def contains(self, places: np.ndarray) -> np.ndarray:
        """Return which places (1, n) lie in the rod or within 1e-5 of its size of it."""
        room = 1e-5 * self.size
        stations = self.stations
        return np.asarray((places[0] >= stations[0] - room) & (places[0] <= stations[-1] + room))

    def divisions(self, *, size: float | None, divisions: int | None) -> dict[int, int]:
        """Return the cells of each piece: of `size` at most, or `divisions` in the shortest piece."""
        lengths = np.diff(self.stations)
        edge = size if size is not None else float(lengths.min()) / (divisions or 1)
        return {piece: max(1, int(np.ceil(length / edge - 1e-9))) for piece, length in enumerate(lengths)}
