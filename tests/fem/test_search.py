"""Places among cells: all shapes, curved and uneven cells, borders, places outside, cells of no volume."""

from itertools import product

import numpy as np
import pytest

from convergence.fem.element import Element, Shape, element
from convergence.fem.search import REACH, local_places, search

PLANE = list(product(("triangle", "quadrilateral"), (1, 2)))
SOLID = list(product(("tetrahedron", "hexahedron", "wedge"), (1, 2)))
EVERY = pytest.mark.parametrize(("shape", "degree"), PLANE + SOLID)

CUTS: dict[str, list[tuple[int, ...]]] = {
    "triangle": [(0, 1, 3), (0, 3, 2)],
    "quadrilateral": [(0, 1, 3, 2)],
    "tetrahedron": [(0, 1, 3, 7), (0, 3, 2, 7), (0, 2, 6, 7), (0, 6, 4, 7), (0, 4, 5, 7), (0, 5, 1, 7)],
    "hexahedron": [tuple(range(8))],
    "wedge": [(0, 1, 3, 4, 5, 7), (0, 3, 2, 4, 7, 6)],
}
Arrays = tuple[np.ndarray, np.ndarray, Element]


def bent(x: np.ndarray) -> np.ndarray:
    """A map of degree 2 of the unit square or cube, so that cells of degree 2 follow it exactly."""
    y = x.copy()
    y[0] += 0.15 * x[1] ** 2
    y[1] += 0.1 * x[0] * x[-1]
    return y


def block(shape: Shape, degree: int, count: int, turn: bool = True) -> Arrays:
    """A square or cube of `count` boxes a side, each cut into cells, bent by `bent`."""
    kind = element(shape, degree)
    dimension = kind.dimension
    steps = np.array(list(product(range(count), repeat=dimension)), dtype=float)
    corners = np.array(list(product((0, 1), repeat=dimension)), dtype=float)[:, ::-1]
    linear = element(shape, 1)
    placed = []
    for cut in CUTS[shape]:
        own = corners[list(cut)]
        if shape == "hexahedron":
            order = [int(np.abs(corners - at).sum(axis=1).argmin()) for at in linear.nodes]
            own = corners[order]
        if shape == "quadrilateral":
            own = linear.nodes
        inside = np.einsum("nd,nk->kd", own, linear.shapes(kind.nodes.T))
        placed.append((steps[:, None] + inside[None]) / count)
    at = np.concatenate(placed)
    flat = np.round(at.reshape(-1, dimension) * 4 * count).astype(int)
    _, first, number = np.unique(flat, axis=0, return_index=True, return_inverse=True)
    nodes = at.reshape(-1, dimension)[first].T
    return bent(nodes) if turn else nodes, number.reshape(len(at), -1).T, kind


def mapped(arrays: Arrays, cells: np.ndarray, local: np.ndarray) -> np.ndarray:
    nodes, cell_nodes, kind = arrays
    return np.asarray(np.einsum("dnm,nm->dm", nodes[:, cell_nodes[:, cells]], kind.shapes(local)))


@EVERY
def test_local_places_of_every_cell_are_found_again(shape: Shape, degree: int) -> None:
    """Newton's last step is below 1e-7 and its error of the order of its square: 1e-12 has room."""
    arrays = block(shape, degree, 3)
    nodes, cell_nodes, kind = arrays
    cells = np.repeat(np.arange(cell_nodes.shape[1]), 4)
    local = np.random.default_rng(3).uniform(0.05, 0.3, (kind.dimension, len(cells)))
    places = mapped(arrays, cells, local)
    found = search(nodes, cell_nodes, kind, places)
    assert (found.cells == cells).all() and (found.gap == 0.0).all()
    assert np.abs(found.local - local).max() < 1e-12
    again = local_places(nodes, cell_nodes, kind, cells, places)
    assert np.abs(again - local).max() < 1e-12


@EVERY
def test_nodes_lie_in_a_cell_that_has_them(shape: Shape, degree: int) -> None:
    nodes, cell_nodes, kind = block(shape, degree, 3)
    found = search(nodes, cell_nodes, kind, nodes)
    assert (found.gap == 0.0).all()
    assert (cell_nodes[:, found.cells] == np.arange(nodes.shape[1])).any(axis=0).all()


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge"])
def test_uneven_cells_hide_no_place(shape: Shape) -> None:
    """Steps of one side grow by 300 to 1: the nearest centres of most places are those of other cells."""
    nodes, cell_nodes, kind = block(shape, 1, 8, turn=False)
    nodes = nodes.copy()
    nodes[0] = np.expm1(6.0 * nodes[0]) / np.expm1(6.0)
    places = np.random.default_rng(8).uniform(0.0, 1.0, (kind.dimension, 3000))
    found = search(nodes, cell_nodes, kind, places)
    assert (found.gap == 0.0).all()
    back = mapped((nodes, cell_nodes, kind), found.cells, found.local)
    assert np.abs(back - places).max() < 1e-12


def test_a_place_outside_belongs_to_the_nearest_cell_up_to_the_reach() -> None:
    """Two squares of side 1 beside each other, of radius √½; the gap is the distance over that radius."""
    nodes = np.array([[0.0, 1.0, 2.0, 0.0, 1.0, 2.0], [0.0, 0.0, 0.0, 1.0, 1.0, 1.0]])
    cell_nodes = np.array([[0, 1], [1, 2], [4, 5], [3, 4]])
    away = 0.5 * REACH * np.sqrt(0.5)
    places = np.array([[0.3, 1.6, 2.0 + away, 0.3, 1.5], [1.0 + away, -away, 0.2, 1.5, 0.5]])
    found = search(nodes, cell_nodes, element("quadrilateral", 1), places)
    assert found.cells.tolist() == [0, 1, 1, -1, 1]
    assert found.gap[:3] == pytest.approx(0.5 * REACH, rel=1e-12)
    assert np.isinf(found.gap[3]) and np.isnan(found.local[:, 3]).all() and found.gap[4] == 0.0
    assert found.local[:, 0] == pytest.approx((0.3, 1.0 + away), rel=1e-12)
    far = search(nodes, cell_nodes, element("quadrilateral", 1), places, reach=1.0)
    assert far.cells.tolist() == [0, 1, 1, 0, 1]


def test_a_cell_without_volume_holds_nothing() -> None:
    nodes = np.array([[0.0, 1.0, 0.0, 2.0], [0.0, 0.0, 1.0, 0.0]])
    cell_nodes = np.array([[0, 0], [1, 1], [2, 3]])
    found = search(nodes, cell_nodes, element("triangle", 1), np.array([[0.2, 0.5], [0.2, 0.0]]))
    assert found.cells.tolist() == [0, 0]


def test_no_places_and_one_cell() -> None:
    nodes, cell_nodes, kind = block("hexahedron", 2, 1)
    assert len(search(nodes, cell_nodes, kind, np.empty((3, 0))).cells) == 0
    assert search(nodes, cell_nodes, kind, bent(np.full((3, 1), 0.5))).cells.tolist() == [0]


def test_the_answer_does_not_depend_on_the_order_of_the_places() -> None:
    nodes, cell_nodes, kind = block("tetrahedron", 2, 3)
    places = bent(np.random.default_rng(2).uniform(0.0, 1.0, (3, 500)))
    order = np.random.default_rng(4).permutation(500)
    found, again = (search(nodes, cell_nodes, kind, at) for at in (places, places[:, order]))
    assert (found.cells[order] == again.cells).all()
    assert (found.local[:, order] == again.local).all()
