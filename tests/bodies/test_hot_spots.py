"""Hot spots: local maxima apart from each other, with a reach that every mesh can follow."""

from itertools import pairwise

import numpy as np
import pytest

from convergence.bodies.hot_spots import hot_spots
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part

SQUARE = Part(
    points={"A": (0.0, 0.0), "B": (10.0, 0.0), "C": (10.0, 10.0), "D": (0.0, 10.0)},
    blocks=(("A", "B", "C", "D"),),
)
TOPS = {(2.0, 2.0): 100.0, (8.0, 7.0): 60.0, (2.0, 8.0): 40.0}


def square(count: int, degree: int = 1) -> Mesh:
    counts = {family: count for family in set(SQUARE.families.values())}
    return mesh(SQUARE, counts, shape="quadrilateral", degree=degree)


def hills(nodes: np.ndarray, tops: dict[tuple[float, float], float] = TOPS) -> np.ndarray:
    """Return a field with bell-shaped tops that do not touch each other."""
    total = np.zeros(nodes.shape[1])
    for (x, y), height in tops.items():
        total += height * np.exp(-((nodes[0] - x) ** 2) - (nodes[1] - y) ** 2)
    return total


@pytest.mark.parametrize("degree", [1, 2])
def test_the_tops_of_a_field_the_hottest_first(degree: int) -> None:
    fine = square(40, degree)
    coarse = [square(count, degree).nodes for count in (10, 20)]
    spots = hot_spots(fine, hills(fine.nodes)[fine.cell_nodes], coarse)
    assert [spot.place for spot in spots] == [pytest.approx(place) for place in TOPS]
    assert [spot.stress for spot in spots] == pytest.approx(list(TOPS.values()), rel=1e-6)
    assert all(fine.nodes[:, spot.node] == pytest.approx(spot.place) for spot in spots)


def test_every_mesh_has_nodes_within_the_reach() -> None:
    """And no two reaches overlap."""
    fine, coarse = square(40), [square(count).nodes for count in (5, 20)]
    spots = hot_spots(fine, hills(fine.nodes)[fine.cell_nodes], coarse)
    for spot in spots:
        for nodes in coarse:
            distance = np.linalg.norm(nodes - np.array(spot.place)[:, None], axis=0)
            assert (distance <= spot.reach).sum() >= 4
    for first, second in pairwise(spots):
        gap = np.linalg.norm(np.subtract(first.place, second.place))
        assert gap > first.reach + second.reach


def test_a_shoulder_of_a_higher_top_is_none() -> None:
    """Two tops closer than the coarse mesh can tell are one; a top below a quarter of the largest is none."""
    fine, coarse = square(40), [square(10).nodes]
    near = {(2.0, 2.0): 100.0, (3.25, 2.0): 70.0, (8.0, 7.0): 24.0}
    values = np.maximum.reduce([hills(fine.nodes, {at: height}) for at, height in near.items()])
    spots = hot_spots(fine, values[fine.cell_nodes], coarse)
    assert [spot.place for spot in spots] == [pytest.approx((2.0, 2.0))]


def test_nothing_where_there_is_no_stress() -> None:
    fine = square(4)
    assert hot_spots(fine, np.zeros(fine.cell_nodes.shape), [square(2).nodes]) == ()


def test_never_more_than_eight() -> None:
    fine = square(60)
    places = [(1.0 + 2.0 * i, 1.0 + 2.0 * j) for i in range(5) for j in range(5)]
    tops = {place: 100.0 - 0.1 * number for number, place in enumerate(places)}
    spots = hot_spots(fine, hills(fine.nodes, tops)[fine.cell_nodes], [square(20).nodes])
    assert len(spots) == 8
