"""Meshes and fields that NGSolve, Netgen and SfePy wrote, beside exact values.

How each file was made stands in files/README.md.
"""

from pathlib import Path

import numpy as np
import pytest

from convergence.bodies.file_mesh import FileMesh, read_file_mesh
from convergence.fem.mesh import Mesh

FILES = Path(__file__).parent / "files"


def level(found: FileMesh) -> Mesh:
    group = found.groups[0]
    cells = {"body": np.arange(group.cell_nodes.shape[1])}
    return Mesh(None, {}, group.shape, group.degree, found.nodes, group.cell_nodes, {}, {}, cells)  # type: ignore[arg-type]


def test_bending_by_ngsolve() -> None:
    """Pure bending, u = s x y / (E h), v = -s (x² + ν y²) / (2 E h): in the space of the cells, so exact.

    The file's numbers are double, so only the solver's rounding is left.
    """
    found = read_file_mesh(FILES / "ngsolve-bending.vtu")
    x, y = found.nodes
    s, modulus, nu, h = 120.0, 210000.0, 0.3, 10.0
    exact = np.array([s * x * y / (modulus * h), -s * (x**2 + nu * y**2) / (2.0 * modulus * h)])
    assert np.abs(found.point_fields["displacement"] - exact).max() < 1e-10 * np.abs(exact).max()
    stress = np.array([s * y / h, 0.0 * y, 0.0 * y])
    assert np.abs(found.point_fields["stress"] - stress).max() < 1e-10 * s
    assert level(found).measure == pytest.approx(1200.0, rel=1e-12)
    assert len(found.remarks) == 3


@pytest.mark.parametrize(
    ("name", "cells", "measure"),
    [
        ("ngsolve-lug", 78, 749.7595835822779),  # NGSolve's own integral of 1 over the curved cells
        ("ngsolve-pin", 165, 941.9935724747007),
    ],
)
def test_curved_cells_of_ngsolve(name: str, cells: int, measure: float) -> None:
    """Each of its cells has nodes of its own; they are joined, and the measure is NGSolve's to rounding."""
    found = read_file_mesh(FILES / f"{name}.vtu")
    assert found.cells == cells and found.groups[0].degree == 2
    assert level(found).measure == pytest.approx(measure, rel=1e-12)
    assert any("merged" in remark and "no cell shared a face" in remark for remark in found.remarks)


def test_a_field_on_curved_cells_of_ngsolve() -> None:
    """A quadratic field at the nodes of curved cells, as NGSolve evaluates it there."""
    found = read_file_mesh(FILES / "ngsolve-pin.vtu")
    x, y, z = found.nodes
    assert np.abs(found.point_fields["u"] - 1e-3 * np.array([x * x, y * z, z])).max() < 1e-14


@pytest.mark.parametrize("name", ["netgen-solid.msh", "netgen-solid.inp"])
def test_meshes_of_netgen(name: str) -> None:
    """Netgen prints places with 8 digits: the volume, that NGSolve finds on the same cells, to 1e-7."""
    found = read_file_mesh(FILES / name)
    assert level(found).measure == pytest.approx(1809.772436910214, rel=1e-7)
    outer = sum(facets.shape[1] for groups in found.facet_sets.values() for facets in groups)
    assert outer == 320
    assert not any("left out" in remark for remark in found.remarks)


def test_names_of_netgen() -> None:
    found = read_file_mesh(FILES / "netgen-solid.inp")
    assert set(found.facet_sets) == {"root", "outer"} and set(found.cell_sets) == {"lug"}
    assert np.abs(found.nodes[0, found.facet_sets["root"][0]]).max() == 0.0
    numbered = read_file_mesh(FILES / "netgen-solid.msh")
    assert set(numbered.facet_sets) == {f"boundary_{number}" for number in range(1, 8)}


@pytest.mark.parametrize("name", ["sfepy-tension-hexa.vtu", "sfepy-tension-triangles.vtk"])
def test_tension_by_sfepy(name: str) -> None:
    """Uniaxial tension: u = s x / E, v = -ν s y / E …, in the space of any cells; solved directly."""
    found = read_file_mesh(FILES / name)
    exact = 120.0 / 210000.0 * found.nodes * np.array([1.0, -0.3, -0.3])[: found.dimension, None]
    moved = found.point_fields["u"][: found.dimension]
    assert np.abs(moved - exact).max() < 1e-10 * np.abs(exact).max()
    stress = found.cell_fields["cauchy_stress"][0]
    assert np.abs(stress[0] - 120.0).max() < 1e-9 and np.abs(stress[1:]).max() < 1e-9
    assert found.cell_sets == {} or set(found.cell_sets) == {"region_0"}


def test_a_mixed_mesh() -> None:
    found = read_file_mesh(FILES / "vtk-mixed.vtu")
    assert [(g.shape, g.degree, g.numbers.tolist()) for g in found.groups] == [
        ("hexahedron", 1, [0, 1]),
        ("wedge", 1, [2]),
    ]
    assert [part.tolist() for part in found.cell_sets["region_2"]] == [[1], [0]]
    assert [part.tolist() for part in found.cell_fields["material"]] == [[[1.0, 2.0]], [[2.0]]]
    x, y, z = found.nodes
    assert np.abs(found.point_fields["u"] - np.array([1e-3 * x, -3e-4 * y, -3e-4 * z])).max() < 1e-15
    told = " / ".join(found.remarks)
    assert "pyramid left out (not supported): 1" in told and "quad left out (not of the body): 1" in told
    assert "nodes of no cell left out: 8" in told
    assert found.lost == 1


def test_legacy_numbers() -> None:
    """Whole numbers of one, four and eight bytes and single precision, in binary."""
    found = read_file_mesh(FILES / "vtk-legacy.vtk")
    assert found.cell_fields["m32"][0].tolist() == [[1.0, 2.0]]
    assert found.cell_fields["id64"][1].tolist() == found.cell_fields["u8"][1].tolist() == [[2.0]]
    assert found.point_fields["f32"][0].tolist() == found.node_numbers.tolist()


def test_appended_data() -> None:
    found = read_file_mesh(FILES / "vtk-appended.vtu")
    assert level(found).measure == pytest.approx(1920.0, rel=1e-14)
    assert np.abs(found.point_fields["u"] - 1e-3 * found.nodes).max() < 1e-15
