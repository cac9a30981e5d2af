"""A block on an elastic bed against closed forms, and an arm with a force on one point."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.corners.singular_corners import singular_corners
from convergence.fem.element import Shape
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution
from convergence.models.loaded_block import loaded_block
from convergence.models.tapered_arm import tapered_arm
from convergence.quantities.mean_displacement import mean_displacement
from convergence.quantities.reaction_force import reaction_force

Climb = Callable[..., list[Solution]]
STEEL = Material(210000.0, 0.3)
ROUNDING = 1e-10  # 1e-16 times a condition number below 1e6
SOLID_SHAPES = pytest.mark.parametrize("shape", ["tetrahedron", "wedge", "hexahedron"])


def bedded(bedding: float) -> Problem:
    return loaded_block(
        patch_half_x=60.0,
        patch_half_y=40.0,
        half_width=200.0,
        depth=40.0,
        probe_depth=20.0,
        pressure=20.0,
        bottom="bedded",
        bedding=bedding,
        material=STEEL,
    )


@SOLID_SHAPES
def test_uniform_pressure_on_a_bed(climb: Climb, shape: Shape) -> None:
    """Uniaxial stress: the bottom sinks by pressure / bedding, the top by pressure depth / E more."""
    problem = bedded(500.0)
    everywhere = replace(problem, loads=(Pressure("patch", 20.0), Pressure("top", 20.0)))
    (solution,) = climb(everywhere, shape, 1, 1, 1)
    x, y, z = solution.mesh.nodes
    sinking = 20.0 / 500.0 + 20.0 / 210000.0 * (z + 40.0)
    spread = 0.3 * 20.0 / 210000.0
    wanted = np.array([spread * x, spread * y, -sinking])
    assert np.abs(solution.displacement - wanted).max() < ROUNDING * sinking.max()


@SOLID_SHAPES
@pytest.mark.parametrize("bedding", [0.5, 500.0])
def test_the_bed_carries_the_load(climb: Climb, shape: Shape, bedding: float) -> None:
    """Equilibrium, on every mesh: the bed's force is the load, so its mean sinking is known."""
    load = 20.0 * 60.0 * 40.0
    for solution in climb(bedded(bedding), shape, 1, 1, 2):
        assert reaction_force(solution, support="bottom", component="z") == pytest.approx(load, rel=1e-8)
        sinking = mean_displacement(solution, boundary="bottom", component="z")
        assert sinking == pytest.approx(-load / (bedding * 200.0**2), rel=1e-8)


def test_a_soft_bed_lets_the_block_sink_as_a_whole(climb: Climb) -> None:
    """A block ten million times stiffer than its bed moves as a rigid body."""
    (solution,) = climb(bedded(1e-4), "hexahedron", 1, 1, 1)
    moved = solution.displacement[2]
    assert np.ptp(moved) < 1e-3 * np.abs(moved).max()


def test_a_bed_leaves_the_edges_regular() -> None:
    assert singular_corners(bedded(500.0)) == ()


def test_hook(climb: Climb) -> None:
    """The force is in equilibrium with the root, its point is singular; without it the point is not there."""
    problem = tapered_arm(tip_shear=0.0, hook_force=-8000.0, material=STEEL)
    hook = next(corner for corner in singular_corners(problem) if corner.sides == ("point", "force"))
    assert (hook.name, hook.exponent) == ("tip_lower", 0.0)
    assert "tip_lower" not in {corner.name for corner in singular_corners(tapered_arm(material=STEEL))}
    (solution,) = climb(problem, "triangle", 2, 1, 1)
    assert solution.reaction("root") == pytest.approx([0.0, 8000.0, 8000.0 * 1200.0], abs=1e-8 * 9.6e6)
