"""The exact fields themselves: equilibrium, Hooke's law, boundary conditions, energy."""

from collections.abc import Callable
from inspect import signature
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.fem.geometry import at_rule
from convergence.fem.loads import BodyForce, Pressure, TemperatureRise, Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.problem import Problem, Support
from convergence.fem.strain import volumes
from convergence.models.l_domain import l_domain
from convergence.models.lined_cylinder import lined_cylinder
from convergence.models.perforated_plate import perforated_plate
from convergence.models.thick_cylinder import thick_cylinder

KINDS: tuple[PlaneKind, ...] = ("plane stress", "plane strain")
STEEL = Material(210000.0, 0.3)
STEP = 1e-4
# Central differences are off by (STEP size / r)² relative to the derivative, r > size / 30 from a corner;
# a wrong term of a field is off by order one.
CLOSE = 1e-3


def with_exact() -> list[Any]:
    """Return the plane models with an exact solution, in both kinds and, where they have them, both modes."""
    found = []
    for name in rooms.names("models"):
        function = rooms.find("models", name)
        modes = [{"mode": "I"}, {"mode": "II"}] if "mode" in signature(function).parameters else [{}]
        kinds = [{"kind": kind} for kind in KINDS] if "kind" in signature(function).parameters else [{}]
        for said in ({**kind, **mode} for kind in kinds for mode in modes):
            problem = function(material=STEEL, **said)
            if problem.exact is not None and problem.part.dimension == 2:
                found.append(pytest.param(problem, id=f"{problem.title}, {problem.kind}"))
    return found


WARM = Material(210000.0, 0.3, expansion=1.2e-5)
CASES = [
    *with_exact(),
    *(
        pytest.param(lined_cylinder(warmth=60.0, kind=kind, material=WARM), id=f"warm, {kind}")
        for kind in KINDS
    ),
    *(pytest.param(thick_cylinder(sector=a, material=STEEL), id=f"sector of {a:g}") for a in (40.0, 130.0)),
]


def coarse(problem: Problem) -> Mesh:
    counts = problem.part.divisions(size=None, divisions=3)
    return mesh(problem.part, counts, shape="triangle", degree=1)


def inner_places(problem: Problem) -> tuple[np.ndarray, np.ndarray]:
    cells = coarse(problem)
    x, y = cells.nodes[:, cells.cell_nodes].mean(axis=1)
    return x, y


def per_cell(problem: Problem, cells: Mesh, of: Callable[[Material], np.ndarray]) -> np.ndarray:
    """Return a matrix (4, 4, cells) of each cell's material."""
    found = np.empty((4, 4, cells.cells))
    for region, members in cells.regions.items():
        found[:, :, members] = of(problem.materials[region])[:, :, None]
    return found


def differences(function: Any, x: np.ndarray, y: np.ndarray, step: float) -> np.ndarray:
    """Return d/dx and d/dy (2, ...) of a field."""
    along_x = (function(x + step, y) - function(x - step, y)) / (2 * step)
    along_y = (function(x, y + step) - function(x, y - step)) / (2 * step)
    return np.array([along_x, along_y])


@pytest.mark.parametrize("problem", CASES)
def test_equilibrium_and_hookes_law(problem: Problem) -> None:
    exact = problem.exact
    assert exact is not None
    x, y = inner_places(problem)
    step = STEP * problem.part.size
    by_x, by_y = differences(exact.stress, x, y, step)
    scale = np.abs(exact.stress(x, y)).max()
    xx, _, zz, xy = exact.stress(x, y)
    ring = problem.kind == "axisymmetric"
    around = np.array([(xx - zz) / x, xy / x]) if ring else 0.0
    body = sum(load.value(x, y) for load in problem.loads if isinstance(load, BodyForce))  # type: ignore[operator]
    left = np.array([by_x[0] + by_y[3], by_x[3] + by_y[1]]) + around + body
    assert np.abs(left).max() * problem.part.size < CLOSE * scale
    gradient = differences(exact.displacement, x, y, step)
    hoop = exact.displacement(x, y)[0] / x if ring else 0.0 * x
    strain = np.array([gradient[0, 0], gradient[1, 1], hoop, gradient[0, 1] + gradient[1, 0]])
    rise = sum(load.value for load in problem.loads if isinstance(load, TemperatureRise))  # type: ignore[misc]
    free = per_cell(problem, coarse(problem), lambda m: np.diag(m.thermal_strain(problem.kind)))
    elasticity = per_cell(problem, coarse(problem), lambda material: material.elasticity(problem.kind))
    stress = np.einsum("ste,te->se", elasticity, strain - rise * np.einsum("sse->se", free))
    assert np.abs(stress - exact.stress(x, y)).max() < CLOSE * scale


def along_boundary(problem: Problem, name: str) -> tuple[np.ndarray, np.ndarray]:
    """Return places and outward normals (2, n) inside the edges of a boundary."""
    part, s, small = problem.part, np.linspace(0.05, 0.95, 10), 1e-5
    places, normals = [], []
    for edge in part.boundaries[name]:
        start, end = edge if edge in part.outline else edge[::-1]
        places.append(part.edge(start, end, s))
        tangent = part.edge(start, end, s + small) - part.edge(start, end, s - small)
        normals.append(np.array([tangent[1], -tangent[0]]) / np.hypot(*tangent))
    return np.concatenate(places, axis=1), np.concatenate(normals, axis=1)


