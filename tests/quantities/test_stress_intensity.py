"""Stress intensity factors: published ones of a centre crack, both modes of an exact field, refusals."""

from dataclasses import replace
from functools import cache

import numpy as np
import pytest

from convergence.errors import Unsuitable
from convergence.fem.loads import BodyForce
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Problem, Support
from convergence.fem.solution import Solution, solve
from convergence.models.centre_cracked_plate import centre_cracked_plate
from convergence.quantities.stress_intensity import formal_order, stress_intensity

pytestmark = pytest.mark.slow

STEEL = Material(210000.0, 0.3)
TENSION, CRACK = 50.0, 10.0
# half height over half width -> F of a crack half as long as the plate is wide. H/W = 4 is Isida's 1.1867
# (1971, from memory); all three are dU/da of solutions with high degree and graded meshes, own computation
FACTORS = {4.0: 1.186665, 2.0: 1.187635, 1.0: 1.333712}
HALF = {"tip": "tip", "ahead": (1.0, 0.0), "symmetric": True}


@cache
def plates(height: float, kind: str, shape: str, degree: int, levels: int) -> tuple[Solution, ...]:
    problem = centre_cracked_plate(
        half_width=20.0,
        half_height=20.0 * height,
        half_crack=CRACK,
        tension=TENSION,
        kind=kind,  # type: ignore[arg-type]
        material=STEEL,
    )
    coarsest = problem.part.divisions(size=None, divisions=4)
    return tuple(
        solve(problem, mesh(problem.part, finer(coarsest, 2.0, n), shape=shape, degree=degree))  # type: ignore[arg-type]
        for n in range(levels)
    )


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
@pytest.mark.parametrize("degree", [1, 2])
def test_published_factors_of_a_centre_crack(shape: str, degree: int) -> None:
    """Order 2 λ = 1 on uniform meshes for both degrees (Szabó & Babuška 1991); extrapolated with it: F.

    The order is approached from below, so the extrapolated value keeps a share of the last change.
    """
    solutions = plates(4.0, "plane stress", shape, degree, 4)
    exact = FACTORS[4.0] * TENSION * np.sqrt(np.pi * CRACK)
    values = np.array([stress_intensity(s, radius=8.0, **HALF) for s in solutions])
    errors = exact - values
    assert np.log2(errors[-2] / errors[-1]) == pytest.approx(1.0, abs=0.05)
    assert formal_order(degree, shape, {}) == 2.0 * degree
    limit = 2.0 * values[-1] - values[-2]
    assert abs(limit - exact) < 0.05 * (values[-1] - values[-2])


@pytest.mark.parametrize("height", [2.0, 1.0])
@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_factors_of_shorter_plates(height: float, kind: str) -> None:
    """The same in both kinds, as loads alone are given (Michell); 5e-4 is left after extrapolation."""
    values = [
        stress_intensity(s, radius=6.0, **HALF) for s in plates(height, kind, "quadrilateral", 2, 4)[-2:]
    ]
    exact = FACTORS[height] * TENSION * np.sqrt(np.pi * CRACK)
    assert 2.0 * values[-1] - values[-2] == pytest.approx(exact, rel=5e-4)


def test_the_radius_does_not_matter_in_the_limit() -> None:
    """Path independence: radii differ by less than the error, and by less on every finer mesh."""
    solutions = plates(4.0, "plane stress", "quadrilateral", 2, 4)
    exact = FACTORS[4.0] * TENSION * np.sqrt(np.pi * CRACK)
    found = np.array([[stress_intensity(s, radius=r, **HALF) for r in (4.0, 6.0, 8.0)] for s in solutions])
    spread, error = np.ptp(found, axis=1), abs(found[:, -1] - exact)
    assert np.all(spread < error)
    assert np.all(np.diff(spread) < 0.0)


ONE, TWO = 200.0, 120.0


def tip_field(kappa: float, shear: float, r: np.ndarray, angle: np.ndarray) -> np.ndarray:
    """Displacement (2, ...) of both modes, Anderson, Fracture Mechanics, table 2.2, from memory."""
    c, s = np.cos(0.5 * angle), np.sin(0.5 * angle)
    opening = ONE * np.array([c * (kappa - 1.0 + 2.0 * s**2), s * (kappa + 1.0 - 2.0 * c**2)])
    sliding = TWO * np.array([s * (kappa + 1.0 + 2.0 * c**2), -c * (kappa - 1.0 - 2.0 * s**2)])
    return np.asarray((opening + sliding) * np.sqrt(0.5 * r / np.pi) / (2.0 * shear))


