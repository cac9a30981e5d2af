"""Files that are no use end in one clear message with file and cell, or in a stated, counted repair."""

import base64
import re
import struct
import subprocess
import sys
import tracemalloc
import zlib
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.bodies.file_mesh import read_file_mesh
from convergence.bodies.vtu_file import read_vtu
from convergence.errors import InputError

FILES = Path(__file__).parent / "files"
CUBE = 10.0 * np.array(
    [[0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0], [0, 0, 1], [1, 0, 1], [1, 1, 1], [0, 1, 1]], dtype=float
)
ONE = [("hexahedron", np.arange(8)[None])]
# three blocks in an L, joined at faces by their node numbers
ROW = np.vstack([CUBE, CUBE[[1, 2, 5, 6]] + [10.0, 0.0, 0.0], CUBE[[1, 2, 5, 6]] + [20.0, 0.0, 0.0]])
THREE = [
    (
        "hexahedron",
        np.array([[0, 1, 2, 3, 4, 5, 6, 7], [1, 8, 9, 2, 5, 10, 11, 6], [8, 12, 13, 9, 10, 14, 15, 11]]),
    )
]


def written(folder: Path, points: np.ndarray, cells: list, name: str = "arm.vtk", **fields: object) -> Path:
    meshio.Mesh(points, cells, **fields).write(folder / name)
    return folder / name


def message(path: Path) -> str:
    with pytest.raises(InputError) as caught:
        read_file_mesh(path)
    assert str(path) in str(caught.value) and "; " in str(caught.value)
    return str(caught.value).removeprefix(str(path))


def test_no_file_of_use(tmp_path: Path) -> None:
    good = (FILES / "ngsolve-bending.vtu").read_bytes()
    (tmp_path / "empty.vtu").write_bytes(b"")
    (tmp_path / "arm.xyz").write_bytes(good)
    (tmp_path / "arm.vtk").write_bytes(good)
    assert "no such file" in message(tmp_path / "missing.vtu")
    assert "a folder" in message(tmp_path)
    assert "the file is empty" in message(tmp_path / "empty.vtu")
    assert "not known; known: " in message(tmp_path / "arm.xyz")
    assert "of another kind than .vtk" in message(tmp_path / "arm.vtk")


