"""Singular edges that go on in each other, joined to one."""

from collections import Counter
from collections.abc import Iterable

from convergence.corner import Corner

Kind = tuple[tuple[str, str], int]


def edge_name(points: tuple[str, ...]) -> str:
    """Return the name of an edge: its first two points, which no other edge has, and its last."""
    return "-".join(points if len(points) < 4 else (*points[:2], points[-1]))


def chained(corners: Iterable[Corner]) -> list[Corner]:
    """Return the corners, edges of equal sides and opening (to a degree) joined where just two of them meet.

    The weakest of the joined ones gives opening and exponent.
    """
    found, groups = [], dict[Kind, list[Corner]]()
    for corner in corners:
        if len(corner.points) == 1:
            found.append(corner)
        else:
            groups.setdefault((corner.sides, round(corner.opening)), []).append(corner)
    for group in groups.values():
        meeting = Counter(end for edge in group for end in (edge.points[0], edge.points[-1]))
        while group:
            chain = group.pop(0)
            while following := _next(chain, group, meeting):
                group.remove(following)
                chain = _joined(chain, following)
            found.append(chain)
    return found


def _next(chain: Corner, group: list[Corner], meeting: Counter[str]) -> Corner | None:
    """Return an edge of the group that shares an end with the chain where no third one does."""
    ends = {end for end in (chain.points[0], chain.points[-1]) if meeting[end] == 2}
    return next((edge for edge in group if ends & {edge.points[0], edge.points[-1]}), None)


def _joined(one: Corner, other: Corner) -> Corner:
    """Return two edges that share an end as one."""
    first = one if one.points[-1] in (other.points[0], other.points[-1]) else _turned(one)
    then = other if other.points[0] == first.points[-1] else _turned(other)
    weaker = min(one, other, key=lambda edge: edge.exponent)
    points = first.points + then.points[1:]
    return Corner(
        name=edge_name(points),
        path=first.path + then.path[1:],
        points=points,
        opening=weaker.opening,
        sides=one.sides,
        exponent=weaker.exponent,
    )


def _turned(edge: Corner) -> Corner:
    return Corner(edge.name, edge.path[::-1], edge.points[::-1], edge.opening, edge.sides, edge.exponent)
