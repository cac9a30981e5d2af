"""A plane part as mapped blocks: four-sided patches whose curved edges keep their true shape.

Each block is filled by the transfinite map of its four edges (Gordon & Hall 1973, Int. J. Numer.
Meth. Engng 7:461, eq. 6), so every node of every level lies on the true geometry. Opposite edges of a
block carry the same number of cells; edges tied in this way form a family.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np

Curve = Callable[[np.ndarray], np.ndarray]
EdgeName = tuple[str, str]


def arc(centre: tuple[float, float], radius: float, start: float, end: float) -> Curve:
    """Return a circular arc, angles in degrees, parameter 0 … 1 in equal angles."""

    def curve(s: np.ndarray) -> np.ndarray:
        angle = np.radians(start + (end - start) * s)
        return np.array([centre[0] + radius * np.cos(angle), centre[1] + radius * np.sin(angle)])

    return curve


def ellipse(
    half_x: float, half_y: float, start: float, end: float, *, centre: tuple[float, float] = (0.0, 0.0)
) -> Curve:
    """Return an arc of an ellipse, by the eccentric angle in degrees."""

    def curve(s: np.ndarray) -> np.ndarray:
        angle = np.radians(start + (end - start) * s)
        return np.array([centre[0] + half_x * np.cos(angle), centre[1] + half_y * np.sin(angle)])

    return curve


def graded(start: tuple[float, float], end: tuple[float, float], ratio: float) -> Curve:
    """Return a straight edge whose cells grow geometrically, the last `ratio` times as long as the first."""
    a, b = np.array(start), np.array(end)
    growth = np.log(ratio)

    def curve(s: np.ndarray) -> np.ndarray:
        share = np.expm1(growth * s) / np.expm1(growth) if abs(growth) > 1e-9 else s
        return np.asarray(a[:, None] * (1.0 - share) + b[:, None] * share)

    return curve


@dataclass(frozen=True)
class Part:
    """Blocks by their corner points, counter-clockwise; edges are straight unless `curves` names them.

    `boundaries` gives a name to edges, `regions` to blocks by index (all blocks are "body" where empty);
    `weights` sets the cells per division of a family of edges (by any of its edges), which otherwise
    follow from its length, so that cells come out about equal.
    """

    points: Mapping[str, tuple[float, float]]
    blocks: tuple[tuple[str, str, str, str], ...]
    curves: Mapping[EdgeName, Curve] = field(default_factory=dict)
    boundaries: Mapping[str, tuple[EdgeName, ...]] = field(default_factory=dict)
    regions: Mapping[str, tuple[int, ...]] = field(default_factory=dict)
    weights: Mapping[EdgeName, float] = field(default_factory=dict)

    @property
    def dimension(self) -> int:
        return 2

    def boundary_points(self, boundary: str) -> set[str]:
        """Return the names of the points on a boundary."""
        return {name for edge in self.boundaries[boundary] for name in edge}

    def region_points(self, region: str) -> set[str]:
        """Return the names of the points of a region."""
        return {name for index in self.regions[region] for name in self.blocks[index]}

    def edge(self, start: str, end: str, s: np.ndarray) -> np.ndarray:
        """Return the points (2, n) at the parameters s of the edge from start to end."""
        if (start, end) in self.curves:
            return np.asarray(self.curves[start, end](s))
        if (end, start) in self.curves:
            return np.asarray(self.curves[end, start](1.0 - s))
        a, b = np.array(self.points[start]), np.array(self.points[end])
        return np.asarray(a[:, None] * (1.0 - s) + b[:, None] * s)

    def block(self, index: int, s: np.ndarray, t: np.ndarray) -> np.ndarray:
        """Return the points (2, len(s), len(t)) of a block's map on the grid s × t."""
        a, b, c, d = self.blocks[index]
        south, north = self.edge(a, b, s)[:, :, None], self.edge(d, c, s)[:, :, None]
        west, east = self.edge(a, d, t)[:, None, :], self.edge(b, c, t)[:, None, :]
        x, y = s[None, :, None], t[None, None, :]
        corner = {name: np.array(self.points[name])[:, None, None] for name in (a, b, c, d)}
        bilinear = (1 - x) * ((1 - y) * corner[a] + y * corner[d]) + x * ((1 - y) * corner[b] + y * corner[c])
        filled: np.ndarray = (1 - y) * south + y * north + (1 - x) * west + x * east - bilinear
        return filled

    @cached_property
    def families(self) -> dict[EdgeName, int]:
        """Return the family number of every edge, both directions."""
        family: dict[EdgeName, int] = {}
        for a, b, c, d in self.blocks:
            for pair in (((a, b), (d, c)), ((b, c), (a, d))):
                names = [edge for e in pair for edge in (e, e[::-1])]
                old = {family[edge] for edge in names if edge in family}
                number = min(old, default=len(family))
                family |= dict.fromkeys(names, number)
                family = {edge: number if n in old else n for edge, n in family.items()}
        return family

    @cached_property
    def outline(self) -> dict[EdgeName, int]:
        """Return the edges of one block only, in the block's direction, with that block's index."""
        uses: dict[frozenset[str], list[tuple[EdgeName, int]]] = {}
        for index, (a, b, c, d) in enumerate(self.blocks):
            for edge in ((a, b), (b, c), (c, d), (d, a)):
                uses.setdefault(frozenset(edge), []).append((edge, index))
        return dict(found[0] for found in uses.values() if len(found) == 1)

    def length(self, edge: EdgeName) -> float:
        """Return the length of an edge, by chords of 200 steps (relative error below 1e-4 for arcs)."""
        along = self.edge(*edge, np.linspace(0.0, 1.0, 201))
        return float(np.hypot(*np.diff(along, axis=1)).sum())

    @cached_property
    def size(self) -> float:
        """Return the diagonal of the box around the part."""
        steps = np.linspace(0.0, 1.0, 33)
        along = np.concatenate([self.edge(*edge, steps) for edge in self.outline], axis=1)
        return float(np.hypot(*np.ptp(along, axis=1)))

    def contains(self, places: np.ndarray) -> np.ndarray:
        """Return which places (2, n) lie in the part or within 1e-5 of its size of it, by winding numbers."""
        steps = np.linspace(0.0, 1.0, 201)
        along = np.stack([self.edge(*edge, steps) for edge in self.outline], axis=1)
        start, end = along[:, :, :-1].reshape(2, 1, -1), along[:, :, 1:].reshape(2, 1, -1)
        to_start, to_end, side = start - places[:, :, None], end - places[:, :, None], end - start
        turn = np.arctan2(to_start[0] * to_end[1] - to_start[1] * to_end[0], (to_start * to_end).sum(axis=0))
        share = np.clip(-(to_start * side).sum(axis=0) / (side**2).sum(axis=0), 0.0, 1.0)
        distance = np.hypot(*(to_start + share * side)).min(axis=1)
        inside: np.ndarray = (turn.sum(axis=1) > np.pi) | (distance <= 1e-5 * self.size)
        return inside

    @cached_property
    def _family_lengths(self) -> dict[int, float]:
        lengths: dict[int, float] = {}
        for edge, number in self.families.items():
            lengths[number] = max(lengths.get(number, 0.0), self.length(edge))
        return lengths

    def divisions(self, *, size: float | None, divisions: int | None) -> dict[int, int]:
        """Return the number of cells per family on the coarsest level.

        `divisions` counts the cells along the shortest family of edges (or per unit of `weights`);
        `size` is the largest cell edge wanted.
        """
        weights = self._family_weights()
        if divisions is None:
            if size is None:
                raise ValueError("either size or divisions")
            density = self.coarsest_edge / size
            return {n: max(1, int(np.ceil(weight * density - 1e-9))) for n, weight in weights.items()}
        return {n: max(1, round(weight * divisions)) for n, weight in weights.items()}

    def _family_weights(self) -> dict[int, float]:
        lengths = self._family_lengths
        shortest = min(lengths.values())
        weights = {number: length / shortest for number, length in lengths.items()}
        return weights | {self.families[edge]: value for edge, value in self.weights.items()}

    @property
    def coarsest_edge(self) -> float:
        """Return the length of the largest cell edge at one division."""
        weights = self._family_weights()
        return max(length / weights[number] for number, length in self._family_lengths.items())


def finer(counts: Mapping[int, int], ratio: float, level: int) -> dict[int, int]:
    """Return the cells per family `level` steps above the coarsest, rounded where the ratio asks."""
    return {number: max(1, round(count * ratio**level)) for number, count in counts.items()}
