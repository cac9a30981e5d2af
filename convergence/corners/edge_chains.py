"""Edges of facets that go on in each other, as one edge of a part."""

from collections.abc import Iterator

import numpy as np

BEND = np.cos(np.radians(60.0))  # an edge that turns more along itself is two


def edge_chains(
    nodes: np.ndarray, ends: np.ndarray, kind: np.ndarray
) -> Iterator[tuple[list[int], tuple[int, ...]]]:
    """Yield edges of facets (2, e) that go on in each other: their numbers, and the nodes along them.

    A chain ends where other than two sharp edges meet, where the kind changes, and where it bends.
    """
    around: dict[int, list[int]] = {}
    for number, pair in enumerate(ends.T.tolist()):
        for node in pair:
            around.setdefault(node, []).append(number)
    left = set(range(ends.shape[1]))

    def following(number: int, node: int) -> int | None:
        others = [other for other in around[node] if other != number]
        if len(others) != 1 or others[0] not in left or (kind[:, others[0]] != kind[:, number]).any():
            return None
        back, on = (nodes[:, _other(ends, edge, node)] - nodes[:, node] for edge in (number, others[0]))
        bend = -float(back @ on) / float(np.linalg.norm(back) * np.linalg.norm(on))
        return others[0] if bend > BEND else None

    while left:
        first = min(left)
        left.remove(first)
        members, path = [first], ends[:, first].tolist()
        for _ in range(2):
            while (further := following(members[-1], path[-1])) is not None:
                left.remove(further)
                path.append(_other(ends, further, path[-1]))
                members.append(further)
            members, path = members[::-1], path[::-1]
        yield members, tuple(int(node) for node in path)


def _other(ends: np.ndarray, edge: int, node: int) -> int:
    one, other = ends[:, edge]
    return int(other if one == node else one)
