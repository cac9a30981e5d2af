"""One mesh refined over and over: every cell cut into 2^D, new nodes put on the true curves.

New nodes are placed by the map of degree 2 of the cell they are in, so curved cells stay smooth. Those of
boundaries whose plane, circle, cylinder or sphere is known are then moved onto it; middles of faces and cells
follow the middles of their edges (transfinite interpolation: Gordon & Hall 1973, Int. J. Numer. Meth. Engng
7:461). Where a cell would fold, the nodes inside move with those around them, most with the nearest.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np
from scipy import sparse

from convergence.bodies.raising import FACETS, Groups, Raised, owners, raised
from convergence.bodies.repairs import jacobian_range
from convergence.bodies.shapes import Plane, Round
from convergence.bodies.splitting import pieces, split
from convergence.bodies.tally import tally
from convergence.fem.element import Shape, element
from convergence.fem.given_part import GivenMesh
from convergence.fem.outer_facets import facet_corners

Surfaces = Mapping[str, Plane | Round]
TURNS = 50  # of putting a node on each of its surfaces
ONTO = 1e-12  # of the largest coordinate


@dataclass(frozen=True, eq=False)
class State:
    """A mesh as linear cells and facets, and as cells of degree 2 with their places (D, n)."""

    cell_nodes: np.ndarray
    facets: Mapping[str, Groups]
    raised: Raised
    places: np.ndarray
    regions: Mapping[str, np.ndarray]

    def facets_of_degree_2(self) -> dict[str, Groups]:
        """Return the facets with their nodes of degree 2, by boundary."""
        found, left = {}, list(self.raised.facets)
        for name, groups in self.facets.items():
            found[name], left = tuple(left[: len(groups)]), left[len(groups) :]
        return found


class Refined(Sequence[GivenMesh]):
    """The levels of a mesh, made when asked for; the first is the mesh itself with its nodes on surfaces.

    All have cells of a degree, that of the mesh where none is given.
    """

    def __init__(self, coarse: GivenMesh, surfaces: Surfaces, levels: int, degree: int | None = None):
        self.surfaces, self.levels = surfaces, levels
        self.shape, self.degree = coarse.shape, degree or coarse.degree
        state, number = _first(coarse)
        self.vertices = {name: int(number[node]) for name, node in coarse.vertices.items()}
        self._states = [_on_surfaces(self.shape, state, surfaces)]

    def __len__(self) -> int:
        return self.levels

    @property
    def node_counts(self) -> tuple[int, ...]:
        """Return the number of nodes of every level without making it."""
        first = self._states[0]
        counts, found = tally(self.shape, first.cell_nodes, first.raised), list[int]()
        for _ in range(self.levels + self.degree - 1):
            found.append(counts.vertices)
            counts = counts.refined()
        return tuple(found[self.degree - 1 :])

    def __getitem__(self, number: int) -> GivenMesh:  # type: ignore[override]
        state, high = self._state(range(self.levels)[number]), self.degree == 2
        return GivenMesh(
            shape=self.shape,
            degree=self.degree,
            nodes=state.places if high else state.places[:, : state.raised.vertices],
            cell_nodes=state.raised.cell_nodes if high else state.cell_nodes,
            facets=state.facets_of_degree_2() if high else state.facets,
            vertices=self.vertices,
            regions=state.regions,
        )

    def _state(self, number: int) -> State:
        while len(self._states) <= number:
            finer = _finer(self.shape, self._states[-1])
            self._states.append(_on_surfaces(self.shape, finer, self.surfaces))
        return self._states[number]


def _first(coarse: GivenMesh) -> tuple[State, np.ndarray]:
    """Return a mesh as it is, its vertices first, and the new number of each of its nodes."""
    kind, size = element(coarse.shape, coarse.degree), coarse.nodes.shape[1]
    corners = coarse.cell_nodes[: kind.corners]
    used = np.unique(corners)
    number = np.full(size, -1)
    number[used] = np.arange(len(used))
    facets = {
        name: tuple(number[group[: facet_corners(coarse.dimension, len(group))]] for group in groups)
        for name, groups in coarse.facets.items()
    }
    made = raised(coarse.shape, number[corners], _flat(facets), len(used))
    places = np.empty((coarse.dimension, made.nodes))
    if coarse.degree == 2:
        number[coarse.cell_nodes] = made.cell_nodes
        places[:, number] = coarse.nodes
    else:
        at = coarse.nodes[:, corners]
        for row, own in zip(made.cell_nodes, owners(coarse.shape), strict=True):
            places[:, row] = at[:, list(own)].mean(axis=1)
    return State(number[corners], facets, made, places, coarse.regions), number


def _finer(shape: Shape, last: State) -> State:
    """Return the next finer mesh, its nodes on the curved cells of the last one."""
    cells, kinds = split(shape, last.raised.cell_nodes, last.places)
    many = len(kinds) // last.cell_nodes.shape[1]
    facets = {
        name: tuple(
            split(FACETS[len(low)], high, last.places)[0]
            for low, high in zip(last.facets[name], groups, strict=True)
        )
        for name, groups in last.facets_of_degree_2().items()
    }
    made = raised(shape, cells, _flat(facets), last.raised.nodes)
    places = np.empty((len(last.places), made.nodes))
    places[:, : last.raised.nodes] = last.places
    inner = np.array([node for node, own in enumerate(owners(shape)) if len(own) > 1])
    linear = element(shape, 1).shapes(element(shape, 2).nodes[inner].T)
    for kind, vertices in enumerate(pieces(shape)):
        chosen = np.flatnonzero(kinds == kind)
        weights = element(shape, 2).shapes(vertices @ linear)
        at = last.places[:, last.raised.cell_nodes[:, chosen // many]]
        places[:, made.cell_nodes[np.ix_(inner, chosen)]] = np.einsum("dnm,nj->djm", at, weights)
    regions = {name: (many * own[:, None] + np.arange(many)).ravel() for name, own in last.regions.items()}
    return State(cells, facets, made, places, regions)


def _flat(facets: Mapping[str, Groups]) -> Groups:
    return tuple(group for groups in facets.values() for group in groups)


def _on_surfaces(shape: Shape, state: State, surfaces: Surfaces) -> State:
    """Return the mesh with the nodes of known boundaries on them, and what follows these moved."""
    high = state.facets_of_degree_2()
    on = [
        (surface, np.unique(np.concatenate([group.ravel() for group in high[name]])))
        for name, surface in surfaces.items()
    ]
    places, count = state.places.copy(), state.raised.vertices
    for size, more in zip((2, 4, 8), state.raised.count, strict=True):
        count += more
        for node, own in enumerate(owners(shape)):
            if len(own) == size > 2:
                _follow(shape, state, places, node)
        _put(places, [(surface, nodes[nodes < count]) for surface, nodes in on])
    return replace(state, places=_eased(shape, state, places))


def _follow(shape: Shape, state: State, places: np.ndarray, node: int) -> None:
    """Move a node inside a face or a cell as the transfinite map of its edges and faces moves."""
    around, cell_nodes = set(owners(shape)[node]), state.raised.cell_nodes
    total = np.zeros((len(places), cell_nodes.shape[1]))
    for other, own in enumerate(owners(shape)):
        if set(own) < around:
            step = int(np.log2(len(around) // len(own)))
            factor = -((-0.5) ** step)
            total += factor * (places - state.places)[:, cell_nodes[other]]
    places[:, cell_nodes[node]] = state.places[:, cell_nodes[node]] + total


def _put(places: np.ndarray, on: list[tuple[Plane | Round, np.ndarray]]) -> None:
    """Move nodes onto their surfaces, those of several in turns until they lie on all."""
    near = ONTO * float(np.abs(places).max())
    for _ in range(TURNS):
        off = 0.0
        for surface, nodes in on:
            there = surface.onto(places[:, nodes])
            off = max(off, float(np.abs(there - places[:, nodes]).max(initial=0.0)))
            places[:, nodes] = there
        if off <= near:
            return


def _eased(shape: Shape, state: State, places: np.ndarray) -> np.ndarray:
    """Return the places; where a cell is folded, inner nodes are moved by springs between them."""
    from scipy.sparse.linalg import spsolve

    cell_nodes, moves = state.raised.cell_nodes, places - state.places
    if not moves.any() or jacobian_range(places, element(shape, 2), cell_nodes)[0].min() > 0.0:
        return places
    fixed = np.zeros(places.shape[1], dtype=bool)
    for group in state.raised.facets:
        fixed[group] = True
    springs = _springs(cell_nodes, state.places)
    moves[:, ~fixed] = spsolve(springs[~fixed][:, ~fixed], -(springs[~fixed][:, fixed] @ moves[:, fixed].T)).T
    return np.asarray(state.places + moves)


def _springs(cell_nodes: np.ndarray, places: np.ndarray) -> sparse.csc_matrix:
    """Return the matrix of springs between the nodes of each cell, as stiff as they are short, squared."""
    first, second = np.triu_indices(len(cell_nodes), 1)
    a, b = cell_nodes[first].ravel(), cell_nodes[second].ravel()
    stiffness = 1.0 / ((places[:, a] - places[:, b]) ** 2).sum(axis=0)
    size = places.shape[1]
    links = sparse.csc_matrix(sparse.coo_matrix((stiffness, (a, b)), shape=(size, size)))
    links = links + links.T
    return sparse.csc_matrix(sparse.diags_array(np.asarray(links.sum(axis=1)).ravel()) - links)
