"""Loads on half-planes and discs: stress away from a point force converges, displacement and energy do not.

Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 36 (point force, Flamant), 37 (strip), 41 (disc),
from memory. Units: E = 1, force 1, depth 1.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.loads import Load, PointForce, Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part, arc, graded
from convergence.fem.problem import Problem, Support
from convergence.intervals import interval
from convergence.quantities.stress import stress

MATERIAL = Material(1.0, 0.3)
SIDE = 20.0
SHAPES = pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])


def half_plane(load: Load) -> Problem:
    """Return the right half of a block under a load on its top at x = 0; the point "below" is at depth 1."""
    points = {
        "top": (0.0, 0.0), "edge": (1.0, 0.0), "right": (SIDE, 0.0),
        "below": (0.0, -1.0), "inner": (1.0, -1.0), "side": (SIDE, -1.0),
        "base": (0.0, -SIDE), "foot": (1.0, -SIDE), "corner": (SIDE, -SIDE),
    }  # fmt: skip
    growing = (
        ("edge", "right"),
        ("inner", "side"),
        ("foot", "corner"),
        ("below", "base"),
        ("inner", "foot"),
        ("side", "corner"),
    )
    part = Part(
        points,
        (
            ("below", "inner", "edge", "top"),
            ("inner", "side", "right", "edge"),
            ("base", "foot", "inner", "below"),
            ("foot", "corner", "side", "inner"),
        ),
        {(a, b): graded(points[a], points[b], 40.0) for a, b in growing},
        {
            "pressed": (("edge", "top"),),
            "symmetry": (("top", "below"), ("below", "base")),
            "base": (("base", "foot"), ("foot", "corner")),
        },
        weights={("edge", "right"): 6.0, ("below", "base"): 6.0, ("top", "edge"): 1.0, ("top", "below"): 1.0},
    )
    supports = (Support("symmetry", x=0.0, boundary="symmetry"), Support("base", y=0.0, boundary="base"))
    return Problem("Half-plane", part, {"body": MATERIAL}, supports, (load,), "plane strain")


def disc() -> Problem:
    """Return a quarter of a disc of diameter 1 between two unit forces along y."""
    r, near, half = 0.5, 0.25, 0.5 * float(np.sqrt(0.5))
    points = {
        "centre": (0.0, 0.0), "x": (near, 0.0), "xy": (0.2, 0.2), "y": (0.0, near),
        "right": (r, 0.0), "slant": (half, half), "top": (0.0, r),
    }  # fmt: skip
    part = Part(
        points,
        (("centre", "x", "xy", "y"), ("x", "right", "slant", "xy"), ("y", "xy", "slant", "top")),
        {
            ("right", "slant"): arc((0.0, 0.0), r, 0.0, 45.0),
            ("slant", "top"): arc((0.0, 0.0), r, 45.0, 90.0),
        },
        {"along_x": (("centre", "x"), ("x", "right")), "along_y": (("top", "y"), ("y", "centre"))},
    )
    supports = (Support("along_x", y=0.0, boundary="along_x"), Support("along_y", x=0.0, boundary="along_y"))
    return Problem("Disc", part, {"body": MATERIAL}, supports, (PointForce("top", (0.0, -0.5)),))


@pytest.mark.slow
@SHAPES
@pytest.mark.parametrize("degree", [1, 2])
def test_energy_and_displacement_of_a_point_force_have_no_limit(climb: Any, shape: str, degree: int) -> None:
    """Flamant: u = -(2 (1 - nu²) / pi E) ln r + constant. A cell half as large adds that times ln 2.

    The field around the force is the same on every mesh but for its scale, so each step adds the same.
    """
    solutions = climb(half_plane(PointForce("top", (0.0, -0.5))), shape, degree, 1, 6 - degree)
    under = [-solution.displacement[1, solution.mesh.vertices["top"]] for solution in solutions]
    energies = np.array([solution.energy for solution in solutions])
    step = 2.0 * (1.0 - 0.3**2) / np.pi * np.log(2.0)
    assert np.diff(under)[-1] == pytest.approx(step, rel=0.01)
    assert np.diff(energies)[-1] == pytest.approx(0.25 * step, rel=0.01)
    sizes = np.array([solution.mesh.h for solution in solutions])
    found = interval(sizes, energies, kind="energy", degree=degree)
    assert found.growth != "excluded" and found.order_low < 0.0


@pytest.mark.slow
@pytest.mark.parametrize(
    ("load", "force", "wanted"),
    [
        (PointForce("top", (0.0, -0.5)), 1.0, -2.0 / np.pi),
        (Pressure("pressed", 1.0), 2.0, -(0.5 * np.pi + 1.0) / np.pi),
    ],
    ids=["point", "strip"],
)
def test_stress_below_a_load(climb: Any, load: Load, force: float, wanted: float) -> None:
    """At depth 1: -0.6366 below a unit force, -0.8183 below a strip of half-width 1 under unit pressure.

    The block's sides and base add a smooth field of the size force / SIDE. Its syy and, by equilibrium, the
    slope of syy with depth vanish on the free surface, so at depth 1 it is of the size force / SIDE³.
    """
    solutions = climb(half_plane(load), "quadrilateral", 2, 1, 4)
    found = [stress(s, at="below", component="yy").value for s in solutions]
    assert abs(found[-1] - wanted) <= abs(found[-1] - found[-2]) + force / SIDE**3
    assert found[-1] == pytest.approx(wanted, rel=2e-3)


@SHAPES
def test_disc_in_diametral_compression(climb: Any, shape: str) -> None:
    """2 P / pi D t across and -6 P / pi D t along the force, 0.6366 and -1.9099 here, in the centre."""
    solutions = climb(disc(), shape, 2, 2, 4)
    for component, wanted in (("xx", 2.0 / np.pi), ("yy", -6.0 / np.pi)):
        found = [stress(s, at="centre", component=component).value for s in solutions]  # type: ignore[arg-type]
        assert abs(found[-1] - wanted) <= np.abs(np.diff(found[-3:])).max()  # they may swing
        assert found[-1] == pytest.approx(wanted, rel=1e-3)
