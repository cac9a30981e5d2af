"""Section moments, linearised and hot-spot stresses of plane parts against exact fields."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence import rooms
from convergence.corner import Corner
from convergence.errors import Unsuitable
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.solution import Solution, solve
from convergence.quantities.hot_spot_stress import covers, extrapolation, hot_spot_stress
from convergence.quantities.linearised_stress import linearised_stress
from convergence.quantities.section_force import section_force
from convergence.quantities.section_moment import section_moment

pytestmark = pytest.mark.slow

# curved bar: radii 150 and 250, force 10000 outward on the free end, which is the x axis
INNER, OUTER, FORCE = 150.0, 250.0, 10000.0
# thick cylinder: Lamé, bore 30, outer radius 45, pressure 21
BORE, RIM, PRESSURE = 30.0, 45.0, 21.0


def ray(angle: float, radius: float) -> tuple[float, float]:
    return float(radius * np.cos(np.radians(angle))), float(radius * np.sin(np.radians(angle)))


@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_the_moment_in_a_curved_bar(
    recovery: str,
    element: tuple[str, int],
    ladder_of: Callable,
    measured: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """Statics: the outward force on the line y = 0 opens the bar with the arm r sin 40°, r = 200.

    That is tension on the inside, where the section starts. Recovered stress of linear triangles is one-sided
    along both edges of the bar: only its size is tested.
    """
    shape, degree = element
    ladder = ladder_of("curved_bar", shape, degree, 2, 4)
    arm = 0.5 * (INNER + OUTER) * np.sin(np.radians(40.0))
    line = {"start": ray(40.0, INNER), "end": ray(40.0, OUTER), "recovery": recovery}
    moments = measured("section_moment", ladder, **line)
    errors = abs(moments - FORCE * arm)
    promised = formal("section_moment", degree, shape, recovery=recovery)
    if (shape, degree, recovery) != ("triangle", 1, "recovered"):
        assert np.log2(errors[0] / errors[-1]) / 3.0 > promised - 0.4
    share = 0.05 if degree == 1 else 1e-3  # (h/depth)^p with 16 cells over the depth: 1/16 and 1/256
    assert errors[-1] < share * FORCE * arm


def test_the_sign_of_a_section_moment(ladder_of: Callable) -> None:
    """Tension at `start` is positive; the other direction exchanges start and end, so the sign."""
    solution = ladder_of("curved_bar", "quadrilateral", 2, 2, 4)[2]
    outside, inside = ray(40.0, OUTER), ray(40.0, INNER)
    one = section_moment(solution, start=outside, end=inside)
    assert section_moment(solution, start=inside, end=outside) == pytest.approx(-one, rel=1e-9)
    force = section_force(solution, start=inside, end=outside, component="x")
    back = section_force(solution, start=outside, end=inside, component="x")
    assert force == pytest.approx(-back, rel=1e-9)
    with pytest.raises(Unsuitable, match="another point"):
        section_moment(solution, start=inside, end=inside)


def lame_bending() -> tuple[float, float]:
    """Membrane and bending of the hoop stress q + c/r² from the bore outward, integrated by hand."""
    q = PRESSURE * BORE**2 / (RIM**2 - BORE**2)
    c, t = q * RIM**2, RIM - BORE
    bending = 6.0 * c / t**2 * (0.5 * (BORE + RIM) * (1 / BORE - 1 / RIM) - np.log(RIM / BORE))
    return PRESSURE * BORE / t, bending


@pytest.mark.parametrize("share", ["membrane", "bending"])
def test_the_linearised_hoop_stress_of_a_thick_cylinder(
    share: str,
    element: tuple[str, int],
    ladder_of: Callable,
    measured: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """Lamé; the membrane stress is pressure × bore / wall for every distribution.

    The line crosses cells anywhere, so the order scatters: to 0.4.
    """
    shape, degree = element
    ladder = ladder_of("thick_cylinder", shape, degree, 2, 4)
    membrane, bending = lame_bending()
    exact = {"membrane": membrane, "bending": bending}[share]
    line = {"start": ray(33.0, BORE), "end": ray(33.0, RIM), "component": "first_principal", "share": share}
    errors = abs(measured("linearised_stress", ladder, **line) - exact)
    assert order_of(ladder, errors)[-1] > formal("linearised_stress", degree, shape) - 0.4
    assert errors[-1] < (1.0 / 16.0 if degree == 1 else 1.0 / 256.0) * membrane, "16 cells over the wall"


def test_conventions_of_linearised_stress(ladder_of: Callable) -> None:
    """Bending changes its sign at the other end; the stress along the line has none unless asked for.

    Lamé's radial stress is q − c/r²: its bending is minus that of the hoop stress.
    """
    solution = ladder_of("thick_cylinder", "quadrilateral", 2, 2, 4)[-1]
    line = {"start": "bore_x", "end": "outer_x"}
    back = {"start": "outer_x", "end": "bore_x"}
    there = linearised_stress(solution, **line, share="bending", component="yy")
    assert linearised_stress(solution, **back, share="bending", component="yy") == pytest.approx(-there)
    assert linearised_stress(solution, **line, share="bending", component="xx") == pytest.approx(
        0.0, abs=1e-12
    )
    radial = linearised_stress(solution, **line, share="bending", component="xx", bending="all")
    assert radial == pytest.approx(-there, rel=1e-3)
    parts = [
        [
            linearised_stress(solution, **line, share=share, component=name)
            for name in ("xx", "yy", "zz", "xy")
        ]
        for share in ("membrane", "bending")
    ]
    xx, yy, zz, xy = np.sum(parts, axis=0)
    mises = np.sqrt(0.5 * ((xx - yy) ** 2 + (yy - zz) ** 2 + (zz - xx) ** 2) + 3.0 * xy**2)
    assert linearised_stress(solution, **line) == pytest.approx(mises, rel=1e-12)


def test_published_example_of_linearisation() -> None:
    """Ratio 3, pressure 1: membrane p a/t = 0.5, bending 0.396091762873 (own computation from Lamé).

    Quadratic cells, 16 over a wall of two bores: (1/8)^3 = 2e-3 bounds the relative error.
    """
    steel = Material(210000.0, 0.3)
    problem = rooms.find("models", "thick_cylinder")(
        inner_radius=3.0, outer_radius=9.0, pressure=1.0, material=steel
    )
    counts = problem.part.divisions(size=None, divisions=16)
    solution = solve(problem, mesh(problem.part, counts, shape="quadrilateral", degree=2))
    line = {"start": "bore_x", "end": "outer_x", "component": "yy"}
    assert linearised_stress(solution, **line, share="membrane") == pytest.approx(0.5, rel=2e-3)
    assert linearised_stress(solution, **line, share="bending") == pytest.approx(0.396091762873, rel=2e-3)


PRINTED = [  # factors of the recommendations (Hobbacher, from memory), to two decimals
    ((0.4, 1.0), (1.67, -0.67)),
    ((0.4, 0.9, 1.4), (2.52, -2.24, 0.72)),
    ((0.5, 1.5), (1.50, -0.50)),
]


@pytest.mark.parametrize(("distances", "factors"), PRINTED)
def test_the_factors_of_the_recommendations(distances: tuple, factors: tuple) -> None:
    assert extrapolation(np.array(distances)) == pytest.approx(factors, abs=0.005)


@pytest.mark.parametrize("rule", ["fine", "coarse", "quadratic"])
def test_hot_spot_stress_of_a_linear_surface_stress(
    rule: str, element: tuple[str, int], ladder_of: Callable, measured: Callable, formal: Callable
) -> None:
    """The cantilever's surface stress −F (L − x) D / 2I is linear: every rule gives the stress itself."""
    shape, degree = element
    ladder = ladder_of("exact_cantilever", shape, degree, 2, 4)
    part, exact = ladder[0].problem.part, ladder[0].problem.exact
    length, half = max(x for x, _ in part.points.values()), max(y for _, y in part.points.values())
    toe = (0.25 * length, half)
    true = float(exact.stress(np.array(toe[0]), np.array(toe[1]))[0])
    arguments = {"toe": toe, "along": (1.0, 0.0), "thickness": 0.8 * half, "rule": rule}
    errors = abs(measured("hot_spot_stress", ladder, **arguments) - true)
    first = measured("hot_spot_stress", ladder, **arguments, component="first_principal")
    assert first[-1] == pytest.approx(max(true, 0.0), abs=4.0 * errors[-1] + 1e-6 * abs(true))
    if element != ("triangle", 1):
        assert errors[-1] <= errors[0] * 0.125 ** (formal("hot_spot_stress", degree, shape) - 0.5) + 1e-9
    assert errors[-1] < (0.1 if degree == 1 else 1e-3) * abs(true)


def test_where_a_hot_spot_stress_is_read(ladder_of: Callable) -> None:
    """At 0.4 t and 1.0 t: a corner there counts, one at the toe itself does not; off the part is refused."""
    solution: Solution = ladder_of("exact_cantilever", "quadrilateral", 2, 2, 4)[0]
    part = solution.problem.part
    length, half = max(x for x, _ in part.points.values()), max(y for _, y in part.points.values())
    arguments = {"toe": (0.25 * length, half), "along": (2.0, 0.0), "thickness": half}
    for distance, reached in ((0.0, False), (0.4, True), (1.0, True), (0.9, False)):
        place = (0.25 * length + distance * half, half)
        corner = Corner("c", (place,), (), 270.0, ("free", "free"), 0.5)
        assert covers(part, corner, arguments) == reached
    with pytest.raises(Unsuitable, match="a place on the part"):
        hot_spot_stress(solution, toe=(length, half), along=(1.0, 0.0), thickness=half)
    with pytest.raises(Unsuitable, match="not all 0"):
        hot_spot_stress(solution, toe=(0.0, half), along=(0.0, 0.0), thickness=half)
