"""Where a part could be singular: its points, or the edges of a solid part, with the material around each.

Edges of a solid part are swept by points of its plan through a layer, or are edges of its plan on a plane;
openings are those at their middle. Vertices where edges meet, and edges on the axis of a
revolution, are not examined.
"""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

import numpy as np

from convergence.corners.fans import Face, Fan, Wedge, fans
from convergence.corners.given_edges import given_edges
from convergence.corners.given_sites import given_fans
from convergence.fem.given_part import GivenPart
from convergence.fem.material import Material
from convergence.fem.part import EdgeName, Part
from convergence.fem.problem import AnyPart
from convergence.fem.solid_part import Cap, Side, SolidPart

STEP = 1e-6  # for tangents, of an edge's parameter and of the part's size
STATIONS = 9
STRAIGHT = 1e-9  # of the part's size
Materials = Mapping[str, Material]


@dataclass(frozen=True)
class Site:
    """A point or an edge: the part's points on it, places along it (n, D), its middle (D,), its fan."""

    points: tuple[str, ...]
    path: np.ndarray
    middle: np.ndarray
    fan: Fan


def sites(part: AnyPart, materials: Materials) -> Iterator[Site]:
    """Yield every point of a plane part, every edge of a solid part, those inside too; nothing of a rod.

    Of a solid that is given by its meshes edges inside, where materials meet, are not.
    """
    if isinstance(part, SolidPart):
        edges = {frozenset(edge): edge for edge in part.plan.families}.values()
        for layer in range(part.layers):
            for name in part.plan.points:
                yield from _swept_edge(part, materials, name, layer)
        for plane in range(len(part.planes)):
            for edge in edges:
                yield from _plan_edge(part, materials, edge, plane)
    elif isinstance(part, GivenPart):
        if part.dimension == 3:
            for one in given_edges(part, materials):
                yield Site(one.points, one.path, one.middle, one.fan)
        else:
            for name, fan in given_fans(part, materials):
                at = np.array(part.points[name])
                yield Site((name,), at[None], at, fan)
    elif isinstance(part, Part):
        for name, place in part.points.items():
            for fan in fans(_plane_wedges(part, materials, name, range(len(part.blocks)))):
                yield Site((name,), np.array([place]), np.array(place), fan)


def face_key(part: AnyPart, face: EdgeName | Side | Cap) -> Face:
    """Return what a face of a boundary is called in a fan, whatever its direction."""
    if isinstance(face, Side):
        return frozenset(face.edge), face.layer
    if isinstance(face, Cap):
        assert isinstance(part, SolidPart)
        return frozenset(part.plan.blocks[face.block]), face.plane
    return frozenset(face), 0


def _plane_wedges(part: Part, materials: Materials, name: str, blocks: Iterable[int]) -> Iterator[Wedge]:
    """Yield the corner of each block at a point, from its next edge to the one before."""
    for block in blocks:
        corners = part.blocks[block]
        if name not in corners:
            continue
        at = corners.index(name)
        ends = corners[(at + 1) % 4], corners[at - 1]
        ways = np.array([_tangent(part, (name, end), 0.0) for end in ends])
        start, end = (frozenset((name, other)) for other in ends)
        yield Wedge((start, 0), (end, 0), ways, _material(part, materials, block))


