"""Curves, blocks and meshes of a part: true geometry at every level, families, counts."""

import numpy as np
import pytest

from convergence.errors import SolvingError
from convergence.fem.held import boundary_nodes
from convergence.fem.mesh import Shape, mesh
from convergence.fem.part import Part, arc, ellipse, finer, graded

S = np.linspace(0.0, 1.0, 9)
BOTH_SHAPES = pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])


def ring() -> Part:
    """Quarter ring of radii 1 and 2 in two blocks."""
    corner, far = np.sqrt(0.5), 2 * np.sqrt(0.5)
    return Part(
        points={
            "a": (1.0, 0.0),
            "b": (2.0, 0.0),
            "c": (far, far),
            "d": (corner, corner),
            "e": (0.0, 2.0),
            "f": (0.0, 1.0),
        },
        blocks=(("a", "b", "c", "d"), ("d", "c", "e", "f")),
        curves={
            ("a", "d"): arc((0.0, 0.0), 1.0, 0.0, 45.0),
            ("f", "d"): arc((0.0, 0.0), 1.0, 90.0, 45.0),
            ("b", "c"): arc((0.0, 0.0), 2.0, 0.0, 45.0),
            ("c", "e"): arc((0.0, 0.0), 2.0, 45.0, 90.0),
        },
        boundaries={"inner": (("a", "d"), ("d", "f"))},
    )


def test_arc_and_ellipse_lie_on_their_curves() -> None:
    x, y = arc((3.0, -1.0), 2.0, 30.0, 300.0)(S)
    assert np.hypot(x - 3.0, y + 1.0) == pytest.approx(2.0, rel=1e-14)
    x, y = ellipse(3.0, 2.0, 0.0, 90.0)(S)
    assert (x / 3.0) ** 2 + (y / 2.0) ** 2 == pytest.approx(1.0, rel=1e-14)


@pytest.mark.parametrize("ratio", [0.2, 1.0, 7.0])
def test_graded_edge_grows_geometrically(ratio: float) -> None:
    """The cells of n equal parameters form a geometric series of total ratio^((n - 1)/n)."""
    points = graded((1.0, 2.0), (4.0, 6.0), ratio)(S)
    assert points[:, [0, -1]] == pytest.approx(np.array([[1.0, 4.0], [2.0, 6.0]]))
    lengths = np.hypot(*np.diff(points, axis=1))
    assert lengths.sum() == pytest.approx(5.0)
    assert lengths[1:] / lengths[:-1] == pytest.approx(ratio ** (1 / 8))


def test_edges_run_both_ways() -> None:
    part = ring()
    assert part.edge("d", "f", S) == pytest.approx(part.edge("f", "d", S)[:, ::-1])
    assert part.length(("b", "c")) == pytest.approx(np.pi / 2, rel=1e-4)


def test_families_tie_opposite_edges() -> None:
    families = ring().families
    assert families["a", "b"] == families["c", "d"] == families["f", "e"]
    assert families["a", "d"] == families["c", "b"] != families["d", "f"] == families["e", "c"]
    assert len(set(families.values())) == 3


def test_divisions_count_the_shortest_family_and_size_bounds_every_edge() -> None:
    part = ring()
    counts = part.divisions(size=None, divisions=3)
    assert counts[part.families["a", "b"]] == 3
    assert counts[part.families["a", "d"]] == round(3 * np.pi / 2)
    counts = part.divisions(size=0.3, divisions=None)
    for edge, family in part.families.items():
        assert part.length(edge) / counts[family] <= 0.3 * (1 + 1e-9)


def test_finer_rounds_and_keeps_ratio() -> None:
    assert finer({0: 2, 1: 3}, 2.0, 3) == {0: 16, 1: 24}
    assert finer({0: 2, 1: 3}, 1.5, 1) == {0: 3, 1: 4}


@BOTH_SHAPES
@pytest.mark.parametrize("degree", [1, 2])
def test_every_boundary_node_lies_on_the_true_curve(shape: Shape, degree: int) -> None:
    part = ring()
    for divisions in (1, 2, 5):
        level = mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)
        (facets,) = level.facets["inner"]
        numbers = boundary_nodes(level, "inner")
        assert len(numbers) == degree * facets.shape[1] + 1
        assert np.hypot(*level.nodes[:, numbers]) == pytest.approx(1.0, rel=1e-14)
        for name, place in part.points.items():
            assert level.nodes[:, level.vertices[name]] == pytest.approx(place)


@BOTH_SHAPES
def test_area_converges_with_the_order_of_the_geometry(shape: Shape) -> None:
    """Chords lose h², parabolas h⁴."""
    part, exact = ring(), 0.75 * np.pi
    for degree in (1, 2):
        error = []
        for divisions in (2, 4, 8):
            counts = finer(part.divisions(size=None, divisions=2), divisions / 2, 1)
            error.append(abs(mesh(part, counts, shape=shape, degree=degree).measure - exact))
        assert np.log2(error[-2] / error[-1]) == pytest.approx(2 * degree, abs=0.1)


def test_an_inverted_cell_is_refused() -> None:
    part = ring()
    folded = Part(points={**part.points, "d": (1.9, 1.9)}, blocks=part.blocks)
    with pytest.raises(SolvingError, match=r"^mesh: cell \d+ near .* is inverted; more divisions"):
        mesh(folded, folded.divisions(size=None, divisions=2), shape="triangle", degree=1)
