"""Series of meshes: the same part from coarse to fine, or a message that says which file is not."""

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.bodies.file_mesh import FileMesh, read_file_mesh
from convergence.bodies.series import check_series, measure
from convergence.errors import InputError

FILES = Path(__file__).parent / "files"


Ring = Callable[..., FileMesh]


@pytest.fixture
def ring(tmp_path: Path) -> Ring:
    """Return a maker of rings of inner radius 4, with so many cells around and a fourth as many across."""

    def make(cells: int, name: str, radius: float = 10.0, turn: float = 0.0) -> FileMesh:
        across = cells // 4
        angle = np.linspace(0.0, 2.0 * np.pi, cells, endpoint=False) + turn
        radii = np.linspace(4.0, radius, across + 1)
        points = np.array([[r * np.cos(a), r * np.sin(a), 0.0] for r in radii for a in angle])
        numbers = np.arange(len(points)).reshape(across + 1, cells)
        after = np.roll(numbers, -1, axis=1)
        quads = np.stack([numbers[:-1], numbers[1:], after[1:], after[:-1]], axis=2).reshape(-1, 4)
        meshio.Mesh(points, [("quad", quads)]).write(tmp_path / name)
        return read_file_mesh(tmp_path / name)

    return make


def test_measure_of_curved_cells() -> None:
    """NGSolve's own integral of 1 over the same curved cells, to rounding."""
    assert measure(read_file_mesh(FILES / "ngsolve-pin.vtu")) == pytest.approx(941.9935724747007, rel=1e-12)


def test_straight_sides_on_curved_boundaries_are_the_same_part(ring: Ring) -> None:
    """Eight sides around a hole and a rim: 10 % less area than 64 sides have, and another box."""
    levels = [
        ring(8, "a.vtk", turn=0.3),
        ring(16, "b.vtk"),
        ring(32, "c.vtk", turn=0.1),
        ring(64, "d.vtk"),
    ]
    assert measure(levels[0]) < 0.91 * measure(levels[-1])
    assert check_series(levels) == (tuple(levels), ())


def test_another_order_is_put_right_and_told(ring: Ring) -> None:
    coarse, middle, fine = ring(8, "a.vtk"), ring(16, "b.vtk"), ring(32, "c.vtk")
    ordered, remarks = check_series([middle, fine, coarse])
    assert ordered == (coarse, middle, fine)
    assert remarks == ("the files are put in order, coarse to fine: a.vtk, b.vtk, c.vtk",)


def test_the_same_mesh_twice(ring: Ring) -> None:
    with pytest.raises(InputError, match=r"b\.vtk: the same mesh as a\.vtk"):
        check_series([ring(8, "a.vtk"), ring(8, "b.vtk"), ring(16, "c.vtk")])


def test_another_part_another_unit_and_another_place(ring: Ring) -> None:
    fine, wide, coarse = ring(32, "fine.vtk"), ring(16, "wide.vtk", radius=14.0), ring(8, "coarse.vtk")
    metres = replace(coarse, nodes=1e3 * coarse.nodes)
    with pytest.raises(InputError) as caught:
        check_series([metres, wide, fine])
    told = str(caught.value).splitlines()
    assert len(told) == 2
    assert "coarse.vtk: another part than fine.vtk: x is -10000 … 10000, there -10 … 10" in told[0]
    assert "wide.vtk: another part than fine.vtk: x is -14 … 14, there -10 … 10" in told[1]
    moved = replace(ring(16, "b.vtk"), nodes=ring(16, "b.vtk").nodes + 5.0)
    with pytest.raises(InputError, match="another part"):
        check_series([moved, fine])


def test_a_hole_that_is_not_there(ring: Ring) -> None:
    """The same box with a quarter of the material missing is another part by its area."""
    fine, coarse = ring(64, "fine.vtk"), ring(32, "coarse.vtk")
    group = coarse.groups[0]
    kept = slice(0, 3 * group.cell_nodes.shape[1] // 4)
    less = replace(group, cell_nodes=group.cell_nodes[:, kept], numbers=group.numbers[kept])
    with pytest.raises(InputError, match=r"another part than fine\.vtk: its area is"):
        check_series([replace(coarse, groups=(less,)), fine])


def block(folder: Path, cells: int, length: float) -> FileMesh:
    """Return a block of that length with so many hexahedra along it, half as many across."""
    counts = (cells, cells // 2, cells // 2)
    axes = [np.linspace(0.0, end, n + 1) for end, n in zip((length, 20.0, 10.0), counts, strict=True)]
    points = np.stack(np.meshgrid(*axes, indexing="ij"), axis=-1).reshape(-1, 3)
    ids = np.arange(len(points)).reshape([n + 1 for n in counts])
    corners = ((0, 0, 0), (1, 0, 0), (1, 1, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (1, 1, 1), (0, 1, 1))
    parts = [ids[i : i + counts[0], j : j + counts[1], k : k + counts[2]].ravel() for i, j, k in corners]
    path = folder / f"block-{cells}-{length:g}.vtk"
    meshio.Mesh(points, [("hexahedron", np.array(parts).T)]).write(path)
    return read_file_mesh(path)


def test_flat_sides_stay_where_they_are(tmp_path: Path) -> None:
    """A side that is flat on the coarse mesh stands for no round: 0.1 mm more is another part."""
    same = [block(tmp_path, 4, 60.0), block(tmp_path, 8, 60.0)]
    assert check_series(same) == (tuple(same), ())
    with pytest.raises(InputError, match=r"another part than block-8-60.1.vtk: x is 0 … 60, there 0 … 60.1"):
        check_series([block(tmp_path, 4, 60.0), block(tmp_path, 8, 60.1)])


def test_a_solid_of_curved_cells_and_its_straight_mesh() -> None:
    """The pin of curved cells, and as tetrahedra of straight sides on the same vertices: 4 % less volume."""
    curved = read_file_mesh(FILES / "ngsolve-pin.vtu")
    group = curved.groups[0]
    used, straight = np.unique(group.cell_nodes[:4], return_inverse=True)
    linear = replace(
        curved,
        nodes=curved.nodes[:, used],
        groups=(replace(group, degree=1, cell_nodes=straight.reshape(4, -1)),),
    )
    assert measure(linear) < 0.96 * measure(curved)
    assert set(check_series([linear, curved])[0]) == {linear, curved}


def test_a_plane_and_a_solid(ring: Ring) -> None:
    solid = read_file_mesh(FILES / "sfepy-tension-hexa.vtu")
    with pytest.raises(InputError, match="one lies in a plane, the other does not"):
        check_series([solid, ring(32, "a.vtk")])
