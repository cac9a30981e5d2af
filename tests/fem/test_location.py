"""Where a place lies: nodes, edges, inside cells, on curved edges, outside, in slender cells."""

from itertools import product

import numpy as np
import pytest

from convergence import rooms
from convergence.errors import Unsuitable
from convergence.fem.location import line_points, locate, locate_many
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part

EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)


def cut(model: str, shape: str, degree: int, divisions: int = 2) -> Mesh:
    part = rooms.find("models", model)(material=Material(210000.0, 0.3)).part
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def mapped(level: Mesh, cells: np.ndarray, local: np.ndarray) -> np.ndarray:
    return np.asarray(level.skfem.mapping().F(local, tind=cells))[:, :, 0]


@EVERY_CELL
@pytest.mark.parametrize("model", ["patch_test", "thick_cylinder", "lug", "l_bracket"])
def test_places_inside_are_found_again(model: str, shape: str, degree: int) -> None:
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


@EVERY_CELL
def test_a_node_belongs_to_every_cell_around_it(shape: str, degree: int) -> None:
    level = cut("thick_cylinder", shape, degree)
    dofs = level.skfem.dofs.element_dofs
    for node in range(level.nodes.shape[1]):
        place = (float(level.nodes[0, node]), float(level.nodes[1, node]))
        cells, local = locate(level, place)
        assert sorted(cells) == sorted(np.flatnonzero((dofs == node).any(axis=0)))
        assert abs(mapped(level, cells, local) - np.array(place)[:, None]).max() < 1e-12 * level.part.size


@EVERY_CELL
def test_a_place_on_an_edge_belongs_to_both_cells(shape: str, degree: int) -> None:
    level = cut("skew_panel", shape, degree)
    native = level.skfem
    for facet, pair in enumerate(native.f2t.T):
        ends = native.p[:, native.facets[:, facet]]
        place = 0.7 * ends[:, 0] + 0.3 * ends[:, 1]
        cells, local = locate(level, (float(place[0]), float(place[1])))
        assert sorted(cells) == sorted(int(cell) for cell in pair if cell >= 0)
        assert abs(mapped(level, cells, local) - place[:, None]).max() < 1e-9 * level.part.size


@EVERY_CELL
def test_a_place_on_the_curved_boundary_is_on_the_part(shape: str, degree: int) -> None:
    """Between nodes of the convex outer edge: outside the chord by the sagitta, still of a cell there."""
    level = cut("thick_cylinder", shape, degree)
    touching = np.unique(level.skfem.f2t[0, level.facets["outer"]])
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
def test_a_long_cell_beside_many_short_ones(shape: str) -> None:
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
