"""What patch recovery must reproduce exactly, and what it must keep apart."""

from collections.abc import Callable
from itertools import product
from typing import Any

import numpy as np
import pytest
from scipy import sparse

from convergence.fem import patches
from convergence.fem.held import Held
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.recovery import (
    element_energy,
    energy_error,
    nodal_values,
    recovered_at,
    recovered_stress,
)
from convergence.fem.solution import Solution, solve
from convergence.fem.stress import direct_stress

STEEL = Material(210000.0, 0.3)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)


def rectangle(turn: float = 0.0, regions: dict[str, tuple[int, ...]] | None = None) -> Part:
    """Two blocks, 60 x 40 and 60 x 40, side by side, turned about the origin (degrees)."""
    c, s = np.cos(np.radians(turn)), np.sin(np.radians(turn))
    flat = {"a": (0, 0), "b": (60, 0), "c": (60, 40), "d": (0, 40), "e": (120, 0), "f": (120, 40)}
    return Part(
        points={name: (c * x - s * y, s * x + c * y) for name, (x, y) in flat.items()},
        blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c")),
        boundaries={
            "left": (("d", "a"),),
            "right": (("e", "f"),),
            "rim": (("a", "b"), ("b", "e"), ("e", "f"), ("f", "c"), ("c", "d"), ("d", "a")),
        },
        regions=regions or {},
    )


def cut(part: Part, shape: str, degree: int, divisions: int) -> Mesh:
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def with_field(level: Mesh, degree: int, materials: dict[str, Material] | None = None) -> Solution:
    """A solution whose displacement is a polynomial of the degree, put in by hand: nothing is solved."""
    x, y = level.nodes
    u = np.array([2e-3 * x - 1e-3 * y, 3e-3 * x + 1e-3 * y])
    if degree == 2:
        u += np.array([1e-5 * x**2 - 3e-5 * x * y + 2e-5 * y**2, -2e-5 * x**2 + 1e-5 * x * y + 3e-5 * y**2])
    problem = Problem("field", level.part, materials or {"body": STEEL}, (), ())
    none = np.zeros(2 * level.nodes.shape[1])
    nothing = Held(np.array([], dtype=int), np.array([]), {}, None)
    matrix = sparse.csr_matrix((len(none), len(none)))
    return Solution(problem, level, matrix, none, u.T.ravel(), nothing)


def stress_of_field(level: Mesh, degree: int, material: Material = STEEL) -> np.ndarray:
    """Hooke's law by hand at the nodes, plane stress."""
    x, y = level.nodes
    xx, yy, shear = 2e-3 + 0 * x, 1e-3 + 0 * x, 2e-3 + 0 * x
    if degree == 2:
        xx = xx + 2e-5 * x - 3e-5 * y
        yy = yy + 1e-5 * x + 6e-5 * y
        shear = shear + (-3e-5 * x + 4e-5 * y) + (-4e-5 * x + 1e-5 * y)
    young, nu = material.young, material.poisson
    scale = young / (1 - nu**2)
    return np.array([scale * (xx + nu * yy), scale * (yy + nu * xx), 0 * x, young / (2 * (1 + nu)) * shear])


@EVERY_CELL
@pytest.mark.parametrize("turn", [0.0, 20.0, 45.0])
@pytest.mark.parametrize("divisions", [3, 5])
def test_a_polynomial_stress_is_reproduced(shape: str, degree: int, turn: float, divisions: int) -> None:
    """Displacement of degree p: stress of degree p − 1 at every node, corners too, however the part lies."""
    level = cut(rectangle(turn), shape, degree, divisions)
    solution = with_field(level, degree)
    exact = stress_of_field(level, degree)
    found = nodal_values(solution, recovered_stress(solution))
    assert abs(found - exact).max() <= 1e-9 * abs(exact).max()
    stress = direct_stress(solution, np.array([[0.3], [0.3]]))[:, :, 0]
    compliance = STEEL.compliance("plane stress")
    norm = np.einsum("sm,st,tm,m->", stress, compliance, stress, level.cell_measures)
    assert energy_error(solution).sum() <= 1e-15 * norm


@EVERY_CELL
@pytest.mark.parametrize("divisions", [1, 2])
def test_a_uniform_stress_survives_patches_that_are_too_small(
    shape: str, degree: int, divisions: int
) -> None:
    """Two or eight cells do not determine every term; a constant they do."""
    level = cut(rectangle(), shape, degree, divisions)
    solution = with_field(level, 1)
    exact = stress_of_field(level, 1)
    assert abs(nodal_values(solution, recovered_stress(solution)) - exact).max() <= 1e-9 * abs(exact).max()