@pytest.mark.parametrize("problem", CASES)
def test_boundaries_carry_what_the_problem_says(problem: Problem) -> None:
    """Held components have the exact displacement, the others the traction of the loads, none where free."""
    exact = problem.exact
    assert exact is not None
    for boundary in problem.part.boundaries:
        (x, y), normal = along_boundary(problem, boundary)
        xx, yy, _, xy = exact.stress(x, y)
        traction = np.array([xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]])
        applied = np.zeros_like(traction)
        for load in problem.loads:
            if isinstance(load, BodyForce | TemperatureRise):
                continue
            assert isinstance(load, Traction | Pressure)
            if load.boundary == boundary and isinstance(load, Pressure):
                applied -= load.value * normal
            elif load.boundary == boundary and isinstance(load, Traction):
                assert callable(load.value)
                applied += load.value(x, y)
        scale = np.abs(exact.stress(*inner_places(problem))).max()
        moved, largest = exact.displacement(x, y), np.abs(exact.displacement(*inner_places(problem))).max()
        supports = [s for s in problem.supports if isinstance(s, Support) and s.boundary == boundary]
        for _ in [support for support in supports if support.normal is not None]:
            # the normal is a difference over 1e-5 of the edge: 1e-16 / 1e-5 times a few
            assert np.abs((moved * normal).sum(axis=0)).max() < 1e-9 * largest
            applied += normal * ((traction - applied) * normal).sum(axis=0)  # what the support takes
        for component in range(2):
            held = [value for support in supports if (value := (support.x, support.y)[component]) is not None]
            for value in held:
                wanted = value(x, y) if callable(value) else value
                assert np.abs(moved[component] - wanted).max() < 1e-12 * largest
            if not held:
                assert np.abs(traction[component] - applied[component]).max() < 1e-9 * scale


@pytest.mark.parametrize("problem", [case for case in CASES if "mode" not in str(case.id)])
def test_energy_is_the_integral_of_the_exact_field(problem: Problem) -> None:
    """Against quadrature of the energy density; not for the singular field, too rough for that."""
    exact = problem.exact
    assert exact is not None
    counts = problem.part.divisions(size=None, divisions=8)
    cells = mesh(problem.part, counts, shape="quadrilateral", degree=2)
    at = at_rule(cells, 8)
    stress = exact.stress(*at.x)
    compliance = per_cell(problem, cells, lambda material: material.compliance(problem.kind))
    density = np.einsum("seq,ste,teq->eq", stress, compliance, stress, optimize=True)
    found = 0.5 * (density * volumes(problem, at)).sum()
    # the isoparametric boundary is off by O(h⁴): below 1e-7 of the radius at 8 divisions
    assert found == pytest.approx(exact.energy, rel=1e-6)


def test_tie_rod() -> None:
    """Equilibrium d(σ A)/dx + A b = 0, Hooke's law, the ends, and the energy, as above for a plane."""
    problem = rooms.find("models", "tie_rod")(material=STEEL)
    exact, length = problem.exact, problem.part.size
    traction, weight = problem.loads
    x, step = np.linspace(0.01, 0.99, 50) * length, STEP * length
    force = [exact.stress(place)[0] * problem.depth(place) for place in (x - step, x + step)]
    balance = (force[1] - force[0]) / (2 * step) + weight.value[0] * problem.depth(x)
    assert np.abs(balance).max() < CLOSE * weight.value[0] * problem.depth(x).max()
    moved = [exact.displacement(place)[0] for place in (x - step, x + step)]
    strain = (moved[1] - moved[0]) / (2 * step)
    assert np.abs(STEEL.young * strain - exact.stress(x)[0]).max() < CLOSE * exact.stress(x).max()
    ends = np.array([0.0, length])
    assert exact.displacement(ends)[0, 0] == 0.0
    assert exact.stress(ends)[0, 1] == pytest.approx(traction.value[0], rel=1e-12)
    at, weights = np.polynomial.legendre.leggauss(20)
    at, weights = 0.5 * length * (at + 1.0), 0.5 * length * weights
    density = exact.stress(at)[0] ** 2 / STEEL.young * problem.depth(at)
    assert exact.energy == pytest.approx(0.5 * weights @ density, rel=1e-10)


def test_kirsch_field(published: Any) -> None:
    data = published["kirsch"]
    for kind, radius, side, tension, young, poisson, energy in data["rows"]:
        problem = perforated_plate(
            hole_radius=radius,
            half_width=side,
            thickness=1.0,
            tension=tension,
            kind=kind,
            material=Material(young, poisson),
        )
        assert problem.exact is not None
        assert problem.exact.energy == pytest.approx(energy, rel=1e-11)  # 11 to 14 printed digits
    _, radius, side, tension, young, poisson, _ = data["rows"][0]
    exact = perforated_plate(
        hole_radius=radius, half_width=side, tension=tension, material=Material(young, poisson)
    ).exact
    assert exact is not None
    for x, y, *wanted in data["stresses"]:
        found = exact.stress(np.array(x), np.array(y))[[0, 1, 3]]
        assert found == pytest.approx(wanted, abs=1e-12 * 30)
    for x, y, *wanted in data["displacements"]:
        assert exact.displacement(np.array(x), np.array(y)) == pytest.approx(wanted, abs=1e-16)
    corner = exact.stress(np.array(side), np.array(side))
    assert corner[[0, 3]] == pytest.approx(data["corner_stress"], rel=1e-12)
    on_axes = exact.stress(np.array([0.0, side]), np.array([side, 0.0]))[0]
    assert on_axes == pytest.approx(data["axis_stress"], rel=1e-12)


@pytest.mark.parametrize("row", range(4))
def test_l_domain_energy(published: Any, row: int) -> None:
    kind, mode, energy = published["l_domain"]["rows"][row]
    exact = l_domain(
        leg=1.0, thickness=1.0, stress=1.0, mode=mode, kind=kind, material=Material(1.0, 0.3)
    ).exact
    assert exact is not None
    assert exact.energy == pytest.approx(energy, rel=2e-11)  # 11 to 12 printed digits