def _swept_edge(solid: SolidPart, materials: Materials, name: str, layer: int) -> Iterator[Site]:
    """Yield what is around the edge that a point of the plan sweeps through a layer."""
    s = np.linspace(solid.planes[layer][1], solid.planes[layer + 1][1], STATIONS)
    plan = np.array(solid.plan.points[name])
    slopes = _slopes(solid, plan, s[STATIONS // 2])
    if not slopes[:, 2].any():
        return  # on the axis of a revolution
    wedges = [
        Wedge(
            (wedge.start[0], layer),
            (wedge.end[0], layer),
            _across(wedge.ways @ slopes[:, :2].T, slopes[:, 2]),
            wedge.material,
        )
        for wedge in _plane_wedges(solid.plan, materials, name, solid.members(layer))
    ]
    places = solid.sweep.place(np.full_like(s, plan[0]), np.full_like(s, plan[1]), s)
    points = tuple(f"{name}_{solid.planes[plane][0]}" for plane in (layer, layer + 1))
    yield from _around(solid, points, places, wedges)


def _plan_edge(solid: SolidPart, materials: Materials, edge: EdgeName, plane: int) -> Iterator[Site]:
    """Yield what is around an edge of the plan on a plane: blocks left and right of it, above and below."""
    plan, (name, s) = solid.plan, solid.planes[plane]
    x, y = plan.edge(*edge, np.linspace(0.0, 1.0, STATIONS))
    slopes = _slopes(solid, np.array([x, y])[:, STATIONS // 2], s)
    if not slopes[:, 2].any():
        return  # on the axis of a revolution
    tangent = _tangent(plan, edge, 0.5)
    along, left, up = (
        slopes[:, :2] @ tangent,
        slopes[:, :2] @ np.array([-tangent[1], tangent[0]]),
        slopes[:, 2],
    )
    wedges = []
    for block, is_left in _beside(plan, edge):
        for layer in (plane, plane - 1):
            if block not in solid.members(layer):
                continue
            cap, side = (frozenset(plan.blocks[block]), plane), (frozenset(edge), layer)
            ways = _across(np.array([left if is_left else -left, up if layer == plane else -up]), along)
            material = _material(plan, materials, block)
            if is_left == (layer == plane):
                wedges.append(Wedge(cap, side, ways, material))
            else:
                wedges.append(Wedge(side, cap, ways[::-1], material))
    points = tuple(f"{end}_{name}" for end in edge)
    yield from _around(solid, points, solid.sweep.place(x, y, np.full_like(x, s)), wedges)


def _beside(plan: Part, edge: EdgeName) -> Iterator[tuple[int, bool]]:
    """Yield the blocks at an edge, and whether each lies left of it."""
    for block, (a, b, c, d) in enumerate(plan.blocks):
        sides = ((a, b), (b, c), (c, d), (d, a))
        if edge in sides or edge[::-1] in sides:
            yield block, edge in sides


def _around(
    solid: SolidPart, points: tuple[str, ...], places: np.ndarray, wedges: Iterable[Wedge]
) -> Iterator[Site]:
    """Yield a site for each fan; of a straight edge with its two ends only."""
    start, end = places[:, :1], places[:, -1:]
    straight = np.abs(places - np.linspace(start, end, STATIONS)[:, :, 0].T).max() < STRAIGHT * solid.size
    path = places[:, [0, -1]] if straight else places
    for fan in fans(wedges):
        yield Site(points, path.T, places[:, STATIONS // 2], fan)


def _material(part: Part, materials: Materials, block: int) -> Material:
    return materials[next((name for name, blocks in part.regions.items() if block in blocks), "body")]


def _tangent(part: Part, edge: EdgeName, at: float) -> np.ndarray:
    """Return the unit tangent (2,) of an edge at a parameter below one."""
    start, end = part.edge(*edge, np.array([at, at + STEP])).T
    return np.asarray((end - start) / np.hypot(*(end - start)))


def _slopes(solid: SolidPart, plan: np.ndarray, s: float) -> np.ndarray:
    """Return the slopes (3, 3) of the sweep's map; those of a coordinate that does not move a place are 0."""
    step = STEP * np.array([solid.plan.size, solid.plan.size, solid.planes[-1][1] - solid.planes[0][1]])
    at = np.array([*plan, s])[:, None] + np.concatenate([np.diag(step), -np.diag(step)], axis=1)
    places = solid.sweep.place(*at)
    moves = places[:, :3] - places[:, 3:]
    moves[:, np.linalg.norm(moves, axis=0) < STRAIGHT * solid.size] = 0.0
    return np.asarray(moves / (2.0 * step))


def _across(ways: np.ndarray, along: np.ndarray) -> np.ndarray:
    """Return directions (n, 3) without their share along an edge, as unit vectors."""
    axis = along / np.linalg.norm(along)
    flat = ways - np.outer(ways @ axis, axis)
    return np.asarray(flat / np.linalg.norm(flat, axis=1, keepdims=True))
