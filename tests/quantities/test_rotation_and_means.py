"""Rotation, means over regions, work and potential energy on exact fields."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.corner import Corner
from convergence.errors import Unsuitable
from convergence.fem.solution import Solution
from convergence.quantities.mean_displacement import mean_displacement
from convergence.quantities.potential_energy import potential_energy
from convergence.quantities.region_stress import region_stress
from convergence.quantities.rotation import covers, rotation
from convergence.quantities.strain_energy import strain_energy
from convergence.quantities.work_of_load import covers as work_covers
from convergence.quantities.work_of_load import work_of_load

pytestmark = pytest.mark.slow

# thick cylinder: Lamé, bore 30, outer radius 45, pressure 21
BORE, RIM, PRESSURE = 30.0, 45.0, 21.0
SCALE = PRESSURE * BORE**2 / (RIM**2 - BORE**2)


def sides(solution: Solution) -> tuple[float, float]:
    """Length and half depth of the cantilever."""
    places = np.array(list(solution.problem.part.points.values()))
    return float(places[:, 0].max()), float(places[:, 1].max())


def test_the_rotation_of_the_tip(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    """Least squares of the exact u_x over the depth, −∫ u_x y / ∫ y²; order 2p to a tenth."""
    shape, degree = element
    ladder = ladder_of("exact_cantilever", shape, degree, 2, 4)
    length, half = sides(ladder[0])
    at, weight = np.polynomial.legendre.leggauss(10)
    y = half * at
    exact = ladder[0].problem.exact.displacement(np.full_like(y, length), y)[0]
    turn = -np.degrees((weight * exact * y).sum() / (weight * y**2).sum())
    errors = abs(measured("rotation", ladder, boundary="tip") - turn)
    assert order_of(ladder, errors)[-1] == pytest.approx(formal("rotation", degree, boundary="tip"), abs=0.1)
    assert errors[-1] < (0.05 if degree == 1 else 1e-4) * abs(turn)


def test_the_rotation_at_a_point(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, formal: Callable
) -> None:
    """Half the curl of the exact field, by central differences (exact for cubics up to h²/6 u''')."""
    shape, degree = element
    ladder = ladder_of("exact_cantilever", shape, degree, 2, 4)
    length, half = sides(ladder[0])
    at, step = (0.37 * length, 0.23 * half), 1e-4 * length
    field, (x, y) = ladder[0].problem.exact.displacement, np.array(at)
    steps = np.array([step, -step])
    uy, ux = field(x + steps, y + 0.0 * steps)[1], field(x + 0.0 * steps, y + steps)[0]
    turn = np.degrees(0.5 * ((uy[0] - uy[1]) - (ux[0] - ux[1])) / (2.0 * step))
    errors = abs(measured("rotation", ladder, at=at) - turn)
    assert errors[-1] <= errors[0] * 0.125 ** (formal("rotation", degree, at=at) - 0.5)
    assert errors[-1] < (0.05 if degree == 1 else 2e-3) * abs(turn)


def test_a_rigid_turn_is_found_exactly(element: tuple[str, int], ladder_of: Callable) -> None:
    """The linear field (x + y/2, y + x/2) has no rotation, on a boundary around a corner too."""
    (solution,) = ladder_of("patch_test", *element, 1, 1)
    exact = solution.problem.exact.displacement
    spread = float(np.degrees(np.abs(exact(np.array(1.0), np.array(0.0))).max()))
    assert rotation(solution, at=(40.0, 20.0)) == pytest.approx(0.0, abs=1e-9 * spread)
    turned = solution.mesh.nodes[1] * -1e-3, solution.mesh.nodes[0] * 1e-3
    moved = Solution(
        solution.problem,
        solution.mesh,
        solution.assembled,
        solution.load,
        np.array(turned).T.ravel(),
        solution.held,
    )
    for where in ({"boundary": "rim"}, {"at": (40.0, 20.0)}):
        assert rotation(moved, **where) == pytest.approx(np.degrees(1e-3), rel=1e-9)


def test_what_rotation_and_means_refuse(ladder_of: Callable) -> None:
    solution = ladder_of("thick_cylinder", "quadrilateral", 1, 2, 4)[0]
    for wrong in ({}, {"boundary": "bore", "at": "bore_x"}):
        with pytest.raises(Unsuitable, match="either `boundary` or `at`"):
            rotation(solution, **wrong)
    with pytest.raises(Unsuitable, match="the only axis in a plane"):
        rotation(solution, boundary="bore", component="x")
    for wrong in ({}, {"boundary": "bore", "region": "body"}):
        with pytest.raises(Unsuitable, match="either `boundary` or `region`"):
            mean_displacement(solution, **wrong)
    with pytest.raises(Unsuitable, match="together"):
        region_stress(solution, near="bore_x")
    with pytest.raises(Unsuitable, match="reaches into the part"):
        region_stress(solution, near=(0.0, 0.0), radius=1.0)


def test_corners_that_rotation_and_work_stand_on(ladder_of: Callable) -> None:
    part = ladder_of("thick_cylinder", "quadrilateral", 1, 2, 4)[0].problem.part
    notch = Corner("c", ((30.0, 0.0),), ("bore_x",), 270.0, ("free", "free"), 0.5)
    assert covers(part, notch, {"at": "bore_x"}) and not covers(part, notch, {"at": "bore_y"})
    assert not covers(part, notch, {"boundary": "bore"}) and not work_covers(part, notch, {})
    for what, of_boundary in (("force", False), ("support", True)):
        point = Corner("p", ((30.0, 0.0),), ("bore_x",), 90.0, ("point", what), 0.0)
        assert work_covers(part, point, {})
        assert work_covers(part, point, {"boundary": "bore"}) == of_boundary


def test_the_mean_displacement_of_a_region(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    """Mean of u_r cos over the quarter, u_r by Lamé in plane strain; order 2p to a tenth."""
    ladder = ladder_of("thick_cylinder", *element, 2, 4)
    m, n = (1.3 * 0.4) / 210000.0, 1.3 / 210000.0
    radial = SCALE * (m * (RIM**3 - BORE**3) / 3.0 + n * RIM**2 * (RIM - BORE))
    exact = radial / (0.25 * np.pi * (RIM**2 - BORE**2))
    errors = abs(measured("mean_displacement", ladder, region="body", component="x") - exact)
    promised = formal("mean_displacement", element[1], region="body")
    assert order_of(ladder, errors)[-1] == pytest.approx(promised, abs=0.1)


def smooth_mean(exact: Callable, at: tuple[float, float], radius: float) -> float:
    """Mean of σ_yy with the weight (1 − r²/R²)³, by Gauss along the radius and equal angles."""
    node, weight = np.polynomial.legendre.leggauss(30)
    r, angle = 0.5 * radius * (node + 1.0), np.linspace(0.0, 2.0 * np.pi, 64, endpoint=False)
    x, y = at[0] + np.outer(r, np.cos(angle)), at[1] + np.outer(r, np.sin(angle))
    factor = (weight * r * (1.0 - (r / radius) ** 2) ** 3)[:, None] * np.ones_like(x)
    return float((exact(x, y)[1] * factor).sum() / factor.sum())


def test_the_mean_stress_around_a_point(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, formal: Callable
) -> None:
    """The weight is smooth: order 2p over three steps, to half an order as cells cut the ball anyhow."""
    degree = element[1]
    ladder = ladder_of("thick_cylinder", *element, 2, 4)
    where = {"near": (25.0, 27.0), "radius": 6.0}
    exact = smooth_mean(ladder[0].problem.exact.stress, (25.0, 27.0), 6.0)
    errors = abs(measured("region_stress", ladder, component="yy", **where) - exact)
    assert np.log2(errors[0] / errors[-1]) / 3.0 > formal("region_stress", degree, **where) - 0.5
    assert errors[-1] < (1e-2 if degree == 1 else 1e-4) * PRESSURE


def test_the_mean_stress_of_the_whole_part_is_that_of_its_loads(
    element: tuple[str, int], ladder_of: Callable
) -> None:
    """By virtual work with the field (x, 0) the mean of σ_xx follows from the pressure: SCALE on every mesh.

    On chords and coarse curved edges the volume is not the exact one, the work on the bore is that of chords.
    """
    solution = ladder_of("thick_cylinder", *element, 2, 4)[-1]
    mean = region_stress(solution, component="xx")
    assert mean == pytest.approx(SCALE, rel=5e-3 if element[1] == 1 else 1e-6)


def test_regions_add_up(element: tuple[str, int], ladder_of: Callable, order_of: Callable) -> None:
    """The energies of two regions add up to that of the part, to the quadrature on curved cells."""
    ladder = ladder_of("lined_cylinder", *element, 2, 3)
    for solution in ladder:
        regions = list(solution.mesh.regions)
        assert len(regions) == 2
        parts = [strain_energy(solution, region=name) for name in regions]
        assert min(parts) > 0.0
        assert sum(parts) == pytest.approx(solution.energy, rel=1e-3)
    energies = np.array([strain_energy(solution, region=regions[0]) for solution in ladder])
    assert abs(np.diff(energies))[1] < 0.35 * abs(np.diff(energies))[0], (
        "order above 1.5 where p + 1 is promised"
    )


def test_work_and_potential_energy(element: tuple[str, int], ladder_of: Callable) -> None:
    """Clapeyron: the loads do twice the strain energy, so the potential energy is minus the strain energy."""
    for solution in ladder_of("thick_cylinder", *element, 2, 4):
        energy = solution.energy
        assert work_of_load(solution) == pytest.approx(2.0 * energy, rel=1e-9)
        assert work_of_load(solution, boundary="bore") == pytest.approx(2.0 * energy, rel=1e-9)
        assert work_of_load(solution, boundary="outer") == 0.0
        assert potential_energy(solution) == pytest.approx(-energy, rel=1e-9)


def test_the_potential_energy_with_given_displacements(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    """The cantilever's root moves as the exact field: U − ∫ t·u over the tip; order 2p to 0.3."""
    ladder = ladder_of("exact_cantilever", *element, 2, 4)
    length, half = sides(ladder[0])
    at, weight = np.polynomial.legendre.leggauss(12)
    exact, y = ladder[0].problem.exact, half * at
    places = np.full_like(y, length), y
    stress, u = exact.stress(*places), exact.displacement(*places)
    depth = float(ladder[0].problem.depth(np.array([length]))[0])
    work = half * depth * float(weight @ (stress[0] * u[0] + stress[3] * u[1]))
    errors = abs(measured("potential_energy", ladder) - (exact.energy - work))
    assert order_of(ladder, errors)[-1] > formal("potential_energy", element[1]) - 0.3


def test_the_potential_energy_falls_on_nested_meshes(
    element: tuple[str, int], ladder_of: Callable, measured: Callable
) -> None:
    """An L-bracket with straight edges, clamped: the space grows, so the minimum falls."""
    values = measured("potential_energy", ladder_of("l_bracket", *element, 2, 3))
    assert np.all(np.diff(values) < 0.0) and np.all(values < 0.0)