@pytest.mark.filterwarnings("ignore:overflow encountered:RuntimeWarning")
@pytest.mark.parametrize("ending", ["vtu", "vtk", "msh", "inp", "xdmf", "mesh", "vol", "su2", "avs", "stl"])
def test_bytes_and_words_that_are_no_mesh(
    ending: str, tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    """No trace, no exit and nothing printed, whatever the reader does."""
    path = tmp_path / f"arm.{ending}"
    for content in (np.random.default_rng(5).bytes(2000), b"no mesh\n1 2 3\n"):
        path.write_bytes(content)
        assert message(path)
    assert capfd.readouterr() == ("", "")


@pytest.mark.parametrize("share", [0.1, 0.5, 0.9, 0.999])
@pytest.mark.parametrize("name", ["ngsolve-bending.vtu", "sfepy-tension-triangles.vtk", "netgen-solid.msh"])
def test_truncated_files(name: str, share: float, tmp_path: Path) -> None:
    """A file that ends early is a fault, or, where only its last fields are lost, a mesh that is whole."""
    whole, content = read_file_mesh(FILES / name), (FILES / name).read_bytes()
    path = tmp_path / name
    path.write_bytes(content[: int(share * len(content))])
    try:
        found = read_file_mesh(path)
    except InputError as error:
        assert str(path) in str(error)
    else:
        assert found.cells == whole.cells and found.nodes.shape == whole.nodes.shape


@pytest.mark.parametrize("name", ["vtk-appended.vtu", "vtk-legacy.vtk", "netgen-solid.inp"])
def test_damaged_files(name: str, tmp_path: Path) -> None:
    """Bytes changed, cut out and repeated at random: a mesh or a message, nothing else."""
    rng, whole = np.random.default_rng(11), (FILES / name).read_bytes()
    path, refused = tmp_path / name, 0
    for _ in range(60):
        content, at = bytearray(whole), int(rng.integers(len(whole)))
        content[at : at + int(rng.integers(1, 30))] = rng.bytes(int(rng.integers(0, 3)))
        path.write_bytes(content)
        try:
            read_file_mesh(path)
        except InputError as error:
            assert str(path) in str(error)
            refused += 1
    assert refused > 10


def test_faults_of_cells_are_located_and_all_told(tmp_path: Path) -> None:
    points = ROW.copy()
    points[7] = (-30.0, -30.0, -30.0)
    points[12:, 0] = 20.0
    told = message(written(tmp_path, points, THREE)).splitlines()
    assert len(told) == 2
    assert "cell 2, place (20, 5, 5): hexahedron without volume" in told[0]
    assert "cell 0, place (" in told[1] and "folded" in told[1]


@pytest.mark.parametrize(
    ("cells", "points", "words"),
    [
        ([0, 1, 2, 3, 4, 5, 6, 8], CUBE, ": cell 0: nodes that are not in the file; its nodes are 0 to 7"),
        ([0, 1, 2, 3, 4, 5, 6, 6], CUBE, ": cell 0: the same node twice"),
        (range(8), np.where(CUBE == 0.0, np.nan, CUBE), ": cell 0: nodes whose place is not a number"),
    ],
)
def test_faults_of_nodes(cells: list[int], points: np.ndarray, words: str, tmp_path: Path) -> None:
    path = written(tmp_path, points, [("hexahedron", np.array([list(cells)]))])
    assert message(path).startswith(words)


def test_cells_that_are_no_body(tmp_path: Path) -> None:
    for cells in ([("line", np.array([[0, 1]]))], [("pyramid", np.array([[0, 1, 2, 3, 4]]))]):
        assert f"found: {cells[0][0]}" in message(written(tmp_path, CUBE, cells))
    bent = [("quad", np.array([[0, 1, 2, 3], [1, 2, 6, 5]]))]
    assert "shells that do not lie in a plane" in message(written(tmp_path, CUBE, bent))


def test_a_face_of_three_cells(tmp_path: Path) -> None:
    points = np.array([[0, 0, 0], [1, 0, 0], [0, 1, 0], [0, -1, 0], [0.5, 2, 0]], dtype=float)
    path = written(tmp_path, points, [("triangle", np.array([[0, 1, 2], [0, 1, 3], [0, 1, 4]]))])
    assert message(path).startswith(": cells 0, 1, 2: a face that three cells or more have")


@pytest.mark.parametrize("axis", [0, 1, 2])
def test_shells_in_a_plane_are_a_plane_mesh(axis: int, tmp_path: Path) -> None:
    """Plane data in a file of places in space: the constant coordinate goes, orphans and a loose line too."""
    points = np.roll(CUBE * [2.0, 1.0, 1.0], axis - 2, axis=1)
    cells = [("quad", np.array([[0, 1, 2, 3]])), ("line", np.array([[0, 1]]))]
    found = read_file_mesh(written(tmp_path, points, cells))
    assert found.axes == tuple(other for other in range(3) if other != axis)
    assert found.nodes.shape == (2, 4) and np.prod(np.ptp(found.nodes, axis=1)) == 200.0
    assert "nodes of no cell left out: 4" in found.remarks
    assert "cells of kind line left out (not of the body): 1" in found.remarks


def test_cells_inside_out_are_turned(tmp_path: Path) -> None:
    cells = [(kind, numbers.copy()) for kind, numbers in THREE]
    cells[0][1][1] = cells[0][1][1][[0, 3, 2, 1, 4, 7, 6, 5]]
    found = read_file_mesh(written(tmp_path, ROW, cells))
    assert found.remarks == ("cells of shape hexahedron that were inside out and are turned: 1",)
    assert found.cells == 3


@pytest.mark.parametrize(
    ("name", "kind", "order", "edges"),
    [
        ("hexa20", "hexahedron20", [*range(12), *range(16, 20), *range(12, 16)], "01 12 23 30 04 15"),
        ("wedge15", "wedge15", [*range(9), *range(12, 15), *range(9, 12)], "01 12 20 03 14 25"),
        ("tetra10", "tetra10", [*range(8), 9, 8], "01 12 20 03 23 13"),
    ],
)
def test_middle_nodes_in_another_order(
    name: str, kind: str, order: list[int], edges: str, tmp_path: Path
) -> None:
    """Upright edges before those of the top, or the last two changed, as some programs write them."""
    right = read_file_mesh(FILES / f"vtk-{name}.vtu")
    raw = read_vtu(FILES / f"vtk-{name}.vtu")
    found = read_file_mesh(written(tmp_path, raw.points, [(kind, raw.cells[0].data[:, order])]))
    assert any(f"order of the edges {edges}" in remark for remark in found.remarks)
    assert (found.groups[0].cell_nodes == right.groups[0].cell_nodes).all()
    assert np.abs(found.nodes - right.nodes).max() == 0.0


def cracked() -> tuple[np.ndarray, list]:
    """Return four squares round a node, with the nodes along one side of it doubled: a crack."""
    points = np.array([[x, y, 0.0] for y in (-1.0, 0.0, 1.0) for x in (-1.0, 0.0, 1.0)])
    points = np.vstack([points, points[5]])
    return points, [("quad", np.array([[0, 1, 4, 3], [1, 2, 5, 4], [3, 4, 7, 6], [4, 9, 8, 7]]))]


def test_a_crack_stays_open_and_is_told(tmp_path: Path) -> None:
    path = written(tmp_path, *cracked())
    found = read_file_mesh(path)
    assert found.nodes.shape[1] == 10
    assert any("kept apart" in remark and remark.endswith(": 1") for remark in found.remarks)
    closed = read_file_mesh(path, merge=True)
    assert closed.nodes.shape[1] == 9
    assert "nodes merged into others at their place (as asked): 1" in closed.remarks


def test_loose_cells_are_joined_and_jumps_are_told(tmp_path: Path) -> None:
    """Each cell with nodes of its own: joined, fields averaged, a field that jumps is told."""
    points = np.vstack([CUBE, CUBE + np.array([10.0, 0.0, 0.0])])
    cells = [("hexahedron", np.arange(16).reshape(2, 8))]
    jump = np.repeat([1.0, 3.0], 8)
    path = written(tmp_path, points, cells, point_data={"u": 1e-3 * points, "s": jump})
    found = read_file_mesh(path)
    assert found.nodes.shape[1] == 12
    assert np.abs(found.point_fields["u"] - 1e-3 * found.nodes).max() < 1e-18
    assert sorted(set(found.point_fields["s"][0])) == [1.0, 2.0, 3.0]
    assert [remark for remark in found.remarks if "differs" in remark] == [
        "field 's' differs at merged nodes by up to 2: their mean is taken"
    ]


def test_a_field_of_another_mesh(tmp_path: Path) -> None:
    path = written(tmp_path, CUBE, ONE, "arm.vtu", point_data={"u": np.zeros((8, 3))})
    text = path.read_text()
    path.write_text(text.replace('Name="u" NumberOfComponents="3"', 'Name="u" NumberOfComponents="2"'))
    assert "field 'u' of another mesh: 12 values where 8 are due" in message(path)


def packed(blocks: int, size: int, content: bytes) -> str:
    """Return what a VTU file has for data in blocks of that declared size, all of the same content."""
    block = zlib.compress(content)
    head = struct.pack(f"<{3 + blocks}I", blocks, size, 0, *([len(block)] * blocks))
    return (base64.b64encode(head) + base64.b64encode(block * blocks)).decode()


def test_data_that_unpack_to_too_much(tmp_path: Path) -> None:
    """What would unpack to more than a thousand times the file, or than its block, is not unpacked."""
    path = written(tmp_path, CUBE, ONE, "arm.vtu", point_data={"u": np.zeros((8, 3))})
    text = path.read_text()
    whole = re.search(r'(Name="u"[^>]*>)([^<]*)<', text)
    assert whole is not None
    path.write_text(text.replace(whole[0], f"{whole[1]}{packed(4, 2_000_000_000, bytes(1000))}<"))
    assert "it would unpack to more than a thousand times its size, or 4 GB" in message(path)
    path.write_text(text.replace(whole[0], f"{whole[1]}{packed(1, 192, bytes(50_000_000))}<"))
    tracemalloc.start()
    assert read_file_mesh(path).point_fields["u"].shape == (3, 8)
    assert tracemalloc.get_traced_memory()[1] < 5_000_000
    tracemalloc.stop()


def test_vtu_files_that_are_not_read(tmp_path: Path) -> None:
    path = written(tmp_path, CUBE, ONE, "arm.vtu", point_data={"u": np.zeros((8, 3))})
    text = path.read_text()
    for old, new, words in (
        ("vtkZLibDataCompressor", "vtkLZ4DataCompressor", "packed by vtkLZ4DataCompressor"),
        ("UnstructuredGrid", "PolyData", "no unstructured grid"),
        ("</Piece>", "</Piece><Piece></Piece>", "it has 2 pieces"),
        ('NumberOfPoints="8"', 'NumberOfPoints="7"', "points of another mesh: 8 values where 7 are due"),
        ('NumberOfCells="1"', 'NumberOfCells="2"', "cells' offsets of another mesh"),
        ("connectivity", "connections", "points or cells are missing"),
    ):
        path.write_text(text.replace(old, new))
        assert words in message(path)


def test_columns_are_put_together(tmp_path: Path) -> None:
    names = ("ux", "uy", "uz", "S_xx", "S_yy", "S_zz", "S_xy", "S_yz", "S_xz", "S_Mises")
    columns = {name: np.full(8, float(number)) for number, name in enumerate(names)}
    found = read_file_mesh(written(tmp_path, CUBE, ONE, point_data=columns))
    assert found.point_fields["u"][:, 0].tolist() == [0.0, 1.0, 2.0]
    assert found.point_fields["S"][:, 0].tolist() == [3.0, 4.0, 5.0, 6.0, 7.0, 8.0]
    assert set(found.point_fields) == {*names, "u", "S"}


def test_the_last_step_of_a_series_in_time(tmp_path: Path) -> None:
    path = tmp_path / "arm.xdmf"
    with meshio.xdmf.TimeSeriesWriter(path, data_format="XML") as series:
        series.write_points_cells(CUBE, ONE)
        for step in (1.0, 2.0, 3.0):
            series.write_data(0.1 * step, point_data={"u": step * 1e-3 * CUBE})
    found = read_file_mesh(path)
    assert "step 3 of 3 (time 0.3) is read" in found.remarks
    assert np.abs(found.point_fields["u"] - 3e-3 * found.nodes).max() < 1e-12
    assert "step 2 of 3 (time 0.2) is read" in read_file_mesh(path, step=2).remarks
    with pytest.raises(InputError, match="step 4 is not among its 3 steps"):
        read_file_mesh(path, step=4)


def test_what_the_reader_warns_of_is_told(tmp_path: Path, capfd: pytest.CaptureFixture[str]) -> None:
    text = (FILES / "netgen-solid.msh").read_text()
    (tmp_path / "block.msh").write_text(text.replace("$EndElements", ""))
    found = read_file_mesh(tmp_path / "block.msh")
    assert "reader: $Elements not closed by $EndElements." in found.remarks
    assert capfd.readouterr() == ("", "")


def test_a_kind_that_needs_a_package_that_is_missing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "h5py", None)
    (tmp_path / "arm.med").write_bytes(b"\x89HDF")
    assert ": this kind needs the package h5py" in message(tmp_path / "arm.med")


def test_the_reader_is_imported_when_a_file_is_read() -> None:
    code = "import sys, convergence.bodies.file_mesh; sys.exit('meshio' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
