"""Meshes of whole parts: areas by hand, shared nodes, ladders of any ratio, regions, folded cells."""

from collections.abc import Callable
from itertools import product
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.errors import SolvingError
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Problem
from convergence.fem.solid_part import SolidPart

STEEL = Material(210000.0, 0.3)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)
# areas by hand from the models' defaults; circles and ellipses by πr² and πab
AREAS = {
    "patch_test": 240.0 * 120.0,
    "skew_panel": 480.0 * 0.5 * (440.0 + 160.0),
    "tapered_arm": 1200.0 * 0.5 * (240.0 + 120.0),
    "exact_cantilever": 480.0 * 120.0,
    "l_domain": 3.0 * 100.0**2,
    "l_bracket": 80.0 * 200.0 + 120.0 * 80.0 + (1.0 - np.pi / 4.0) * 20.0**2,
    "perforated_plate": 40.0**2 - 0.25 * np.pi * 10.0**2,
    "thick_cylinder": 0.25 * np.pi * (45.0**2 - 30.0**2),
    "elliptic_panel": 0.25 * np.pi * (325.0 * 275.0 - 200.0 * 100.0),
    "holed_strip": 180.0 * 30.0 - 0.25 * np.pi * 12.0**2,
    "lug": 0.5 * np.pi * 40.0**2 + 80.0 * 90.0 - np.pi * 16.0**2,
}
STRAIGHT = ("patch_test", "skew_panel", "tapered_arm", "exact_cantilever", "l_domain")


def problem_of(model: str) -> Problem:
    problem: Problem = rooms.find("models", model)(material=STEEL)
    return problem


def cut(part: Part, shape: str, degree: int, level: int = 0, ratio: float = 2.0, divisions: int = 2) -> Mesh:
    counts = finer(part.divisions(size=None, divisions=divisions), ratio, level)
    return mesh(part, counts, shape=shape, degree=degree)


@EVERY_CELL
@pytest.mark.parametrize("model", AREAS)
def test_area(model: str, shape: str, degree: int) -> None:
    """Straight parts exactly. Curved: an arc of angle a per cell loses a²/6 of its own share at most."""
    part = problem_of(model).part
    error = abs(cut(part, shape, degree, level=1).measure / AREAS[model] - 1.0)
    arc = np.radians(22.5)  # no model has fewer than four cells on 90 degrees here
    worst = {1: arc**2 / 6.0, 2: arc**4 / 60.0}[degree]
    assert error <= (1e-12 if model in STRAIGHT else worst)


def on_every_cell() -> list[tuple[str, Shape, int]]:
    """Return every model with the cells of its dimension.

    A rod has no blocks, scikit-fem no wedges of degree 2.
    """
    shapes: dict[int, tuple[Shape, ...]] = {
        1: (),
        2: ("triangle", "quadrilateral"),
        3: ("tetrahedron", "hexahedron", "wedge"),
    }
    return [
        (model, shape, degree)
        for model in rooms.names("models")
        for shape in shapes[problem_of(model).part.dimension]
        for degree in (1, 2)
        if (shape, degree) != ("wedge", 2)
    ]


@pytest.mark.parametrize(("model", "shape", "degree"), on_every_cell())
def test_blocks_share_their_nodes(
    model: str, shape: str, degree: int, as_skfem: Callable[[Mesh], Any]
) -> None:
    """No two nodes at one place, every node used, and the free facets are the named boundaries' alone."""
    part = problem_of(model).part
    level = cut(part, shape, degree)
    tree = np.unique(np.round(level.nodes / (1e-7 * part.size)), axis=1)
    assert tree.shape[1] == level.nodes.shape[1]
    native = as_skfem(level)
    assert sorted(native.numbers) == list(range(level.nodes.shape[1]))
    assert len(np.unique(native.mesh.dofs.element_dofs)) == level.nodes.shape[1]
    free = set(np.flatnonzero(native.mesh.f2t[1] < 0))
    named = np.concatenate([facets for name in level.facets for facets in native.facets(name)])
    assert len(named) == len(set(named)), "no facet has two names"
    assert set(named) <= free
    if isinstance(part, SolidPart):
        assert set(named) == free
        return
    edges = {frozenset(edge) for edge in part.outline}
    if edges == {frozenset(edge) for names in part.boundaries.values() for edge in names}:
        assert set(named) == free


@EVERY_CELL
def test_lengths_of_boundaries(shape: str, degree: int, as_skfem: Callable[[Mesh], Any]) -> None:
    """A boundary's facets are those of its edges: their lengths add up to the edge's, by hand."""
    from skfem import FacetBasis

    level = cut(problem_of("l_bracket").part, shape, degree, divisions=4)
    native = as_skfem(level)
    lengths = {
        name: float(FacetBasis(native.mesh, native.mesh.elem(), facets=facets, intorder=6).dx.sum())
        for name in level.facets
        for facets in native.facets(name)
    }
    straight = {"top": 80.0, "end": 80.0, "left": 200.0, "bottom": 200.0, "inner": 200.0}
    assert {name: lengths[name] for name in straight} == pytest.approx(straight, rel=1e-12)
    # chords of 90 / 16 degrees at most: a²/24 of the arc
    assert lengths["fillet"] == pytest.approx(0.5 * np.pi * 20.0, rel=np.radians(90.0 / 16.0) ** 2 / 24.0)


