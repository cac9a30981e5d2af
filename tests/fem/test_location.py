"""Where a place lies: nodes, edges, inside cells, on curved edges, outside, in slender cells."""

from collections.abc import Callable
from itertools import product
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.errors import Unsuitable
from convergence.fem.location import line_points, locate, locate_many
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.solid_part import SolidPart, Sweep

AsSkfem = Callable[[Mesh], Any]
Mapped = Callable[[Mesh, np.ndarray, np.ndarray], np.ndarray]
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)

# scikit-fem has no wedges of degree 2
EVERY_SOLID = pytest.mark.parametrize(
    ("shape", "degree"), [*product(("tetrahedron", "hexahedron"), (1, 2)), ("wedge", 1)]
)


def cut(model: str, shape: str, degree: int, divisions: int = 2) -> Mesh:
    part = rooms.find("models", model)(material=Material(210000.0, 0.3)).part
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


@pytest.fixture
def mapped(as_skfem: AsSkfem) -> Mapped:
    """Scikit-fem's map of local places."""

    def places(level: Mesh, cells: np.ndarray, local: np.ndarray) -> np.ndarray:
        return np.asarray(as_skfem(level).map(local, cells)[:, :, 0])

    return places


@EVERY_CELL
@pytest.mark.parametrize("model", ["patch_test", "thick_cylinder", "lug", "l_bracket"])
def test_places_inside_are_found_again(model: str, shape: str, degree: int, mapped: Mapped) -> None:
    """Random local places of every cell: the cell is found, and its map leads back to the place."""
    level = cut(model, shape, degree)
    random = np.random.default_rng(5)
    local = random.uniform(0.05, 0.45, (2, level.cells, 1))
    cells = np.arange(level.cells)
    places = mapped(level, cells, local)
    found, back = locate_many(level, places)
    assert (found == cells).all()
    assert abs(back - local).max() < 1e-9
    assert abs(mapped(level, found, back) - places).max() < 1e-9 * level.part.size


