"""A level's mesh of a part: nodes, the nodes of each cell, and what boundaries, points and regions own.

Every node, also those inside, lies where the map of its block places it, so curved boundaries are met on
every level and cells of degree 2 are isoparametric.
"""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Literal

import numpy as np

from convergence.errors import SolvingError
from convergence.fem.calculus import derivatives, determinant
from convergence.fem.element import Element, Shape, element
from convergence.fem.given_part import GivenPart
from convergence.fem.grid import Grids, chain_facets, cut
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_mesh import solid_arrays
from convergence.fem.solid_part import SolidPart

CHUNK = 100_000
Formulation = Literal["displacement", "mean dilatation"]


@dataclass(frozen=True, eq=False)
class Mesh:
    """A part cut into cells of one shape and degree.

    nodes (D, n) places; cell_nodes (k, m) node numbers of each cell, vertices first; facets of a boundary
    in groups of one shape, each (k', f), so turned that their normal points outward; vertices the node of
    each named point; regions the cells of each region; counts the cells along each family of the part.
    """

    part: AnyPart
    counts: Mapping[int, int]
    shape: Shape
    degree: int
    nodes: np.ndarray
    cell_nodes: np.ndarray
    facets: Mapping[str, tuple[np.ndarray, ...]]
    vertices: Mapping[str, int]
    regions: Mapping[str, np.ndarray]
    formulation: Formulation = "displacement"

    @property
    def cells(self) -> int:
        return int(self.cell_nodes.shape[1])

    @property
    def dimension(self) -> int:
        return int(self.nodes.shape[0])

    @property
    def element(self) -> Element:
        return element(self.shape, self.degree)

    @cached_property
    def cell_measures(self) -> np.ndarray:
        """Return the area or volume of each cell, exact for the curved cells themselves."""
        local, weights = self.element.rule(max(1, self.dimension * self.degree))
        return np.concatenate([weights @ part.T for part in self._jacobians(local)])

    @property
    def measure(self) -> float:
        """Return the area or volume of all cells."""
        return float(self.cell_measures.sum())

    @cached_property
    def h(self) -> float:
        """Return the representative cell size (measure / cells)^(1/D)."""
        return float((self.measure / self.cells) ** (1.0 / self.dimension))

    def _jacobians(self, local: np.ndarray) -> list[np.ndarray]:
        """Return the signed Jacobians (m, q) at local places, in chunks of cells."""
        slopes = self.element.gradients(local)
        found = []
        for start in range(0, self.cells, CHUNK):
            corners = self.nodes[:, self.cell_nodes[:, start : start + CHUNK]]
            found.append(determinant(derivatives(corners, slopes)))
        return found

    def require_positive(self) -> None:
        """Check the signed Jacobian at nodes and quadrature points; SolvingError names the worst cell.

        A quadratic cell can be folded between its nodes, which its nodes alone do not show.
        """
        places = np.hstack([self.element.nodes.T, self.element.rule(2 * self.degree + 1)[0]])
        jacobian = np.concatenate(self._jacobians(places))
        if jacobian.min() <= 0.0:
            cell = int(np.unravel_index(jacobian.argmin(), jacobian.shape)[0])
            corners = self.cell_nodes[: self.element.corners, cell]
            place = ", ".join(f"{x:g}" for x in self.nodes[:, corners].mean(axis=1))
            raise SolvingError(
                f"mesh: cell {cell} near ({place}) is inverted; "
                "more divisions or other proportions of the part"
            )


def mesh(
    part: AnyPart,
    counts: Mapping[int, int],
    *,
    shape: Shape,
    degree: int,
    formulation: Formulation = "displacement",
) -> Mesh:
    """Return the mesh of a part with `counts` cells on each family of edges.

    Of a given part {0: k} is its mesh number k from the coarsest, whose own shape and degree it must be.
    Raises SolvingError where a cell is inverted.
    """
    if isinstance(part, SolidPart):
        arrays = solid_arrays(part, counts, shape, degree)
        made = Mesh(part, dict(counts), shape, degree, *arrays)
    elif isinstance(part, RodPart):
        made = _rod(part, counts, shape, degree)
    elif isinstance(part, GivenPart):
        made = _given(part, counts, shape, degree)
    else:
        made = _plane(part, counts, shape, degree)
    made.require_positive()
    return replace(made, formulation=formulation)