@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("triangle", 2), ("quadrilateral", 1)])
@pytest.mark.parametrize("turn", [20.0, 44.0, 45.0])
def test_recovery_does_not_depend_on_the_axes(shape: str, degree: int, turn: float) -> None:
    """The same bending of the same part, turned: invariants agree to round-off.

    Not so on quadrilaterals of degree 2, whose patches fit x² y, x y² and x² y² along the axes.
    """

    def hot(angle: float) -> np.ndarray:
        part = rectangle(angle)
        c, s = np.cos(np.radians(angle)), np.sin(np.radians(angle))
        supports = (Support("left", x=0.0, y=0.0, boundary="left"),)
        load = Traction("right", (-30.0 * s, 30.0 * c))
        problem = Problem("turned", part, {"body": STEEL}, supports, (load,))
        solution = solve(problem, cut(part, shape, degree, 4))
        xx, yy, _, xy = nodal_values(solution, recovered_stress(solution))
        return np.array([xx + yy, (xx - yy) ** 2 + 4.0 * xy**2])

    level, turned = hot(0.0), hot(turn)
    assert abs(turned - level).max() <= 1e-8 * abs(level).max()


@EVERY_CELL
def test_regions_are_never_mixed(shape: str, degree: int) -> None:
    """Two materials, ten to one: at the border each side keeps its own stress, exactly; none is averaged."""
    soft = Material(21000.0, 0.3)
    part = rectangle(regions={"steel": (0,), "soft": (1,)})
    level = cut(part, shape, degree, 3)
    solution = with_field(level, degree, {"steel": STEEL, "soft": soft})
    at_cells = recovered_stress(solution)
    dofs = level.cell_nodes
    for region, material in (("steel", STEEL), ("soft", soft)):
        cells = level.regions[region]
        exact = stress_of_field(level, degree, material)[:, dofs[:, cells]]
        assert abs(at_cells[:, :, cells] - exact).max() <= 1e-9 * abs(exact).max()
    border = np.flatnonzero(np.isclose(level.nodes[0], 60.0))
    assert len(border) >= 4
    for node in border:
        sides = at_cells[0][dofs == node]
        assert sides.max() == pytest.approx(10.0 * sides.min(), rel=1e-9)


@EVERY_CELL
def test_two_materials_in_series(shape: str, degree: int) -> None:
    """Nu = 0: uniform stress through both, the strain jumps. Energy s² A L / 2 E of each part by hand."""
    part = rectangle(regions={"steel": (0,), "soft": (1,)})
    materials = {"steel": Material(200000.0, 0.0), "soft": Material(20000.0, 0.0)}
    supports = (Support("left", x=0.0, boundary="left"), Support("pin", y=0.0, point="a"))
    problem = Problem("series", part, materials, supports, (Traction("right", (50.0, 0.0)),), thickness=2.0)
    solution = solve(problem, cut(part, shape, degree, 2))
    stress = recovered_stress(solution)
    assert abs(stress[0] - 50.0).max() < 1e-8 and abs(stress[1:]).max() < 1e-8
    halves = [50.0**2 / young * 60.0 * 40.0 * 2.0 for young in (200000.0, 20000.0)]
    for region, twice_energy in zip(("steel", "soft"), halves, strict=True):
        assert element_energy(solution, solution.mesh.regions[region]).sum() == pytest.approx(twice_energy)
    assert solution.energy == pytest.approx(0.5 * sum(halves))
    assert solution.displacement[0].max() == pytest.approx(50.0 * 60.0 * (1 / 200000.0 + 1 / 20000.0))


@EVERY_CELL
def test_fitting_in_chunks_or_at_once(shape: str, degree: int, monkeypatch: pytest.MonkeyPatch) -> None:
    solution = with_field(cut(rectangle(), shape, degree, 4), degree)
    whole = recovered_stress(solution).copy()
    monkeypatch.setattr(patches, "VALUES", 300)
    again = with_field(solution.mesh, degree)
    assert abs(recovered_stress(again) - whole).max() <= 1e-12 * abs(whole).max()


@EVERY_CELL
def test_recovered_stress_at_places_is_interpolated(
    shape: str, degree: int, as_skfem: Callable[[Mesh], Any]
) -> None:
    level = cut(rectangle(20.0), shape, degree, 3)
    solution = with_field(level, degree)
    cells, local = np.arange(level.cells), np.full((2, level.cells, 1), 0.25)
    x, y = as_skfem(level).map(local, cells)[:, :, 0]
    found = recovered_at(solution, cells, local)[0, :, 0]
    if degree == 1:
        exact = np.full(level.cells, STEEL.young / 0.91 * (2e-3 + 0.3 * 1e-3))
    else:
        strain = 2e-3 + 2e-5 * x - 3e-5 * y + 0.3 * (1e-3 + 1e-5 * x + 6e-5 * y)
        exact = STEEL.young / 0.91 * strain
    assert found == pytest.approx(exact, rel=1e-9)
