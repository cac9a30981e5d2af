"""Names of nodes, cells and boundaries in files: sets, physical groups, marks."""

from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence.bodies.file_mesh import read_file_mesh

POINTS = np.array([[x, y, 0.0] for y in (0.0, 1.0) for x in (0.0, 1.0, 2.0)])
CELLS = [
    ("quad", np.array([[0, 1, 4, 3], [1, 2, 5, 4]])),
    ("line", np.array([[0, 3], [2, 5], [0, 1], [1, 2]])),
]


def test_physical_groups_of_gmsh(tmp_path: Path) -> None:
    tags = [np.array([7, 8]), np.array([1, 2, 3, 3])]
    names = {
        "lug": np.array([7, 2]),
        "arm": np.array([8, 2]),
        "root": np.array([1, 1]),
        "low": np.array([3, 1]),
    }
    raw = meshio.Mesh(
        POINTS, CELLS, cell_data={"gmsh:physical": tags, "gmsh:geometrical": tags}, field_data=names
    )
    raw.write(tmp_path / "lug.msh", file_format="gmsh22")
    found = read_file_mesh(tmp_path / "lug.msh")
    assert {name: sets[0].tolist() for name, sets in found.cell_sets.items()} == {"lug": [0], "arm": [1]}
    facets = {name: groups[0].T.tolist() for name, groups in found.facet_sets.items()}
    assert facets == {"root": [[0, 3]], "boundary_2": [[2, 5]], "low": [[0, 1], [1, 2]]}
    assert not any("left out" in remark for remark in found.remarks)


@pytest.mark.parametrize("ending", ["mesh", "vtu"])
def test_marks_without_names(ending: str, tmp_path: Path) -> None:
    marks = {"mesh": "medit:ref", "vtu": "MaterialIDs"}[ending]
    tags = [np.array([4, 9]), np.array([1, 1, 2, 2])]
    meshio.Mesh(POINTS, CELLS, cell_data={marks: tags}).write(tmp_path / f"lug.{ending}")
    found = read_file_mesh(tmp_path / f"lug.{ending}")
    assert {name: sets[0].tolist() for name, sets in found.cell_sets.items()} == {
        "region_4": [0],
        "region_9": [1],
    }
    assert {name: len(groups[0].T) for name, groups in found.facet_sets.items()} == {
        "boundary_1": 2,
        "boundary_2": 2,
    }


def test_sets_of_nodes_and_of_cells_whose_names_recur(tmp_path: Path) -> None:
    (tmp_path / "lug.inp").write_text(
        "*NODE\n1, 0, 0, 0\n2, 1, 0, 0\n3, 2, 0, 0\n4, 0, 1, 0\n5, 1, 1, 0\n6, 2, 1, 0\n7, 5, 5, 0\n"
        "*ELEMENT, TYPE=CPS4, ELSET=lug\n1, 1, 2, 5, 4\n*ELEMENT, TYPE=CPS4, ELSET=lug\n2, 2, 3, 6, 5\n"
        "*NSET, NSET=root\n1, 4, 7\n*NSET, NSET=stray\n7\n"
    )
    found = read_file_mesh(tmp_path / "lug.inp")
    assert {name: nodes.tolist() for name, nodes in found.node_sets.items()} == {"root": [0, 3]}
    assert {name: sets[0].tolist() for name, sets in found.cell_sets.items()} == {"lug": [0, 1]}


def test_families_of_med(tmp_path: Path) -> None:
    """A cell of a family belongs to each of its names, a name has the cells of all its families."""
    pytest.importorskip("h5py")
    raw = meshio.Mesh(POINTS, CELLS, cell_data={"cell_tags": [np.array([-1, -2]), np.array([-3, 0, 0, 0])]})
    raw.cell_tags = {-1: ["lug", "all"], -2: ["all"], -3: ["root"]}
    raw.point_tags = {}
    raw.write(tmp_path / "lug.med")
    found = read_file_mesh(tmp_path / "lug.med")
    assert {name: sets[0].tolist() for name, sets in found.cell_sets.items()} == {"lug": [0], "all": [0, 1]}
    assert {name: groups[0].T.tolist() for name, groups in found.facet_sets.items()} == {"root": [[0, 3]]}


def test_named_points_of_gmsh(tmp_path: Path) -> None:
    cells = [*CELLS[:1], ("vertex", np.array([[5]]))]
    tags = [np.array([7, 7]), np.array([4])]
    raw = meshio.Mesh(
        POINTS,
        cells,
        cell_data={"gmsh:physical": tags, "gmsh:geometrical": tags},
        field_data={"lug": np.array([7, 2]), "tip": np.array([4, 0])},
    )
    raw.write(tmp_path / "lug.msh", file_format="gmsh22")
    found = read_file_mesh(tmp_path / "lug.msh")
    assert {name: nodes.tolist() for name, nodes in found.node_sets.items()} == {"tip": [5]}


def test_fields_that_are_not_wanted(tmp_path: Path) -> None:
    meshio.Mesh(POINTS, CELLS[:1], point_data={"u": POINTS}).write(tmp_path / "lug.vtu")
    assert read_file_mesh(tmp_path / "lug.vtu", fields=False).point_fields == {}


def test_numbers_that_mark_nothing(tmp_path: Path) -> None:
    """A field of cells that is not called a mark makes no sets, nor does one that is no whole number."""
    fields = {"count": [np.array([1, 2])], "material": [np.array([0.5, 1.5])]}
    meshio.Mesh(POINTS, CELLS[:1], cell_data=fields).write(tmp_path / "lug.vtu")
    found = read_file_mesh(tmp_path / "lug.vtu")
    assert found.cell_sets == {} and set(found.cell_fields) == {"count", "material"}