@EVERY_CELL
def test_a_ladder_of_ratio_three_halves(shape: str, degree: int) -> None:
    """8, 12, 18 cells a side: h falls by 1.5 exactly, and is the root of area over cells."""
    part = problem_of("skew_panel").part
    ladder = [cut(part, shape, degree, n, 1.5, divisions=8) for n in range(3)]
    h = np.array([level.h for level in ladder])
    assert h[:-1] / h[1:] == pytest.approx(1.5, rel=1e-12)
    per_square = 2 if shape == "triangle" else 1
    assert [level.cells for level in ladder] == [per_square * side**2 for side in (8, 12, 18)]
    assert h[0] == pytest.approx(np.sqrt(AREAS["skew_panel"] / ladder[0].cells), rel=1e-12)


@pytest.mark.parametrize("ratio", [1.3, 1.5, 2.0])
@pytest.mark.parametrize("model", ["l_bracket", "lug", "holed_strip"])
def test_h_is_measured_where_a_ratio_must_be_rounded(model: str, ratio: float) -> None:
    """Every count is rounded by half a cell at most, so cells and h miss the ratio by that share at most."""
    part = problem_of(model).part
    coarsest = part.divisions(size=None, divisions=4)
    for step in (1, 2):
        counts = finer(coarsest, ratio, step)
        wanted = {number: count * ratio**step for number, count in coarsest.items()}
        assert all(abs(counts[number] - wanted[number]) <= 0.5 for number in counts)
        first, level = (mesh(part, c, shape="quadrilateral", degree=2) for c in (coarsest, counts))
        share = max(0.5 / counts[number] for number in counts)
        assert abs(first.h / level.h / ratio**step - 1.0) <= 1.1 * share


@EVERY_CELL
def test_regions_share_the_cells_out(shape: str, degree: int) -> None:
    whole = problem_of("l_domain").part
    parts = {"one": (0,), "rest": tuple(range(1, len(whole.blocks)))}
    split = Part(whole.points, whole.blocks, whole.curves, whole.boundaries, parts, whole.weights)
    level = cut(split, shape, degree)
    assert sorted(np.concatenate(list(level.regions.values()))) == list(range(level.cells))
    assert level.cell_measures[level.regions["one"]].sum() == pytest.approx(
        AREAS["l_domain"] / len(whole.blocks)
    )
    plain = cut(whole, shape, degree)
    assert list(plain.regions) == ["body"] and len(plain.regions["body"]) == plain.cells


def test_quadratic_meshes_bend_only_where_the_part_does(as_skfem: Callable[[Mesh], Any]) -> None:
    """On a straight part every node between vertices is the middle of its facet or cell."""
    for shape in ("triangle", "quadrilateral"):
        level = cut(problem_of("skew_panel").part, shape, 2)
        native = as_skfem(level)
        middles = native.mesh.p[:, native.mesh.facets].mean(axis=1)
        between = native.numbers[native.mesh.dofs.facet_dofs[0]]
        assert level.nodes[:, between] == pytest.approx(middles, abs=1e-9)


@EVERY_CELL
def test_a_clockwise_block_is_refused(shape: str, degree: int) -> None:
    corners = {"a": (0.0, 0.0), "b": (1.0, 0.0), "c": (1.0, 1.0), "d": (0.0, 1.0)}
    part = Part(points=corners, blocks=(("a", "d", "c", "b"),))
    with pytest.raises(SolvingError) as caught:
        mesh(part, part.divisions(size=None, divisions=1), shape=shape, degree=degree)
    told = str(caught.value)
    assert told.startswith("mesh: cell 0 near (")
    assert told.endswith("is inverted; more divisions or other proportions of the part")


def test_a_quadratic_cell_folded_by_its_curved_edge_is_refused() -> None:
    """Vertices alone look sound; the edge between them bulges through the opposite one."""
    corners = {"a": (0.0, 0.0), "b": (1.0, 0.0), "c": (1.0, 0.2), "d": (0.0, 0.2)}

    def bulge(s: np.ndarray) -> np.ndarray:
        return np.array([s, 1.6 * s * (1.0 - s)])

    part = Part(points=corners, blocks=(("a", "b", "c", "d"),), curves={("a", "b"): bulge})
    counts = dict.fromkeys(part.families.values(), 1)
    assert mesh(part, counts, shape="quadrilateral", degree=1).cells == 1
    for shape in ("triangle", "quadrilateral"):
        with pytest.raises(SolvingError, match=r"is inverted; more divisions or other proportions"):
            mesh(part, counts, shape=shape, degree=2)
