"""Meshes of swept parts: conforming across blocks, layers and steps; edges; cells that are refused."""

from itertools import product

import numpy as np
import pytest

from convergence.errors import SolvingError
from convergence.fem.facets import facet_bases
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part, arc
from convergence.fem.solid_mesh import edge_nodes, used_nodes
from convergence.fem.solid_part import EXTRUDED, REVOLVED, SolidPart, Sweep

EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("tetrahedron", "hexahedron", "wedge"), (1, 2)))
)
EVERY_SHAPE = pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron", "wedge"])


def eye() -> Part:
    """A square plate with a round hole, four blocks; their first corners point four different ways."""
    corner, r = 20.0, 10.0 * np.sqrt(0.5)
    ways = {"e": (1, -1), "n": (1, 1), "w": (-1, 1), "s": (-1, -1)}
    points = {f"{name}_hole": (r * x, r * y) for name, (x, y) in ways.items()}
    points |= {f"{name}_rim": (corner * x, corner * y) for name, (x, y) in ways.items()}
    starts = {"e": -45.0, "n": 45.0, "w": 135.0, "s": 225.0}
    names = list(ways)
    curves, blocks = {}, []
    for turn, (one, two) in enumerate(zip(names, names[1:] + names[:1], strict=True)):
        curves[f"{one}_hole", f"{two}_hole"] = arc((0.0, 0.0), 10.0, starts[one], starts[one] + 90.0)
        block = [f"{one}_hole", f"{one}_rim", f"{two}_rim", f"{two}_hole"]
        blocks.append(tuple(block[turn:] + block[:turn]))
    rim = tuple(((f"{a}_rim", f"{b}_rim")) for a, b in zip(names, names[1:] + names[:1], strict=True))
    return Part(points, tuple(blocks), curves, {"rim": rim, "hole": tuple(curves)})  # type: ignore[arg-type]


def solid(filled: tuple[tuple[int, ...], ...] = (), sweep: Sweep = EXTRUDED) -> SolidPart:
    return SolidPart(eye(), (("low", 0.0), ("middle", 6.0), ("high", 15.0)), sweep, filled)


PARTS = {
    "full": solid(),
    "boss": solid(((0, 1, 2, 3), (0, 2))),
    "overhang": solid(((1,), (0, 1, 2))),
}
COUNTS = {0: 2, 1: 3, 2: 2, 3: 4, 4: 2, -1: 1, -2: 2}


def cut(part: SolidPart, shape: Shape, degree: int) -> Mesh:
    counts = {family: COUNTS[number % 5] for number, family in enumerate(set(part.plan.families.values()))}
    return mesh(part, counts | {-1: COUNTS[-1], -2: COUNTS[-2]}, shape=shape, degree=degree)


def uses(level: Mesh) -> dict[frozenset[int], int]:
    """Return how many cells have each face, a face being the set of all its nodes."""
    nodes, found = level.element.nodes, dict[frozenset[int], int]()
    for face in level.element.faces:
        place = nodes[list(face)]
        normal = np.linalg.svd(place[1:3] - place[0])[2][-1]
        local = np.flatnonzero(np.abs((nodes - place[0]) @ normal) < 1e-9)
        for members in level.cell_nodes[local].T.tolist():
            key = frozenset(members)
            found[key] = found.get(key, 0) + 1
    return found


@EVERY_CELL
@pytest.mark.parametrize("name", PARTS)
def test_every_face_belongs_to_two_cells_or_to_one_boundary(name: str, shape: Shape, degree: int) -> None:
    """Faces are compared by all their nodes, those of degree 2 between the vertices too."""
    level = cut(PARTS[name], shape, degree)
    found = uses(level)
    assert set(found.values()) == {1, 2}
    outside = [frozenset(facet) for groups in level.facets.values() for group in groups for facet in group.T]
    assert len(outside) == len(set(outside))
    assert set(outside) == {face for face, count in found.items() if count == 1}
    assert sorted(np.unique(level.cell_nodes)) == list(range(level.nodes.shape[1]))


@EVERY_CELL
@pytest.mark.parametrize("name", PARTS)
def test_the_divergence_theorem_gives_the_volume(name: str, shape: Shape, degree: int) -> None:
    """Outward normals on closed surfaces: ∮ n dA = 0 and ∮ x·n dA = 3 V, of the curved cells themselves."""
    level = cut(PARTS[name], shape, degree)
    bases = [basis for boundary in level.facets for basis in facet_bases(level, boundary, 6)]
    total = sum((basis.normals * basis.dx).sum(axis=(1, 2)) for basis in bases)
    area = sum(basis.dx.sum() for basis in bases)
    assert np.abs(total).max() <= 1e-12 * area
    volume = sum((np.einsum("dfq,dfq->fq", b.places, b.normals) * b.dx).sum() for b in bases) / 3.0
    assert volume == pytest.approx(level.measure, rel=1e-12)


@EVERY_CELL
def test_node_numbers_do_not_depend_on_the_shape(shape: Shape, degree: int) -> None:
    part = PARTS["boss"]
    level, other = cut(part, shape, degree), cut(part, "hexahedron", degree)
    assert level.nodes.shape == other.nodes.shape
    assert level.vertices == other.vertices
    for boundary, groups in level.facets.items():
        theirs = np.unique(np.concatenate([group.ravel() for group in other.facets[boundary]]))
        assert list(np.unique(np.concatenate([group.ravel() for group in groups]))) == list(theirs)


