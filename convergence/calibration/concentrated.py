"""A plane part whose cells become small towards given points, the same part otherwise.

Along every family of edges that leaves such a point the places follow a power of the parameter, as is best
near a corner (Szabo & Babuska 1991, Finite Element Analysis, ch. 10, for radical meshes from memory). A
constant added to the parameter keeps quadratic cells sound.
"""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, fields

import numpy as np

from convergence.fem.part import EdgeName, Part

POWER = 3.0
FIRST = 1.5


@dataclass(frozen=True)
class ConcentratedPart(Part):
    """The part `plain`; `starts` has the offset of the power for every edge that leaves a small cell."""

    plain: Part = field(kw_only=True)
    starts: Mapping[EdgeName, float] = field(kw_only=True)

    def edge(self, start: str, end: str, s: np.ndarray) -> np.ndarray:
        """Return the points (2, n) at the parameters s of the edge from start to end."""
        return self.plain.edge(start, end, self._share((start, end), s))

    def block(self, index: int, s: np.ndarray, t: np.ndarray) -> np.ndarray:
        """Return the points (2, len(s), len(t)) of a block's map on the grid s × t."""
        a, b, _, d = self.blocks[index]
        return self.plain.block(index, self._share((a, b), s), self._share((a, d), t))

    def _share(self, edge: EdgeName, s: np.ndarray) -> np.ndarray:
        first, last = self.starts.get(edge), self.starts.get(edge[::-1])
        if first and last:
            halves = 0.5 * _power(2.0 * s, 2.0 * first), 1.0 - 0.5 * _power(2.0 * (1.0 - s), 2.0 * last)
            return np.where(s < 0.5, *halves)
        if last:
            return 1.0 - _power(1.0 - s, last)
        return _power(s, first) if first else s


def concentrated(part: Part, corners: Iterable[str], counts: Mapping[int, int]) -> ConcentratedPart:
    """Return the part for a mesh of `counts` with small cells at the points `corners`."""
    alike: dict[EdgeName, set[EdgeName]] = {}
    for a, b, c, d in part.blocks:
        for one, other in (((a, b), (d, c)), ((a, d), (b, c))):
            for pair in ((one, other), (one[::-1], other[::-1])):
                alike.setdefault(pair[0], set()).add(pair[1])
                alike.setdefault(pair[1], set()).add(pair[0])
    waiting = [edge for edge in alike if edge[0] in set(corners)]
    found: set[EdgeName] = set()
    while waiting:
        edge = waiting.pop()
        if edge not in found:
            found.add(edge)
            waiting += alike[edge]
    starts = {edge: FIRST / counts[part.families[edge]] for edge in found}
    return ConcentratedPart(
        **{one.name: getattr(part, one.name) for one in fields(Part)}, plain=part, starts=starts
    )


def _power(s: np.ndarray, offset: float) -> np.ndarray:
    """Return ((s + c)^n - c^n) / ((1 + c)^n - c^n)."""
    low = offset**POWER
    return np.asarray((np.maximum(s + offset, 0.0) ** POWER - low) / ((1.0 + offset) ** POWER - low))
