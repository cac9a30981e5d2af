"""The numbers that are read from drawn solutions, in the ways in which programs print them.

Stress at a node: the mean over the cells around it ("nodal") or the value of one cell ("direct"); a peak
besides over the points of integration ("gauss"). A reference solution is read at the place itself, its peaks
between the nodes too.
"""

from typing import Any

import ngsolve as ng
import numpy as np

from convergence.calibration.crack_reading import stress_intensity as stress_intensity
from convergence.calibration.drawn_case import DrawnCase, Way
from convergence.calibration.drawn_solution import DrawnSolution, strain
from convergence.calibration.sampling import means

Place = tuple[float, ...]
PLACES = {"xx": (0, 0), "yy": (1, 1), "zz": (2, 2), "xy": (0, 1), "xz": (0, 2), "yz": (1, 2)}


def energy(solution: DrawnSolution) -> float:
    """Return the strain energy, without that of free expansion."""
    case, mesh = solution.case, solution.mesh
    strained = solution.strain
    density = 0.5 * ng.InnerProduct(solution.stress, strained)
    if case.temperature is not None:
        density -= 0.5 * ng.Trace(solution.stress) * _free_strain(case, mesh)
    return float(ng.Integrate(solution.weight * density * ng.dx(bonus_intorder=_extra(solution)), mesh))


def displacement(solution: DrawnSolution, *, at: Place, component: str) -> float:
    """Return a component ("x", "y", "z") or the "magnitude" at a place."""
    vector = np.atleast_1d(solution.displacement(solution.mesh(*at)))
    return float(np.linalg.norm(vector) if component == "magnitude" else vector["xyz".index(component)])


def mean_displacement(solution: DrawnSolution, *, boundary: str, component: str) -> float:
    """Return the mean of a component over a boundary."""
    part = solution.displacement["xyz".index(component)]
    on = ng.ds(boundary, bonus_intorder=_extra(solution))
    size = ng.Integrate(ng.CoefficientFunction(1.0) * on, solution.mesh)
    return float(ng.Integrate(part * on, solution.mesh) / size)


def rotation(solution: DrawnSolution, *, start: Place, end: Place) -> float:
    """Return the angle by which the line between two places of a plane turns."""
    moved = [np.array(solution.displacement(solution.mesh(*place))) for place in (start, end)]
    line = np.array(end) - np.array(start)
    turned = moved[1] - moved[0]
    return float((line[0] * turned[1] - line[1] * turned[0]) / (line @ line))


def reaction(solution: DrawnSolution, *, boundary: str, component: str) -> float:
    """Return the force of a support on the part: a(u, w) - f(w), w = 1 at the support's nodes."""
    case, mesh = solution.case, solution.mesh
    space = ng.VectorH1(mesh, order=solution.degree)
    test = ng.GridFunction(space)
    test.components["xyz".index(component)].Set(1.0, definedon=mesh.Boundaries(boundary))
    inner = ng.InnerProduct(solution.stress, strain(case, test))
    total = ng.Integrate(solution.weight * inner * ng.dx(bonus_intorder=_extra(solution)), mesh)
    for loaded, traction in case.tractions.items():
        work = ng.InnerProduct(ng.CoefficientFunction(tuple(traction)), test)
        total -= ng.Integrate(solution.weight * work * ng.ds(loaded, bonus_intorder=4), mesh)
    if case.body is not None:
        work = ng.InnerProduct(ng.CoefficientFunction(tuple(case.body)), test)
        total -= ng.Integrate(solution.weight * work * ng.dx(bonus_intorder=2), mesh)
    return float(total)


def stress(solution: DrawnSolution, *, at: Place, component: str, way: Way = "nodal") -> float:
    """Return a stress at a place."""
    return float(_component(_tensor(solution, at, way), component)[0])


def peak(
    solution: DrawnSolution,
    *,
    component: str,
    way: Way = "nodal",
    near: Place | None = None,
    radius: float = np.inf,
) -> float:
    """Return the largest value of a component within a radius of a place (everywhere without one)."""
    if solution.is_reference:
        return _fine_peak(solution, component, near, radius)
    places, values, _ = solution.at_inner_points if way == "gauss" else solution.at_nodes
    if way == "nodal":
        places, values = means(places, values)
    inside = _within(places, near, radius)
    return float(_component(values[inside], component).max())


