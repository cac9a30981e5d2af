"""A solid part: a plane part swept through planes, as in extrusion, revolution or twist.

Between two planes lies a layer; a layer may leave blocks of the plan out, which makes steps and bosses.
The sweep is a map of plan coordinates and a parameter s to space, so every node of every level lies on
the true geometry.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np

from convergence.fem.part import EdgeName, Part

Map = Callable[[np.ndarray, np.ndarray, np.ndarray], np.ndarray]


@dataclass(frozen=True)
class Sweep:
    """A map (x, y, s) -> (3, ...) of plan coordinates and parameter to space, and its inverse."""

    place: Map
    plan: Map


@dataclass(frozen=True)
class Side:
    """A face swept by an edge of the plan through one layer."""

    edge: EdgeName
    layer: int


@dataclass(frozen=True)
class Cap:
    """A face of one block of the plan on a plane."""

    plane: int
    block: int


Face = Side | Cap


def _stack(*coordinates: np.ndarray) -> np.ndarray:
    return np.array(np.broadcast_arrays(*coordinates))


def _revolve(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    angle = np.radians(s)
    return _stack(x * np.cos(angle), y, x * np.sin(angle))


def _unroll(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
    return _stack(np.hypot(x, z), y, np.degrees(np.arctan2(z, x)))


EXTRUDED = Sweep(_stack, _stack)  # along z, s = z
REVOLVED = Sweep(_revolve, _unroll)  # around the y axis, s in degrees from x towards z, within ±180


@dataclass(frozen=True)
class SolidPart:
    """A plan swept through `planes`: names with rising values of the sweep parameter s.

    The point P of the plan on the plane F is named P_F. A boundary of the plan names the faces it sweeps,
    a plane those that lie open on it; `named` gives faces a name of their own instead. `filled` has the
    blocks of each layer (all where empty), `regions` blocks by index, in every layer that has them.
    `weights` sets the cells per division of a layer, `ratios` its last cell over its first.
    """

    plan: Part
    planes: tuple[tuple[str, float], ...]
    sweep: Sweep = EXTRUDED
    filled: tuple[tuple[int, ...], ...] = ()
    named: Mapping[str, tuple[Face, ...]] = field(default_factory=dict)
    weights: Mapping[int, float] = field(default_factory=dict)
    ratios: Mapping[int, float] = field(default_factory=dict)

    @property
    def dimension(self) -> int:
        return 3

    @property
    def regions(self) -> Mapping[str, tuple[int, ...]]:
        return self.plan.regions

    @property
    def layers(self) -> int:
        return len(self.planes) - 1

    @property
    def layer_families(self) -> tuple[int, ...]:
        """Return the family number of each layer; those of the plan's edges are 0 and more."""
        return tuple(-1 - layer for layer in range(self.layers))

    def plane_numbers(self, counts: Mapping[int, int], degree: int) -> np.ndarray:
        """Return the number of each plane of the part among the planes of nodes of a mesh."""
        return np.concatenate([[0], np.cumsum([degree * counts[f] for f in self.layer_families])])

    def members(self, layer: int) -> tuple[int, ...]:
        """Return the blocks of the plan that a layer has, none outside the part."""
        if not 0 <= layer < self.layers:
            return ()
        return self.filled[layer] if self.filled else tuple(range(len(self.plan.blocks)))

    @cached_property
    def points(self) -> Mapping[str, tuple[float, ...]]:
        """Return the places of the plan's points on the planes that have them."""
        found = {}
        for number, (plane, s) in enumerate(self.planes):
            blocks = {*self.members(number - 1), *self.members(number)}
            names = dict.fromkeys(name for block in sorted(blocks) for name in self.plan.blocks[block])
            for name in names:
                x, y = self.plan.points[name]
                at = self.sweep.place(np.array([x]), np.array([y]), np.array([s]))[:, 0]
                found[f"{name}_{plane}"] = tuple(float(value) for value in at)
        return found

    @cached_property
    def faces(self) -> frozenset[Face]:
        """Return all faces between the part and its outside; the edges of sides as in the block inside."""
        open_faces: set[Face] = set()
        for layer in range(self.layers):
            seen: dict[frozenset[str], list[EdgeName]] = {}
            for block in self.members(layer):
                a, b, c, d = self.plan.blocks[block]
                for edge in ((a, b), (b, c), (c, d), (d, a)):
                    seen.setdefault(frozenset(edge), []).append(edge)
            open_faces |= {Side(edges[0], layer) for edges in seen.values() if len(edges) == 1}
        for plane in range(len(self.planes)):
            below, above = set(self.members(plane - 1)), set(self.members(plane))
            open_faces |= {Cap(plane, block) for block in below ^ above}
        return frozenset(open_faces)

    @cached_property
    def boundaries(self) -> Mapping[str, tuple[Face, ...]]:
        """Return the open faces of every boundary, each face once."""
        names = {face: name for name, faces in self.named.items() for face in faces}
        swept = {frozenset(e): name for name, edges in self.plan.boundaries.items() for e in edges}
        found: dict[str, list[Face]] = {name: [] for name in self.named}
        for face in sorted(self.faces, key=str):
            if isinstance(face, Cap):
                default = self.planes[face.plane][0]
            else:
                default = swept.get(frozenset(face.edge), "step")
            found.setdefault(names.get(face, default), []).append(face)
        return {name: tuple(faces) for name, faces in found.items()}

    @cached_property
    def size(self) -> float:
        """Return the diagonal of the box around the part."""
        corners = self._outline_places(33)
        return float(np.linalg.norm(np.ptp(corners, axis=1)))

    def thickness(self, layer: int) -> float:
        """Return the mean length of a layer along the sweep, over the corners of its blocks."""
        names = sorted({name for block in self.members(layer) for name in self.plan.blocks[block]})
        x, y = np.array([self.plan.points[name] for name in names]).T
        s = np.linspace(self.planes[layer][1], self.planes[layer + 1][1], 65)
        path = self.sweep.place(x[:, None], y[:, None], s[None, :])
        return float(np.linalg.norm(np.diff(path, axis=2), axis=0).sum(axis=1).mean())

    def steps(self, layer: int, share: np.ndarray) -> np.ndarray:
        """Return s at shares 0 … 1 of a layer's cells; cells grow geometrically where `ratios` asks."""
        start, end = self.planes[layer][1], self.planes[layer + 1][1]
        growth = float(np.log(self.ratios.get(layer, 1.0)))
        if abs(growth) > 1e-9:
            share = np.expm1(growth * share) / np.expm1(growth)
        return start + (end - start) * share

    def divisions(self, *, size: float | None, divisions: int | None) -> dict[int, int]:
        """Return the cells per family and per layer on the coarsest level, as `Part.divisions`."""
        counts = self.plan.divisions(size=size, divisions=divisions)
        edge = size if size is not None else self.plan.coarsest_edge
        for layer, family in enumerate(self.layer_families):
            weight = self.weights.get(layer, max(1.0, self.thickness(layer) / edge))
            if size is not None:
                counts[family] = max(1, int(np.ceil(self.thickness(layer) / size - 1e-9)))
            else:
                counts[family] = max(1, round(weight * (divisions or 1)))
        return counts

    def contains(self, places: np.ndarray) -> np.ndarray:
        """Return which places (3, n) lie in the part or within 1e-5 of its size of it."""
        x, y, s = self.sweep.plan(*places)
        inside = np.zeros(places.shape[1], dtype=bool)
        for layer in range(self.layers):
            low, high = self.planes[layer][1], self.planes[layer + 1][1]
            room = 1e-5 * (self.planes[-1][1] - self.planes[0][1])
            near = (s >= low - room) & (s <= high + room)
            if near.any():
                inside[near] |= self._floor(layer).contains(np.array([x, y])[:, near])
        return inside

    def _floor(self, layer: int) -> Part:
        """Return the part of the plan that a layer has."""
        blocks = tuple(self.plan.blocks[block] for block in self.members(layer))
        return Part(self.plan.points, blocks, self.plan.curves)

    def boundary_points(self, boundary: str) -> set[str]:
        """Return the names of the points on a boundary."""
        found = set()
        for face in self.boundaries[boundary]:
            planes = (face.layer, face.layer + 1) if isinstance(face, Side) else (face.plane,)
            names = face.edge if isinstance(face, Side) else self.plan.blocks[face.block]
            found |= {f"{name}_{self.planes[plane][0]}" for plane in planes for name in names}
        return found

    def region_points(self, region: str) -> set[str]:
        """Return the names of the points of a region."""
        found = set()
        for layer in range(self.layers):
            for block in set(self.members(layer)) & set(self.regions[region]):
                for plane in (layer, layer + 1):
                    found |= {f"{name}_{self.planes[plane][0]}" for name in self.plan.blocks[block]}
        return found

    def _outline_places(self, count: int) -> np.ndarray:
        """Return places on the edges of the outline through all layers (3, n)."""
        steps = np.linspace(0.0, 1.0, count)
        x, y = np.concatenate([self.plan.edge(*edge, steps) for edge in self.plan.outline], axis=1)
        s = np.linspace(self.planes[0][1], self.planes[-1][1], count)
        return self.sweep.place(x[:, None], y[:, None], s[None, :]).reshape(3, -1)