def twisted(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    x, y, s = np.broadcast_arrays(x, y, s)
    c, t = np.cos(0.01 * s), np.sin(0.01 * s)
    return np.array([x * c - y * t, x * t + y * c, s])


def untwisted(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
    c, t = np.cos(0.01 * z), np.sin(0.01 * z)
    return np.array([x * c + y * t, y * c - x * t, z])


def bar(shape: str, degree: int) -> Mesh:
    """A quarter of a ring as a twisted bar of two layers."""
    plan = rooms.find("models", "thick_cylinder")(material=Material(210000.0, 0.3)).part
    part = SolidPart(plan, (("near", 0.0), ("middle", 20.0), ("far", 30.0)), Sweep(twisted, untwisted))
    return mesh(part, part.divisions(size=None, divisions=2), shape=shape, degree=degree)


@EVERY_SOLID
def test_places_inside_a_solid_are_found_again(shape: str, degree: int, mapped: Mapped) -> None:
    level = bar(shape, degree)
    random = np.random.default_rng(5)
    local = random.uniform(0.05, 0.3, (3, level.cells, 1))
    cells = np.arange(level.cells)
    places = mapped(level, cells, local)
    found, back = locate_many(level, places)
    assert (found == cells).all()
    assert abs(back - local).max() < 1e-9


@EVERY_SOLID
def test_a_node_of_a_solid_belongs_to_every_cell_around_it(shape: str, degree: int) -> None:
    level = bar(shape, degree)
    for node in range(0, level.nodes.shape[1], 7):
        x, y, z = (float(value) for value in level.nodes[:, node])
        cells, local = locate(level, (x, y, z))
        assert sorted(cells) == sorted(np.flatnonzero((level.cell_nodes == node).any(axis=0)))
        corners = level.nodes[:, level.cell_nodes[:, cells]]
        again = np.einsum("dnm,nmq->dmq", corners, level.element.shapes(local))[:, :, 0]
        assert abs(again - np.array([[x], [y], [z]])).max() < 1e-12 * level.part.size


@pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron", "wedge"])
def test_a_place_outside_a_solid_is_refused(shape: str) -> None:
    level = bar(shape, 1)
    for place in ((20.0, 20.0, -1.0), (20.0, 20.0, 31.0), (5.0, 5.0, 10.0), (60.0, 60.0, 10.0)):
        with pytest.raises(Unsuitable) as caught:
            locate(level, place)
        assert str(caught.value) == f"at {place!r}: a place on the part"


@EVERY_CELL
def test_a_node_belongs_to_every_cell_around_it(shape: str, degree: int, mapped: Mapped) -> None:
    level = cut("thick_cylinder", shape, degree)
    dofs = level.cell_nodes
    for node in range(level.nodes.shape[1]):
        place = (float(level.nodes[0, node]), float(level.nodes[1, node]))
        cells, local = locate(level, place)
        assert sorted(cells) == sorted(np.flatnonzero((dofs == node).any(axis=0)))
        assert abs(mapped(level, cells, local) - np.array(place)[:, None]).max() < 1e-12 * level.part.size


def test_a_cell_whose_map_folds_at_a_far_place_is_passed_over() -> None:
    """Newton meets a singular Jacobian in one of the patch's five cells, which does not hold the place."""
    level = cut("patch_test", "quadrilateral", 1, divisions=1)
    for x in np.linspace(0.0, 240.0, 25):
        for y in np.linspace(0.0, 120.0, 13):
            cells, local = locate(level, (float(x), float(y)))
            corners = level.nodes[:, level.cell_nodes[:, cells]]
            again = np.einsum("dnm,nmq->dmq", corners, level.element.shapes(local))[:, :, 0]
            assert abs(again - np.array([[x], [y]])).max() < 1e-9 * level.part.size


@EVERY_CELL
def test_a_place_on_an_edge_belongs_to_both_cells(
    shape: str, degree: int, as_skfem: AsSkfem, mapped: Mapped
) -> None:
    level = cut("skew_panel", shape, degree)
    native = as_skfem(level).mesh
    for facet, pair in enumerate(native.f2t.T):
        ends = native.p[:, native.facets[:, facet]]
        place = 0.7 * ends[:, 0] + 0.3 * ends[:, 1]
        cells, local = locate(level, (float(place[0]), float(place[1])))
        assert sorted(cells) == sorted(int(cell) for cell in pair if cell >= 0)
        assert abs(mapped(level, cells, local) - place[:, None]).max() < 1e-9 * level.part.size


@EVERY_CELL
def test_a_place_on_the_curved_boundary_is_on_the_part(
    shape: str, degree: int, as_skfem: AsSkfem, mapped: Mapped
) -> None:
    """Between nodes of the convex outer edge: outside the chord by the sagitta, still of a cell there."""
    level = cut("thick_cylinder", shape, degree)
    native = as_skfem(level)
    (outer,) = native.facets("outer")
    touching = np.unique(native.mesh.f2t[0, outer])
    for angle in np.radians(np.linspace(1.0, 89.0, 23)):
        (cell, *_), local = locate(level, (float(45.0 * np.cos(angle)), float(45.0 * np.sin(angle))))
        assert cell in touching
        assert abs(mapped(level, np.array([cell]), local[:, :1])).max() <= 45.0 * (1.0 + 1e-6)


@EVERY_CELL
def test_a_place_outside_is_refused_however_coarse_the_cells(shape: str, degree: int) -> None:
    level = cut("skew_panel", shape, degree, divisions=1)
    for place in ((-1.0, 100.0), (481.0, 500.0), (240.0, 218.0), (1e6, 0.0)):
        with pytest.raises(Unsuitable) as caught:
            locate(level, place)
        assert str(caught.value) == f"at {place!r}: a place on the part"
    with pytest.raises(Unsuitable, match=r"at \(-1.0, 100.0\): a place on the part"):
        locate_many(level, np.array([[100.0, -1.0], [200.0, 100.0]]))


def test_the_hole_is_outside() -> None:
    level = cut("lug", "quadrilateral", 2)
    for place in ((0.0, 0.0), (15.9, 0.0), (0.0, 41.0), (45.0, -20.0), (39.0, 39.0)):
        with pytest.raises(Unsuitable, match="a place on the part"):
            locate(level, place)
    assert (level.part.contains(np.array([[16.1, 0.0, 39.9], [0.0, 39.9, -80.0]]))).all()


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_a_long_cell_beside_many_short_ones(shape: str, mapped: Mapped) -> None:
    """The nearest centres are those of the short cells; the place is in the long one."""
    part = Part(
        points={"a": (0, 0), "b": (100, 0), "c": (100, 40), "d": (0, 40), "e": (101, 0), "f": (101, 40)},
        blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c")),
    )
    counts = {part.families["a", "b"]: 1, part.families["b", "e"]: 20, part.families["b", "c"]: 2}
    level = mesh(part, counts, shape=shape, degree=1)
    for place in ((99.0, 15.0), (98.0, 21.0), (1.0, 3.0), (100.31, 39.0)):
        (cell, *_), local = locate(level, place)
        assert local.min() >= -1e-9 and local.max() <= 1.0 + 1e-9
        assert mapped(level, np.array([cell]), local[:, :1])[:, 0] == pytest.approx(place)


def test_line_points_integrate() -> None:
    level = cut("skew_panel", "triangle", 1)
    places, weights = line_points(level, (10.0, 20.0), (40.0, 60.0))
    assert weights.sum() == pytest.approx(50.0, rel=1e-12)
    along = np.hypot(places[0] - 10.0, places[1] - 20.0)
    # Gauss rules of four points are exact to degree 7
    assert weights @ along**7 == pytest.approx(50.0**8 / 8.0, rel=1e-12)