def line_stress(
    solution: DrawnSolution, *, start: Place, end: Place, component: str, part: str, points: int = 21
) -> float:
    """Return the "membrane" or "bending" part of a stress along a line, by the trapezium rule."""
    share = np.linspace(0.0, 1.0, points)
    places = np.array(start) + share[:, None] * (np.array(end) - np.array(start))
    along = _component(np.array([_tensor(solution, tuple(place)) for place in places]), component)
    if part == "membrane":
        return float(np.trapezoid(along, share))
    return float(6.0 * np.trapezoid(along * (share - 0.5), share))


def mean_stress(solution: DrawnSolution, *, region: str, component: str) -> float:
    """Return the mean of a component over a region."""
    row, column = PLACES[component]
    on = ng.dx(definedon=solution.mesh.Materials(region), bonus_intorder=_extra(solution))
    size = ng.Integrate(solution.weight * on, solution.mesh)
    return float(ng.Integrate(solution.weight * solution.stress[row, column] * on, solution.mesh) / size)


def section_force(solution: DrawnSolution, *, boundary: str, component: str) -> float:
    """Return the force of the stress on a boundary, its outer normal taken."""
    normal = ng.specialcf.normal(solution.case.dimension)
    row = "xyz".index(component)
    traction = sum(solution.stress[row, i] * normal[i] for i in range(solution.case.dimension))
    on = ng.ds(boundary, element_boundary=False, bonus_intorder=_extra(solution))
    whole = ng.BoundaryFromVolumeCF(solution.weight * traction)
    return float(ng.Integrate(whole * on, solution.mesh))


def _extra(solution: DrawnSolution) -> int:
    """Return what is added to NGSolve's order of integration, 5: a product of two strains is exact."""
    return 2 * solution.degree


def _free_strain(case: DrawnCase, mesh: Any) -> Any:
    if set(case.materials) == {""}:
        return ng.CoefficientFunction(case.materials[""].expansion) * case.temperature
    return mesh.MaterialCF({n: m.expansion for n, m in case.materials.items()}) * case.temperature


def _component(stress9: np.ndarray, component: str) -> np.ndarray:
    """Return a component of stresses (n, 9): an entry, "von_mises" or "first_principal"."""
    s = stress9.reshape(-1, 3, 3)
    if component == "von_mises":
        shear = s[:, 0, 1] ** 2 + s[:, 0, 2] ** 2 + s[:, 1, 2] ** 2
        xx, yy, zz = s[:, 0, 0], s[:, 1, 1], s[:, 2, 2]
        return np.asarray(np.sqrt(0.5 * ((xx - yy) ** 2 + (yy - zz) ** 2 + (zz - xx) ** 2) + 3.0 * shear))
    if component == "first_principal":
        return np.asarray(np.linalg.eigvalsh(s)[:, -1])
    row, column = PLACES[component]
    return np.asarray(s[:, row, column])


def _tensor(solution: DrawnSolution, at: Place, way: Way = "nodal") -> np.ndarray:
    """Return the stress (9) at a place."""
    field = solution.stress if way == "direct" or solution.is_reference else solution.averaged_stress
    return np.asarray(field(solution.mesh(*at))).reshape(9)


def _within(places: np.ndarray, near: Place | None, radius: float) -> np.ndarray:
    if near is None:
        return np.ones(len(places), dtype=bool)
    return np.asarray(np.linalg.norm(places - np.array(near), axis=1) <= radius)


def _fine_peak(solution: DrawnSolution, component: str, near: Place | None, radius: float) -> float:
    """Return the peak of a reference, from a lattice in all cells and many points along their edges."""
    found = []
    for places, values, _ in (solution.at_nodes, solution.at_inner_points):
        inside = _within(places, near, radius)
        found.append(_component(values[inside], component).max(initial=-np.inf))
    return float(max(found))