def slit(turned: float, kind: str) -> Problem:
    """A square turned by an angle, with a crack from the middle of its left side to its centre.

    The outer edges move as the field of both modes does; the faces are free. Both faces lie on one line, so
    each half of the outside has its own branch of the angle.
    """
    turn = np.array([[np.cos(turned), -np.sin(turned)], [np.sin(turned), np.cos(turned)]])
    kappa, shear = STEEL.kappa(kind), STEEL.shear_modulus  # type: ignore[arg-type]

    def moved(half: float, x: np.ndarray, y: np.ndarray) -> np.ndarray:
        along, aside = np.einsum("ji,j...->i...", turn, np.array([x, y]))
        angle = half * np.abs(np.arctan2(aside, along))
        return np.einsum("ij,j...->i...", turn, tip_field(kappa, shear, np.hypot(x, y), angle))

    plain = {
        "tip": (0.0, 0.0), "right": (10.0, 0.0), "top": (0.0, 10.0), "bottom": (0.0, -10.0),
        "upper_face": (-10.0, 0.0), "lower_face": (-10.0, 0.0), "a": (10.0, 10.0), "b": (-10.0, 10.0),
        "c": (-10.0, -10.0), "d": (10.0, -10.0),
    }  # fmt: skip
    supports = tuple(
        Support(
            name,
            x=lambda x, y, h=half: moved(h, x, y)[0],
            y=lambda x, y, h=half: moved(h, x, y)[1],
            boundary=name,
        )
        for name, half in (("above", 1.0), ("below", -1.0))
    )
    part = Part(
        points={name: tuple(float(v) for v in turn @ place) for name, place in plain.items()},  # type: ignore[misc]
        blocks=(
            ("tip", "right", "a", "top"),
            ("tip", "top", "b", "upper_face"),
            ("tip", "lower_face", "c", "bottom"),
            ("tip", "bottom", "d", "right"),
        ),
        boundaries={
            "above": (("right", "a"), ("a", "top"), ("top", "b"), ("b", "upper_face")),
            "below": (("lower_face", "c"), ("c", "bottom"), ("bottom", "d"), ("d", "right")),
            "faces": (("upper_face", "tip"), ("tip", "lower_face")),
        },
    )
    return Problem("slit", part, {"body": STEEL}, supports, (), kind=kind, thickness=7.0)  # type: ignore[arg-type]


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_both_modes_of_an_inclined_crack(kind: str) -> None:
    """Order 1 to the factors that were put in; extrapolated with it, to a twentieth of the last change."""
    turned = np.radians(25.0)
    problem = slit(float(turned), kind)
    coarsest = problem.part.divisions(size=None, divisions=4)
    levels = [mesh(problem.part, finer(coarsest, 2.0, n), shape="quadrilateral", degree=2) for n in range(4)]
    solutions = [solve(problem, level) for level in levels]
    ahead = (float(np.cos(turned)), float(np.sin(turned)))
    for mode, exact in (("I", ONE), ("II", TWO)):
        values = [stress_intensity(s, tip="tip", ahead=ahead, radius=7.0, mode=mode) for s in solutions]  # type: ignore[arg-type]
        errors = exact - np.array(values)
        assert np.log2(errors[-2] / errors[-1]) == pytest.approx(1.0, abs=0.05)
        assert abs(2.0 * values[-1] - values[-2] - exact) < 0.05 * abs(values[-1] - values[-2])


def test_what_is_refused() -> None:
    solution = plates(4.0, "plane stress", "quadrilateral", 2, 4)[0]
    for radius in (10.5, 15.0):  # the ligament is 10 long, its end the only node of the side within 10.5
        with pytest.raises(Unsuitable, match="reaches another boundary"):
            stress_intensity(solution, radius=radius, **HALF)
    with pytest.raises(Unsuitable, match="symmetry plane"):
        stress_intensity(solution, radius=8.0, mode="II", **HALF)
    with pytest.raises(Unsuitable, match="not all 0"):
        stress_intensity(solution, tip="tip", ahead=(0.0, 0.0), radius=8.0)
    heavy = replace(solution.problem, loads=(BodyForce((0.0, -1.0)),))
    with pytest.raises(Unsuitable, match="without body force"):
        stress_intensity(replace(solution, problem=heavy), radius=8.0, **HALF)
    ring = replace(solution.problem, kind="axisymmetric")
    with pytest.raises(Unsuitable, match="plane stress or plane strain"):
        stress_intensity(replace(solution, problem=ring), radius=8.0, **HALF)
