"""The study that `meshassay new` writes for a mesh file names what the file has, and runs."""

from pathlib import Path

import meshio
import numpy as np
import pytest
from click.testing import CliRunner

from convergence.cli.new import new
from convergence.climbing import climb
from convergence.errors import InputError
from convergence.mesh_template import mesh_template
from convergence.study import load


def block(path: Path) -> None:
    """Write a block of two hexahedra with the boundary root and the region steel."""
    points = np.array([[x, y, z] for x in (0.0, 10.0, 20.0) for z in (0.0, 5.0) for y in (0.0, 5.0)])
    cells = [
        ("quad", [[0, 1, 3, 2]]),
        ("hexahedron", [[0, 4, 5, 1, 2, 6, 7, 3], [4, 8, 9, 5, 6, 10, 11, 7]]),
    ]
    marks = [np.array([5]), np.array([6, 6])]
    names = {"root": np.array([5, 2]), "steel": np.array([6, 3])}
    data = {"gmsh:physical": marks, "gmsh:geometrical": marks}
    meshio.write(
        path, meshio.Mesh(points, cells, cell_data=data, field_data=names), file_format="gmsh22", binary=False
    )


def test_it_names_what_the_file_has_and_runs(tmp_path: Path) -> None:
    block(tmp_path / "block.msh")
    text = mesh_template(tmp_path / "block.msh")
    assert "# block.msh: 2 hexahedrons of degree 1," in text
    assert "# boundary root: 1 facets, from (0, 0, 0) to (0, 5, 5)" in text
    assert "# region steel: 2 cells; [material.steel] changes its material" in text
    path = tmp_path / "block.toml"
    path.write_text(text.replace("# levels =", "levels = 2 #"))
    study = load(path)
    assert study.problem().supports[0].boundary == "root"
    levels = list(climb(study, tmp_path / "out"))
    assert [level.cells for level in levels] == [2, 16]
    assert 0.0 < levels[0].values["energy"] < levels[1].values["energy"]


def test_the_command_takes_a_mesh_file(tmp_path: Path) -> None:
    block(tmp_path / "block.msh")
    found = CliRunner().invoke(new, [str(tmp_path / "block.msh")])
    assert found.exit_code == 0 and found.output == mesh_template(tmp_path / "block.msh")


def test_a_file_that_is_missing_is_told(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"no\.msh: no such file"):
        mesh_template(tmp_path / "no.msh")
