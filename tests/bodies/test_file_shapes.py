"""Every kind of cell, written by VTK on curved cells: the nodes stand where our elements have them.

VTK's own parametric coordinates of the nodes are in the files as the field `local`.
"""

from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.bodies.conventions import KINDS, mirrored, positions, serendipity
from convergence.bodies.file_mesh import FileMesh, read_file_mesh
from convergence.errors import InputError
from convergence.fem.element import element
from convergence.fem.mesh import Mesh

FILES = Path(__file__).parent / "files"
ROUNDING = 1e-12
WEDGES = 18112.0 / 3.0  # both wedges: the map of their vertices integrated by sympy, own computation
KINDS_OF_VTK = {
    "triangle3": ("triangle", 1),
    "triangle6": ("triangle", 2),
    "quad4": ("quadrilateral", 1),
    "quad8": ("quadrilateral", 2),
    "quad9": ("quadrilateral", 2),
    "tetra4": ("tetrahedron", 1),
    "tetra10": ("tetrahedron", 2),
    "hexa8": ("hexahedron", 1),
    "hexa20": ("hexahedron", 2),
    "hexa27": ("hexahedron", 2),
    "wedge6": ("wedge", 1),
    "wedge15": ("wedge", 2),
    "wedge18": ("wedge", 2),
}
LAGRANGE = {
    "triangle": "triangle",
    "quad": "quadrilateral",
    "tetra": "tetrahedron",
    "hexa": "hexahedron",
    "wedge": "wedge",
}


def mapped(local: np.ndarray) -> np.ndarray:
    """Return the places that the files give to parametric coordinates (3, ...)."""
    r, s, t = local
    return np.array(
        [30 * r + 2 * s**2 + r * s + 4 * t, 20 * s + 1.5 * r**2 - 2 * r * t, 10 * t + 2 * r**2 + s * t]
    )


def solved_on(found: FileMesh, number: int = 0) -> Mesh:
    """Return a group of a file as a mesh of our own; what it does not need of a part is left out."""
    group = found.groups[number]
    part: dict[int, int] = {}
    cells = {"body": np.arange(group.cell_nodes.shape[1])}
    return Mesh(part, {}, group.shape, group.degree, found.nodes, group.cell_nodes, {}, {}, cells)  # type: ignore[arg-type]


def require_in_place(found: FileMesh) -> None:
    """Require that the parametric coordinates of all nodes are affine in those of our element's nodes.

    They are so in any of a cell's positions, and no longer where two nodes change places.
    """
    group = found.groups[0]
    own = element(group.shape, group.degree).nodes
    theirs = found.point_fields["local"][: found.dimension][:, group.cell_nodes[:, 0]].T
    full = np.column_stack([own, np.ones(len(own))])
    affine, *_ = np.linalg.lstsq(full, theirs, rcond=None)
    assert np.abs(full @ affine - theirs).max() < ROUNDING
    assert np.linalg.det(affine[:-1]) == pytest.approx(1.0, abs=ROUNDING)


@pytest.mark.parametrize("name", KINDS_OF_VTK)
def test_nodes_stand_in_their_places(name: str) -> None:
    found = read_file_mesh(FILES / f"vtk-{name}.vtu")
    shape, degree = KINDS_OF_VTK[name]
    assert [(g.shape, g.degree, g.cell_nodes.shape[1]) for g in found.groups] == [(shape, degree, 2)]
    require_in_place(found)
    assert found.cell_fields["number"][0].tolist() == [[10.0, 20.0]]


@pytest.mark.parametrize("name", LAGRANGE)
def test_lagrange_cells_of_degree_2(name: str) -> None:
    found = read_file_mesh(FILES / f"vtk-lagrange-{name}.vtu")
    assert [(g.shape, g.degree) for g in found.groups] == [(LAGRANGE[name], 2)]
    require_in_place(found)


@pytest.mark.parametrize("name", [name for name, (_, degree) in KINDS_OF_VTK.items() if degree == 2])
def test_curved_cells_have_the_measure_of_their_map(name: str) -> None:
    """The map is in the space of the cells, so the integral of its Jacobian is the measure, to rounding."""
    level = solved_on(read_file_mesh(FILES / f"vtk-{name}.vtu"))
    places, weights = level.element.rule(6)
    r, s, t = np.vstack([places, np.zeros((3 - len(places), places.shape[1]))])
    one, none = np.ones_like(r), np.zeros_like(r)
    jacobian = np.array([[30 + s, 4 * s + r, 4 * one], [3 * r - 2 * t, 20 * one, -2 * r], [4 * r, t, 10 + s]])
    if len(places) == 2:
        jacobian[:, 2], jacobian[2, :2] = np.array([none, none, one]), none
    exact = weights @ np.linalg.det(np.moveaxis(jacobian, -1, 0))
    assert level.cell_measures == pytest.approx(np.full(2, exact), rel=1e-12)


