"""A mesh of a file as a given mesh: its outer facets, its named boundaries, points and regions."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np
from scipy import sparse

from convergence.bodies.file_mesh import CellGroup, FileMesh
from convergence.bodies.picking import Pick, picked
from convergence.errors import Unsuitable, listing, nearest
from convergence.fem.element import Shape
from convergence.fem.given_part import REST, GivenMesh
from convergence.fem.outer_facets import facet_corners, facet_keys, outer_facets

Facets = tuple[np.ndarray, ...]
BODY = "body"


@dataclass(frozen=True, eq=False)
class Outline:
    """The outer facets of cells in groups of one shape, and the keys that tell each by its vertices."""

    nodes: np.ndarray
    groups: Facets
    keys: Facets

    def key(self, vertices: np.ndarray) -> np.ndarray:
        """Return the keys of facets (k, f), by their vertices."""
        corners = facet_corners(len(self.nodes), len(vertices))
        return facet_keys(vertices[:corners], self.nodes.shape[1])

    def among(self, keys: np.ndarray) -> Facets:
        """Return the facets whose keys are among these."""
        return self._kept([np.asarray(np.isin(own, keys)) for own in self.keys])

    def without(self, keys: np.ndarray) -> Facets:
        """Return the facets whose keys are not among these."""
        return self._kept([np.asarray(~np.isin(own, keys)) for own in self.keys])

    def between(self, members: np.ndarray) -> Facets:
        """Return the facets whose vertices are all among these nodes."""
        inside = np.zeros(self.nodes.shape[1], dtype=bool)
        inside[members] = True
        corners = [facet_corners(len(self.nodes), len(group)) for group in self.groups]
        return self._kept(
            [
                np.asarray(inside[group[:count]].all(axis=0))
                for group, count in zip(self.groups, corners, strict=True)
            ]
        )

    def _kept(self, masks: list[np.ndarray]) -> Facets:
        return tuple(group[:, mask] for group, mask in zip(self.groups, masks, strict=True) if mask.any())


def outline(nodes: np.ndarray, cell_nodes: np.ndarray, shape: Shape, degree: int) -> Outline:
    """Return the outer facets of cells."""
    bare = Outline(nodes, tuple(found for found, _ in outer_facets(shape, degree, cell_nodes)), ())
    return Outline(nodes, bare.groups, tuple(bare.key(group) for group in bare.groups))


def given_mesh(found: FileMesh, group: CellGroup, picks: Mapping[str, Pick]) -> GivenMesh:
    """Return the cells of a group with the boundaries that the file names and those that are picked.

    A set of nodes of the file is the facets whose vertices it holds all of, or a named point where it is a
    single node. A named set of facets inside the body is no boundary. What is on no boundary is `rest`. Sets
    of cells are regions as far as they do not share cells with a set before them; other cells are `body`.
    Unsuitable, with keys NAME.KEY, where picks misfit.
    """
    used, cells = np.unique(group.cell_nodes, return_inverse=True)
    cells = cells.reshape(group.cell_nodes.shape)
    outer = outline(found.nodes[:, used], cells, group.shape, group.degree)
    local = np.full(found.nodes.shape[1], -1)
    local[used] = np.arange(len(used))
    named = {name: facets for name, facets in _named(found, local, outer) if facets}
    boundaries = {**named, **_picked(picks, outer, named)}
    number = next(n for n, each in enumerate(found.groups) if each is group)
    single = {name: local[nodes[0]] for name, nodes in found.node_sets.items() if len(nodes) == 1}
    return GivenMesh(
        shape=group.shape,
        degree=group.degree,
        nodes=outer.nodes,
        cell_nodes=cells,
        facets=with_rest(boundaries, outer),
        vertices={name: int(node) for name, node in single.items() if node >= 0},
        regions=_regions(
            {name: sets[number] for name, sets in found.cell_sets.items()}, group.cell_nodes.shape[1]
        ),
    )


def with_rest(boundaries: Mapping[str, Facets], outer: Outline) -> dict[str, Facets]:
    """Return boundaries and, as `rest`, the outer facets that are on none of them."""
    keys = [outer.key(group) for groups in boundaries.values() for group in groups]
    left = outer.without(np.concatenate([np.zeros(0, dtype=np.int64), *keys]))
    return {**boundaries, REST: left} if left else dict(boundaries)


def bodies_of(made: GivenMesh) -> int:
    """Return how many bodies that share no nodes the cells make."""
    from scipy.sparse.csgraph import connected_components

    cells = made.cell_nodes
    links = (np.ones(cells[1:].size), (np.broadcast_to(cells[0], cells[1:].shape).ravel(), cells[1:].ravel()))
    size = made.nodes.shape[1]
    return int(connected_components(sparse.coo_matrix(links, shape=(size, size)), directed=False)[0])


def with_common_names(meshes: Sequence[GivenMesh]) -> tuple[list[GivenMesh], tuple[str, ...]]:
    """Return meshes with the boundaries and points that all have, and a remark on those left out."""
    names = [{*made.facets, *made.vertices} - {REST} for made in meshes]
    kept, every = set.intersection(*names), set.union(*names)
    if kept == every:
        return list(meshes), ()
    found = []
    for made in meshes:
        facets = {name: groups for name, groups in made.facets.items() if name in kept}
        vertices = {name: node for name, node in made.vertices.items() if name in kept}
        outer = outline(made.nodes, made.cell_nodes, made.shape, made.degree)
        found.append(replace(made, facets=with_rest(facets, outer), vertices=vertices))
    missed = listing(sorted(every - kept))
    return found, (f"boundaries and points that not all of the files have are left out: {missed}",)


def _named(found: FileMesh, local: np.ndarray, outer: Outline) -> Iterator[tuple[str, Facets]]:
    """Yield the boundaries that sets of facets and of nodes in the file make; `local` numbers its nodes."""
    for name, groups in found.facet_sets.items():
        inside = [local[group][:, (local[group] >= 0).all(axis=0)] for group in groups]
        yield name, outer.among(np.concatenate([outer.key(facets) for facets in inside]))
    for name, nodes in found.node_sets.items():
        if name not in found.facet_sets and len(nodes) > 1:
            yield name, outer.between(local[nodes][local[nodes] >= 0])


def _picked(picks: Mapping[str, Pick], outer: Outline, named: Mapping[str, Facets]) -> dict[str, Facets]:
    """Return the picked boundaries; Unsuitable with the faults of all of them."""
    found: dict[str, Facets] = {}
    problems: list[tuple[str, object, str]] = []
    for name, pick in picks.items():
        if pick.of and pick.of not in named:
            problems.append((f"{name}.of", pick.of, f"a boundary of the file; {nearest(pick.of, named)}"))
            continue
        try:
            found[name] = picked(pick, outer.nodes, named[pick.of] if pick.of else outer.groups)
        except Unsuitable as error:
            problems += [(f"{name}.{key}", value, right) for key, value, right in error.problems]
    if problems:
        raise Unsuitable(problems)
    return found


def _regions(sets: Mapping[str, np.ndarray], cells: int) -> dict[str, np.ndarray]:
    """Return a region for every cell: sets that share no cell with one before, `body` for what is left.

    A set of all cells is a region only where there is no other.
    """
    parts = {name: members for name, members in sets.items() if 0 < len(members) < cells}
    free = np.ones(cells, dtype=bool)
    regions: dict[str, np.ndarray] = {}
    for name, members in (parts or sets).items():
        if len(members) and free[members].all():
            regions[name] = np.sort(members)
            free[members] = False
    if free.any():
        regions[BODY] = np.flatnonzero(free)
    return regions