def _plane(part: Part, counts: Mapping[int, int], shape: Shape, degree: int) -> Mesh:
    kind = element(shape, degree)
    grids = Grids(part, counts, degree)
    cells = [cut(ids, kind) for ids in grids.blocks]
    owner = np.repeat(np.arange(len(cells)), [block.shape[1] for block in cells])
    regions = part.regions or {"body": tuple(range(len(part.blocks)))}
    facets = {}
    for name, edges in part.boundaries.items():
        outward = [edge if edge in part.outline else edge[::-1] for edge in edges]
        chains = [chain_facets(grids.along(*edge), degree) for edge in outward]
        facets[name] = (np.concatenate(chains, axis=1),)
    return Mesh(
        part=part,
        counts=dict(counts),
        shape=shape,
        degree=degree,
        nodes=grids.places(straight_diagonals=shape == "triangle"),
        cell_nodes=np.concatenate(cells, axis=1),
        facets=facets,
        vertices=grids.points,
        regions={name: np.flatnonzero(np.isin(owner, members)) for name, members in regions.items()},
    )


def _rod(part: RodPart, counts: Mapping[int, int], shape: Shape, degree: int) -> Mesh:
    steps = [degree * counts[piece] for piece in range(len(part.points) - 1)]
    inner = [
        np.linspace(a, b, n + 1)[1:] for a, b, n in zip(part.stations, part.stations[1:], steps, strict=False)
    ]
    nodes = np.concatenate([part.stations[:1], *inner])
    starts = np.concatenate([[0], np.cumsum(steps)])
    owner = np.repeat(np.arange(len(steps)), np.array(steps) // degree)
    regions = part.regions or {"body": tuple(range(len(steps)))}
    return Mesh(
        part=part,
        counts=dict(counts),
        shape=shape,
        degree=degree,
        nodes=nodes[None, :],
        cell_nodes=chain_facets(np.arange(len(nodes)), degree),
        facets={name: (np.array([[at]]),) for name, at in zip(part.ends, (0, len(nodes) - 1), strict=True)},
        vertices={name: int(node) for name, node in zip(part.points, starts, strict=True)},
        regions={name: np.flatnonzero(np.isin(owner, members)) for name, members in regions.items()},
    )


def _given(part: GivenPart, counts: Mapping[int, int], shape: Shape, degree: int) -> Mesh:
    found = part.meshes[counts[0]]
    if (found.shape, found.degree) != (shape, degree):
        raise ValueError(f"the given cells are {found.shape}s of degree {found.degree}")
    arrays = found.nodes, found.cell_nodes, found.facets, found.vertices, found.regions
    return Mesh(part, dict(counts), shape, degree, *arrays)


def count_nodes(part: AnyPart, counts: Mapping[int, int], degree: int) -> int:
    """Return the number of nodes of a mesh without making it."""
    if isinstance(part, RodPart):
        return 1 + degree * sum(counts.values())
    if isinstance(part, GivenPart):
        return part.count_nodes(counts[0])
    plan = part.plan if isinstance(part, SolidPart) else part
    fine = {family: degree * count for family, count in counts.items()}
    families = plan.families
    edges = {frozenset(edge): fine[number] for edge, number in families.items()}
    inner = [(fine[families[a, b]] - 1) * (fine[families[b, c]] - 1) for a, b, c, _ in plan.blocks]
    flat = (
        len({name for block in plan.blocks for name in block})
        + sum(n - 1 for n in edges.values())
        + sum(inner)
    )
    if isinstance(part, SolidPart):
        return flat * (1 + sum(fine[family] for family in part.layer_families))
    return flat
