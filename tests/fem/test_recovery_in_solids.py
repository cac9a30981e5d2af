"""What patch recovery must reproduce exactly in solids and rods, in each region and on every surface."""

import weakref
from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy import sparse

from convergence.fem.element import element
from convergence.fem.held import Held
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem
from convergence.fem.recovery import (
    energy_error,
    exact_energy_error,
    nodal_values,
    recovered_stress,
)
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution

STEEL, SOFT = Material(210000.0, 0.3), Material(21000.0, 0.2)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("tetrahedron", "hexahedron", "wedge"), (1, 2)))
)
TWO_BLOCKS = Part(
    points={"a": (0, 0), "b": (30, 0), "c": (30, 30), "d": (0, 30), "e": (60, 0), "f": (60, 30)},
    blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c")),
    regions={"steel": (0,), "soft": (1,)},
)
BLOCK = SolidPart(TWO_BLOCKS, (("back", 0.0), ("front", 30.0)))
# displacement a_ij x_j + ½ b_ijk x_j x_k, arbitrary numbers, b symmetric in jk
RANDOM = np.random.default_rng(7)
LINEAR = 1e-3 * RANDOM.normal(size=(3, 3))
QUADRATIC = 1e-5 * RANDOM.normal(size=(3, 3, 3))
QUADRATIC = QUADRATIC + QUADRATIC.transpose(0, 2, 1)


def distorted(shape: Shape, degree: int, divisions: int) -> Mesh:
    """Every vertex moved by up to a seventh of a cell, those on the surface too; cells straight-sided."""
    counts = dict.fromkeys(BLOCK.divisions(size=None, divisions=1), divisions)
    level = mesh(BLOCK, counts, shape=shape, degree=degree)
    nodes = level.nodes + 30.0 / divisions / 7.0 * np.random.default_rng(3).uniform(-1, 1, level.nodes.shape)
    linear = element(shape, 1)
    vertices = nodes[:, level.cell_nodes[: linear.corners]]
    straight = nodes.copy()
    straight[:, level.cell_nodes] = np.einsum("dkm,kn->dnm", vertices, linear.shapes(level.element.nodes.T))
    level = replace(level, nodes=straight)
    level.require_positive()
    return level


def put_in(problem: Problem, level: Mesh, displacement: np.ndarray) -> Solution:
    """A solution of a given displacement (D, nodes): nothing is solved."""
    none = np.zeros(displacement.size)
    nothing = Held(np.array([], dtype=int), np.array([]), {}, None)
    matrix = sparse.csr_matrix((len(none), len(none)))
    return Solution(problem, level, matrix, none, displacement.T.ravel(), nothing)


def polynomial(x: np.ndarray, degree: int) -> tuple[np.ndarray, np.ndarray]:
    """Return displacement (3, n) and its gradient (3, 3, n)."""
    u, slope = LINEAR @ x, np.repeat(LINEAR[:, :, None], x.shape[1], axis=2)
    if degree == 2:
        u = u + 0.5 * np.einsum("ijk,jn,kn->in", QUADRATIC, x, x)
        slope = slope + np.einsum("ijk,kn->ijn", QUADRATIC, x)
    return u, slope


def hooke(slope: np.ndarray, material: Material) -> np.ndarray:
    """Return the stress (6, n) by Lamé's constants."""
    young, nu = material.young, material.poisson
    lame, shear = young * nu / ((1 + nu) * (1 - 2 * nu)), young / (2 * (1 + nu))
    trace = lame * np.trace(slope)
    both = shear * (slope + slope.transpose(1, 0, 2))
    direct = [trace + both[i, i] for i in range(3)]
    return np.array([*direct, both[0, 1], both[1, 2], both[2, 0]])


@EVERY_CELL
@pytest.mark.parametrize("divisions", [2, 4])
def test_a_polynomial_is_reproduced_in_each_region(shape: Shape, degree: int, divisions: int) -> None:
    """Displacement of degree p: stress of degree p − 1, exact in cells, so also on faces, edges, vertices.

    The stress jumps where the materials meet. With two cells a way no region has more than one inner vertex.
    """
    level = distorted(shape, degree, divisions)
    u, slope = polynomial(level.nodes, degree)
    materials = {"steel": STEEL, "soft": SOFT}
    solution = put_in(Problem("field", BLOCK, materials, (), (), "solid"), level, u)
    found = recovered_stress(solution)
    for region, material in materials.items():
        cells = level.regions[region]
        exact = hooke(slope, material)[:, level.cell_nodes[:, cells]]
        # moments are accepted down to an eigenvalue of 1e-7: 1e-9 of round-off may be left
        assert abs(found[:, :, cells] - exact).max() <= 1e-9 * abs(exact).max()
    assert energy_error(solution).sum() <= 1e-15 * exact_size(solution)