@pytest.mark.parametrize("name", ["quad8", "hexa20", "wedge15"])
def test_added_nodes_lie_on_the_map(name: str) -> None:
    """A quadratic map is in the space of serendipity cells: the nodes added lie on it, to rounding."""
    found = read_file_mesh(FILES / f"vtk-{name}.vtu")
    new = found.node_numbers < 0
    assert new.sum() == sum(1 for number in found.node_numbers if number == -1) > 0
    local = found.point_fields["local"][:, new]
    places = mapped(local)[: found.dimension]
    second = found.nodes[0, new] > 60.0
    places[0] += 100.0 * second
    assert np.abs(places - found.nodes[:, new]).max() < 1e-11
    assert any("added" in remark for remark in found.remarks)


def test_a_permuted_node_shows(tmp_path: Path) -> None:
    raw = meshio.read(FILES / "vtk-hexa27.vtu")
    raw.cells[0].data[:, [20, 21]] = raw.cells[0].data[:, [21, 20]]
    raw.write(tmp_path / "wrong.vtk", file_format="vtk")
    with pytest.raises(InputError, match="folded"):
        read_file_mesh(tmp_path / "wrong.vtk")


@pytest.mark.filterwarnings("ignore::DeprecationWarning")
@pytest.mark.parametrize("ending", ["msh", "inp", "med", "e", "nas", "xdmf", "vtk"])
@pytest.mark.parametrize("name", ["triangle6", "quad8", "tetra10", "hexa20"])
def test_other_kinds_of_file(name: str, ending: str, tmp_path: Path) -> None:
    """The same curved cells by way of other kinds of file; some have eight digits only, so 1e-6."""
    if ending in ("med", "xdmf", "e"):
        pytest.importorskip("netCDF4" if ending == "e" else "h5py")
    whole, raw = read_file_mesh(FILES / f"vtk-{name}.vtu"), meshio.read(FILES / f"vtk-{name}.vtu")
    kind = "gmsh" if ending == "msh" else None  # the ending is that of two kinds
    meshio.Mesh(raw.points, raw.cells).write(tmp_path / f"arm.{ending}", file_format=kind)
    found = read_file_mesh(tmp_path / f"arm.{ending}")
    assert solved_on(found).cell_measures == pytest.approx(solved_on(whole).cell_measures, rel=1e-6)


def test_wedges_in_either_order(tmp_path: Path) -> None:
    """VTK's documentation and its code give opposite orders; the volume tells which one a file has."""
    raw = meshio.read(FILES / "vtk-wedge6.vtu")
    points, cells = raw.points, raw.cells[0].data
    for number, order in enumerate(([0, 1, 2, 3, 4, 5], [0, 2, 1, 3, 5, 4])):
        path = tmp_path / f"wedge-{number}.vtu"
        meshio.Mesh(points, [("wedge", cells[:, order])]).write(path)
        assert solved_on(read_file_mesh(path)).measure == pytest.approx(WEDGES, rel=1e-12)
    assert any(
        "turned: 2" in remark for number in (0, 1) for remark in told(tmp_path / f"wedge-{number}.vtu")
    )


def told(path: Path) -> tuple[str, ...]:
    return read_file_mesh(path).remarks


@pytest.mark.parametrize("kind", KINDS.values(), ids=KINDS)
def test_conventions_are_whole(kind: object) -> None:
    shape, degree = kind.shape, kind.degree  # type: ignore[attr-defined]
    count = len(element(shape, degree).nodes)
    assert sorted(positions(shape, degree)) == list(range(count))
    turned = mirrored(shape, degree)
    assert sorted(turned) == list(range(count)) and (turned[turned] == np.arange(count)).all()
    assert np.linalg.det(_axes(element(shape, degree).nodes[turned], shape)) < 0.0


def _axes(nodes: np.ndarray, shape: str) -> np.ndarray:
    own = element(shape, 1).nodes  # type: ignore[arg-type]
    corners = nodes[: len(own)]
    full = np.column_stack([own, np.ones(len(own))])
    return np.linalg.lstsq(full, corners, rcond=None)[0][:-1]


@pytest.mark.parametrize(("name", "face"), [("quad8", (0, 1, 2, 3)), ("hexahedron20", tuple(range(8)))])
def test_serendipity_weights_are_of_a_partition_of_unity(name: str, face: tuple[int, ...]) -> None:
    members, weights = serendipity(KINDS[name], face)
    assert len(members) == KINDS[name].nodes and weights.sum() == 1.0