@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("name", PARTS)
def test_used_nodes_are_those_of_the_cells(name: str, degree: int) -> None:
    """In the full sweep, plane by plane; the mesh numbers the used ones in that order."""
    part = PARTS[name]
    level = cut(part, "hexahedron", degree)
    used = used_nodes(part, level.counts, degree)
    assert len(used) == level.nodes.shape[1]
    whole = mesh(PARTS["full"], level.counts, shape="hexahedron", degree=degree)
    assert level.nodes == pytest.approx(whole.nodes[:, used], abs=1e-12)


@EVERY_CELL
@pytest.mark.parametrize("name", ["full", "boss"])
def test_edge_nodes(name: str, shape: Shape, degree: int) -> None:
    """Along an arc of the hole on the top of the boss, and up a corner of the rim through both layers."""
    part = PARTS[name]
    level = cut(part, shape, degree)
    arc_nodes = edge_nodes(part, level.counts, degree, ("e_hole_high", "n_hole_high"))
    x, y, z = level.nodes[:, arc_nodes]
    assert np.hypot(x, y) == pytest.approx(10.0) and z == pytest.approx(15.0)
    family = part.plan.families["e_hole", "n_hole"]
    assert len(arc_nodes) == degree * level.counts[family] + 1
    up = edge_nodes(part, level.counts, degree, ("n_rim_low", "n_rim_middle", "n_rim_high"))
    assert level.nodes[:2, up] == pytest.approx(20.0)
    assert list(np.diff(level.nodes[2, up]) > 0.0) == [True] * degree * 3
    assert level.nodes[2, up[[0, -1]]] == pytest.approx([0.0, 15.0])


@EVERY_CELL
def test_edge_nodes_of_an_edge_of_several_pieces(shape: Shape, degree: int) -> None:
    """Half the hole, against the direction of its arcs: all nodes of the rim of the hole with x >= y."""
    part = PARTS["full"]
    level = cut(part, shape, degree)
    path = edge_nodes(part, level.counts, degree, ("n_hole_high", "e_hole_high", "s_hole_high"))
    x, y, z = level.nodes
    there = np.isclose(np.hypot(x, y), 10.0) & np.isclose(z, 15.0) & (x - y > -1e-9)
    assert list(path) == list(np.flatnonzero(there))


def bent(by: float, at: float) -> Sweep:
    """A sweep whose places move along z by a wave in x and y that is local around one place."""

    def place(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
        hump = by * np.exp(-((x - at) ** 2 + (y - at) ** 2) / 9.0) * s * (15.0 - s)
        return np.array(np.broadcast_arrays(x + 0.0 * s, y + 0.0 * s, s + hump))

    return Sweep(place, EXTRUDED.plan)


@EVERY_CELL
def test_an_inverted_cell_is_refused_with_its_place(shape: Shape, degree: int) -> None:
    """A hump at (20, 20) lifts nodes above the plane over them: the cell named lies in that corner."""
    part = solid(sweep=bent(0.3, 20.0))
    with pytest.raises(SolvingError) as caught:
        cut(part, shape, degree)
    told = str(caught.value)
    assert told.startswith("mesh: cell ") and told.endswith("other proportions of the part")
    x, y, z = map(float, told.split("(")[1].split(")")[0].split(","))
    assert x > 5.0 and y > 5.0 and -1.0 < z < 30.0
    assert cut(solid(sweep=bent(0.001, 20.0)), shape, degree).cells > 0


@EVERY_SHAPE
def test_a_quadratic_cell_folded_between_its_vertices_is_refused(shape: Shape) -> None:
    """At the vertices, s = 0 and 15, the map moves nothing; the nodes between them go over the top."""
    corners = {"a": (0.0, 0.0), "b": (10.0, 0.0), "c": (10.0, 10.0), "d": (0.0, 10.0)}
    square = Part(corners, (("a", "b", "c", "d"),))

    def place(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
        return np.array(np.broadcast_arrays(x, y, s + 0.1 * s * (15.0 - s)))

    part = SolidPart(square, (("low", 0.0), ("high", 15.0)), Sweep(place, EXTRUDED.plan))
    counts = dict.fromkeys(part.divisions(size=None, divisions=1), 1)
    assert mesh(part, counts, shape=shape, degree=1).cells > 0
    with pytest.raises(SolvingError, match="is inverted"):
        mesh(part, counts, shape=shape, degree=2)


@EVERY_SHAPE
def test_a_mirrored_sweep_is_refused(shape: Shape) -> None:
    """Swept downward every cell is left-handed."""
    down = Sweep(lambda x, y, s: np.array(np.broadcast_arrays(x, y, -s)), EXTRUDED.plan)
    with pytest.raises(SolvingError, match="is inverted"):
        cut(solid(sweep=down), shape, 1)


@EVERY_CELL
def test_a_revolved_ring(shape: Shape, degree: int) -> None:
    """A quarter ring of a rectangle 10 x 5 at radius 20 to 30: volume pi / 4 (30² − 20²) 5."""
    corners = {"a": (20.0, 0.0), "b": (30.0, 0.0), "c": (30.0, 5.0), "d": (20.0, 5.0)}
    part = SolidPart(Part(corners, (("a", "b", "c", "d"),)), (("start", 0.0), ("end", 90.0)), REVOLVED)
    counts = dict.fromkeys(part.plan.families.values(), 2) | {-1: 6}
    level = mesh(part, counts, shape=shape, degree=degree)
    arc_of = np.radians(15.0)
    worst = {1: arc_of**2 / 6.0, 2: arc_of**4 / 60.0}[degree]
    assert abs(level.measure / (0.25 * np.pi * 500.0 * 5.0) - 1.0) <= worst