def exact_size(solution: Solution) -> float:
    """Return the squared energy norm of the element stress itself."""
    zero = Exact(lambda x, y, z: np.zeros((3, *x.shape)), lambda x, y, z: np.zeros((6, *x.shape)))
    blank = replace(solution, problem=replace(solution.problem, exact=zero))
    return float(exact_energy_error(blank).sum())


@EVERY_CELL
def test_a_uniform_stress_survives_one_cell_a_block(shape: Shape, degree: int) -> None:
    level = distorted(shape, degree, 1)
    u, slope = polynomial(level.nodes, 1)
    body = SolidPart(Part(TWO_BLOCKS.points, TWO_BLOCKS.blocks), BLOCK.planes)
    whole = replace(level, part=body, regions={"body": np.arange(level.cells)})
    solution = put_in(Problem("field", body, {"body": STEEL}, (), (), "solid"), whole, u)
    exact = hooke(slope, STEEL)
    assert abs(nodal_values(solution, recovered_stress(solution)) - exact).max() <= 1e-9 * abs(exact).max()


@pytest.mark.parametrize("wide", [2, 3, 5])
def test_one_layer_of_linear_hexahedra_keeps_what_varies_along_it(wide: int) -> None:
    """No sampling points above each other, no inner vertex: the polynomials lose z, but keep x and y.

    u = (x y, 0, 0) lies in bricks; nu = 0: stress xx = E y, xy = E x / 2, by hand.
    """
    plate = SolidPart(Part(TWO_BLOCKS.points, TWO_BLOCKS.blocks), (("back", 0.0), ("front", 2.0)))
    counts = {family: wide for family in plate.divisions(size=None, divisions=1)} | {-1: 1}
    level = mesh(plate, counts, shape="hexahedron", degree=1)
    x, y, _ = level.nodes
    plain = Material(200000.0, 0.0)
    problem = Problem("plate", plate, {"body": plain}, (), (), "solid")
    solution = put_in(problem, level, np.array([x * y, 0 * x, 0 * x]))
    found = nodal_values(solution, recovered_stress(solution))
    exact = np.array([200000.0 * y, 0 * x, 0 * x, 100000.0 * x, 0 * x, 0 * x])
    assert abs(found - exact).max() <= 1e-9 * abs(exact).max()


@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("divisions", [1, 4])
def test_a_polynomial_is_reproduced_in_a_rod(degree: int, divisions: int) -> None:
    """Two materials: u = 1e-3 x + 1e-5 x² at degree 2, stress E u' on each side of the joint."""
    part = RodPart({"a": (0.0,), "b": (30.0,), "c": (80.0,)}, {"steel": (0,), "soft": (1,)})
    level = mesh(part, {0: divisions, 1: 2 * divisions}, shape="line", degree=degree)
    x, bend = level.nodes, 1e-5 * (degree - 1)
    materials = {"steel": STEEL, "soft": SOFT}
    solution = put_in(Problem("rod", part, materials, (), (), "rod"), level, 1e-3 * x + bend * x**2)
    found = recovered_stress(solution)
    for region, material in materials.items():
        cells = level.regions[region]
        exact = material.young * (1e-3 + 2.0 * bend * x[0, level.cell_nodes[:, cells]])
        assert found[0][:, cells] == pytest.approx(exact, rel=1e-9)


def test_what_is_kept_of_a_solution_dies_with_it() -> None:
    """A finer level must not be solved with the matrices of the coarser one still in memory."""
    level = distorted("hexahedron", 1, 2)
    materials = {"steel": STEEL, "soft": SOFT}
    solution = put_in(Problem("field", BLOCK, materials, (), (), "solid"), level, 0.0 * level.nodes)
    energy_error(solution)
    assert recovered_stress(solution) is recovered_stress(solution)
    gone = weakref.ref(solution)
    del solution
    assert gone() is None
