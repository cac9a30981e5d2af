"""Quality of cells beside VTK's own measures of the same cells, and beside values by hand."""

from pathlib import Path

import numpy as np
import pytest

from convergence.bodies.file_cells import CellGroup
from convergence.bodies.file_mesh import read_file_mesh
from convergence.bodies.quality import quality
from convergence.fem.element import Shape, element

FILES = Path(__file__).parent / "files"
SHAPES: tuple[Shape, ...] = ("triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge")
ROUNDING = 1e-13


@pytest.mark.parametrize("shape", SHAPES)
def test_measures_are_those_of_vtk(shape: Shape) -> None:
    found = read_file_mesh(FILES / f"quality-{shape}.vtu")
    measured = quality(found.nodes, found.groups[0])
    theirs = {name: values[0][0] for name, values in found.cell_fields.items()}
    assert np.abs(measured.scaled_jacobian - theirs["scaled_jacobian"]).max() < ROUNDING
    assert np.abs(measured.skew - theirs["equiangle_skew"]).max() < ROUNDING
    if shape != "hexahedron":  # VTK's ratio of edges of hexahedra looks at some of the twelve only (measured)
        assert np.abs(measured.aspect / theirs["edge_ratio"] - 1.0).max() < ROUNDING


def test_edges_of_hexahedra() -> None:
    edges = ((0, 1), (1, 2), (2, 3), (3, 0), (4, 5), (5, 6), (6, 7), (7, 4), (0, 4), (1, 5), (2, 6), (3, 7))
    found = read_file_mesh(FILES / "quality-hexahedron.vtu")
    group = found.groups[0]
    for cell, aspect in enumerate(quality(found.nodes, group).aspect):
        mine = found.nodes[:, np.flatnonzero(found.node_numbers // 8 == cell)]
        lengths = [float(np.linalg.norm(mine[:, b] - mine[:, a])) for a, b in edges]
        assert aspect == pytest.approx(max(lengths) / min(lengths), rel=ROUNDING)


@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("shape", SHAPES)
def test_the_ideal_cell(shape: Shape, degree: int) -> None:
    """Equal sides and angles: a scaled Jacobian of 1, equal edges, no skew."""
    kind = element(shape, degree)
    lean = np.eye(kind.dimension)
    if shape in ("triangle", "tetrahedron", "wedge"):
        lean[:2, 1] = (0.5, np.sqrt(3.0) / 2.0)
    if shape == "tetrahedron":
        lean[:, 2] = (0.5, np.sqrt(3.0) / 6.0, np.sqrt(2.0 / 3.0))
    measured = quality(7.0 * lean @ kind.nodes.T, group_of(shape, degree))
    assert measured.scaled_jacobian == pytest.approx([1.0], abs=ROUNDING)
    assert measured.aspect == pytest.approx([1.0], abs=ROUNDING)
    assert np.abs(measured.skew).max() < ROUNDING


def test_a_middle_node_moved_to_a_quarter_folds_the_corner() -> None:
    """With a middle node at a quarter of its edge the tangent there is zero, beyond it points backward."""
    kind = element("triangle", 2)
    nodes = kind.nodes.T.copy()
    middle = int(np.flatnonzero((kind.nodes == [0.5, 0.0]).all(axis=1))[0])
    nodes[:, middle] = (0.2, 0.0)
    assert quality(nodes, group_of("triangle", 2)).scaled_jacobian[0] < 0.0
    nodes[:, middle] = (0.25, 0.0)
    assert quality(nodes, group_of("triangle", 2)).scaled_jacobian[0] == pytest.approx(0.0, abs=ROUNDING)


def test_the_worst_cells_are_located() -> None:
    found = read_file_mesh(FILES / "quality-tetrahedron.vtu")
    measured = quality(found.nodes, found.groups[0])
    first, second = measured.worst("scaled_jacobian", 2)
    assert first.value == measured.scaled_jacobian.min() <= second.value
    place = found.nodes[:, found.groups[0].cell_nodes[:, first.number]].mean(axis=1)
    assert first.place == pytest.approx(tuple(place), rel=ROUNDING)
    assert measured.worst("skew", 1)[0].value == measured.skew.max()
    assert measured.poor("scaled_jacobian") == (measured.scaled_jacobian < 0.2).sum() > 0
    assert measured.poor("aspect") == (measured.aspect > 10.0).sum() > 0


def group_of(shape: Shape, degree: int) -> CellGroup:
    count = len(element(shape, degree).nodes)
    return CellGroup(shape, degree, np.arange(count)[:, None], np.array([0]))
