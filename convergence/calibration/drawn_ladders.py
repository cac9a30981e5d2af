"""Ladders of unstructured meshes of a drawn case, and the limits of what is read from them.

Meshes of Netgen: "remeshed" (each size meshed anew), "nested" (each cell cut in two along its edges),
"perturbed" (nested, the inner nodes moved by a fifth of the cell size). The limit comes from a mesh refined
geometrically towards the corners, at degree 8; a second one, coarser and of degree 7, bounds its error.
A reading whose values on a ladder are nothing beside its natural scale is left out.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import takewhile
from typing import Any, Literal

import netgen.occ as occ
import ngsolve as ng
import numpy as np

from convergence.calibration import readings
from convergence.calibration.drawn_case import DrawnCase, Reading
from convergence.calibration.drawn_solution import DrawnSolution, solve_drawn
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.natural_scale import is_nothing, natural_scale
from convergence.calibration.sampling import nodes, sampled

Source = Literal["remeshed", "nested", "perturbed"]


@dataclass(frozen=True)
class Plan:
    """A way to make the meshes of a ladder: where from, the cells' shape, the ratio of sizes asked for.

    curved: cells along an arc of one radian on the first mesh; finer meshes have more by the ratio.
    """

    source: Source
    quads: bool
    ratio: float
    curved: float = 2.0


PLANS = (
    Plan("remeshed", False, 2.0**0.5, 1.0),
    Plan("remeshed", True, 1.3, 0.4),
    Plan("nested", False, 2.0),
    Plan("nested", True, 2.0, 0.4),
    Plan("perturbed", False, 2.0),
)
SOLID_PLANS = (Plan("remeshed", False, 1.3, 1.5), Plan("nested", False, 2.0, 1.5))
MOST_CELLS = {2: {1: 20_000, 2: 9_000}, 3: {1: 80_000, 2: 24_000}}  # by dimension and degree
LEAST_LEVELS = 3
SHIFT = 0.2
DOUBT = 2.0
FINER, EDGED_FINER = (2.0, 1.4), (1.7, 1.3)  # reference against coarsest: best, second
LAYERS = (14, 9)
SMOOTH_LAYERS = (6, 5)  # stress read in smaller cells is spoilt by rounding
SAME = 1e-11
CURVED = {2: (5.0, 5.0), 3: (5.0, 4.5)}  # cells of a reference along an arc, as Netgen counts them


def drawn_ladders(family: str, case: DrawnCase) -> Iterator[KnownLadder]:
    """Yield all ladders of a case: every reading x plan x degree."""
    best = _reference(case, fine=True)
    limits = _limits(case, best)
    scales = {reading.label: natural_scale(best, reading) for reading in case.readings}
    for number, plan in enumerate(PLANS if case.dimension == 2 else SOLID_PLANS):
        meshes = list(_meshes(case, plan, seed=number))
        for degree in (1, 2):
            most = MOST_CELLS[case.dimension][degree]
            sound = [mesh for mesh in meshes if mesh.ne <= most and _is_sound(mesh, degree)]
            if len(sound) < LEAST_LEVELS:
                continue
            solved = [_solved(case, mesh, degree) for mesh in sound]
            h = np.array([one.h for one in solved])
            shape = _shape(case, plan)
            for reading in case.readings:
                f = np.array([one.values[reading.label] for one in solved])
                if is_nothing(f, scales[reading.label]):
                    continue
                limit, bound = limits.get(reading.label, (np.nan, np.nan))
                yield KnownLadder(
                    family=family,
                    case=case.name,
                    label=reading.label,
                    kind=reading.kind,
                    source=plan.source,
                    shape=shape,
                    dimension=case.dimension,
                    degree=degree,
                    exponent=case.exponent,
                    singular=reading.singular,
                    h=h,
                    f=f,
                    limit=limit,
                    bound=bound,
                )


@dataclass(frozen=True)
class _Solved:
    h: float
    values: dict[str, float]


def _is_sound(mesh: Any, degree: int) -> bool:
    """Return whether no cell is inside out: coarse cells along a small radius may be, once curved."""
    mesh.Curve(degree)
    size = ng.Det(ng.specialcf.JacobianMatrix(mesh.dim))
    return bool(sampled(mesh, size, nodes(mesh.dim, 2))[1].min() > 0.0)


def _solved(case: DrawnCase, mesh: Any, degree: int) -> _Solved:
    mesh.Curve(degree)
    solution = solve_drawn(case, mesh, degree)
    measure = ng.Integrate(ng.CoefficientFunction(1.0) * ng.dx, mesh)
    values = {reading.label: _read(reading, solution) for reading in case.readings}
    return _Solved((measure / mesh.ne) ** (1.0 / mesh.dim), values)


def _read(reading: Reading, solution: DrawnSolution) -> float:
    return float(getattr(readings, reading.measure)(solution, **reading.arguments))


def _limits(case: DrawnCase, best: DrawnSolution) -> dict[str, tuple[float, float]]:
    """Return limit and bound of its error for every reading that has a limit."""
    finite = [reading for reading in case.readings if not reading.singular]
    second = _reference(case, fine=False)
    found = {}
    for reading in finite:
        limit, other = _read(reading, best), _read(reading, second)
        found[reading.label] = (limit, DOUBT * abs(limit - other) + SAME * abs(limit))
    return found


def _reference(case: DrawnCase, *, fine: bool) -> DrawnSolution:
    dimension = case.dimension
    degree = {2: (8, 7), 3: (5, 5)}[dimension][0 if fine else 1]
    geometry = _geometry(case, towards_corners=True)
    finer = EDGED_FINER if case.edges else FINER
    size = case.size / finer[0 if fine else 1]
    curved = CURVED[dimension][0 if fine else 1]
    mesh = ng.Mesh(geometry.GenerateMesh(maxh=size, curvaturesafety=curved))
    if case.corners or case.edges:
        is_mild = case.exponent is None or dimension == 3
        mesh.RefineHP((SMOOTH_LAYERS if is_mild else LAYERS)[0 if fine else 1], 0.2)
    mesh.Curve(degree)
    return solve_drawn(case, mesh, degree, reference=True)


def _geometry(case: DrawnCase, *, towards_corners: bool = False) -> Any:
    corners = [(*corner, 0.0)[:3] for corner in case.corners]
    for vertex in case.shape.vertices:
        at = (vertex.p.x, vertex.p.y, vertex.p.z)
        vertex.hpref = float(towards_corners and any(np.allclose(at, c, atol=1e-7) for c in corners))
    for edge in case.shape.edges:
        edge.hpref = float(towards_corners and edge.name in case.edges)
    return occ.OCCGeometry(case.shape, dim=case.dimension)


def _meshes(case: DrawnCase, plan: Plan, seed: int) -> Iterator[Any]:
    """Yield meshes, coarse to fine, up to the number of cells that the lowest degree affords."""
    made = _nested(case, plan, seed) if plan.source != "remeshed" else _remeshed(case, plan)
    most = MOST_CELLS[case.dimension][1]
    yield from takewhile(lambda mesh: mesh.ne <= most, made)


def _remeshed(case: DrawnCase, plan: Plan) -> Iterator[Any]:
    geometry = _geometry(case)
    for level in range(case.levels):
        finer = plan.ratio**level
        options = {"quad_dominated": plan.quads, "curvaturesafety": plan.curved * finer}
        yield ng.Mesh(geometry.GenerateMesh(maxh=case.size / finer, **options))


def _nested(case: DrawnCase, plan: Plan, seed: int) -> Iterator[Any]:
    random = np.random.default_rng(seed)
    options = {"quad_dominated": plan.quads, "curvaturesafety": plan.curved}
    mesh = _geometry(case).GenerateMesh(maxh=case.size, **options)
    while True:
        yield ng.Mesh(_shifted(mesh, random) if plan.source == "perturbed" else mesh.Copy())
        mesh.Refine()


def _shifted(mesh: Any, random: np.random.Generator) -> Any:
    """Return a copy whose inner nodes are moved; nodes on edges of the drawing stay."""
    moved = mesh.Copy()
    places = moved.Coordinates()
    cells = moved.Elements2D().NumPy()["nodes"][:, :3] - 1
    edge = np.linalg.norm(places[cells] - places[np.roll(cells, 1, axis=1)], axis=2)
    reach = np.full(len(places), np.inf)
    np.minimum.at(reach, cells.ravel(), np.repeat(edge.min(axis=1), 3))
    outer = moved.Elements1D().NumPy()["nodes"].ravel() - 1
    reach[outer] = 0.0
    angle = random.uniform(0.0, 2.0 * np.pi, len(places))
    size = SHIFT * reach * random.uniform(0.0, 1.0, len(places)) ** 0.5
    places[:, :2] += size[:, None] * np.stack([np.cos(angle), np.sin(angle)], axis=1)
    return moved


def _shape(case: DrawnCase, plan: Plan) -> str:
    if case.dimension == 3:
        return "tetrahedron"
    return "mostly quadrilateral" if plan.quads else "triangle"
