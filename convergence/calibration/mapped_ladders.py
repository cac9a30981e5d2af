"""Ladders of mapped meshes of this program's models, and the limits of what is read from them.

"similar": meshes of the model's own blocks, at ratios of 2, 1.5 and irregular ones; "perturbed": those of
ratio 2, inner vertices moved by up to a fifth of the cell size. Limits come from the exact field where there
is one, else from a quadratic mesh that is finer than all and refined towards the singular points. Two coarser
ones of it bound the error: at a ratio of 1.5 and order 1 or more it is at most twice the difference.
"""

from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import Any

import numpy as np

from convergence import rooms
from convergence.calibration.concentrated import concentrated
from convergence.calibration.exact_values import exact_value
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.mapped_case import STEEL, MappedCase, MappedReading
from convergence.calibration.perturbed import perturbed
from convergence.corner import Corner
from convergence.corners.singular_corners import singular_corners
from convergence.dimensions import Located
from convergence.errors import SolvingError, Unsuitable
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenPart
from convergence.fem.mesh import Mesh, count_nodes, mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution, solve

SHAPES: Mapping[int, tuple[Shape, ...]] = {
    1: ("line",),
    2: ("triangle", "quadrilateral"),
    3: ("tetrahedron", "hexahedron", "wedge"),
}
# multiples of the coarsest mesh, as far as the mesh has no more than MOST nodes (of degree 1)
RATIO_2, RATIO_1_5, IRREGULAR = "ratio 2", "ratio 1.5", "irregular"
PLANE = {
    RATIO_2: (1.0, 2.0, 4.0, 8.0, 16.0),
    RATIO_1_5: (1.0, 1.5, 2.25, 3.375, 5.0, 7.5),
    IRREGULAR: (1.0, 1.5, 2.0, 3.0, 4.5, 6.0),
}
SOLID = {
    RATIO_2: (1.0, 2.0, 4.0, 8.0),
    RATIO_1_5: (1.0, 1.5, 2.25, 3.4, 5.0),
    IRREGULAR: (1.0, 2.0, 3.0, 4.0, 6.0),
}
FEW = 60  # nodes of a plane mesh: the two other ladders then start a step later than that of ratio 2
MOST = {(1, 1): 1000, (1, 2): 1000, (2, 1): 4500, (2, 2): 4500, (3, 1): 4500, (3, 2): 900}
REFERENCE = {2: 40_000, 3: 20_000}  # nodes of degree 1, where no singular point asks for narrow cells
NARROW = 0.5  # of them else
SHIFT = 0.2
COARSER = 1.5
EARLIER = COARSER**-3  # share of the difference one step before that counts where the last is small by chance
USEFUL = 1e-3
PERTURBED = "perturbed"


def mapped_ladders(case: MappedCase) -> Iterator[KnownLadder]:
    """Yield the ladders of a case: every reading with a limit or singular x shape x degree x plan."""
    problem: Problem = rooms.find("models", case.model)(**{"material": STEEL, **case.arguments})
    corners = singular_corners(problem)
    limits = _limits(case, problem, corners)
    readings = [reading for reading in case.readings if reading.label in limits]
    dimension = problem.part.dimension
    for shape in SHAPES[dimension]:
        for degree in (1,) if shape == "wedge" else (1, 2):
            for plan, factors in _plans(case, problem.part, degree).items():
                meshes = _meshes(case, problem.part, factors, shape, degree, plan == PERTURBED)
                solved = [_measured(problem, level, readings) for level in meshes]
                for number, reading in enumerate(readings):
                    found = _ladder(
                        np.array([level.h for level in meshes]), np.array([row[number] for row in solved])
                    )
                    if found is not None:
                        h, f = found
                        limit, bound = limits[reading.label]
                        yield KnownLadder(
                            family=case.family,
                            case=f"{case.name}, {plan}",
                            label=reading.label,
                            kind=rooms.beside("quantities", reading.measure, "KIND"),
                            source="perturbed" if plan == PERTURBED else "similar",
                            shape=shape,
                            dimension=dimension,
                            degree=degree,
                            exponent=_weakest(corners),
                            singular=bool(np.isnan(limit)),
                            h=h,
                            f=f,
                            limit=limit,
                            bound=bound,
                        )


def _weakest(corners: tuple[Corner, ...]) -> float | None:
    return min((corner.exponent for corner in corners), default=None)


def _plans(case: MappedCase, part: AnyPart, degree: int) -> dict[str, tuple[float, ...]]:
    """Return the multiples of the coarsest mesh of every ladder of three levels or more."""
    plans: dict[str, tuple[float, ...]] = dict(PLANE if part.dimension < 3 else SOLID)
    if case.short:
        del plans[IRREGULAR if part.dimension < 3 else RATIO_1_5]
    if part.dimension < 3 and count_nodes(part, _counts(case, part, 1.0), 1) < FEW:
        plans = {
            name: factors if name == RATIO_2 else tuple(2.0 * factor for factor in factors)
            for name, factors in plans.items()
        }
    most = MOST[part.dimension, degree]
    plans = {
        name: tuple(factor for factor in factors if count_nodes(part, _counts(case, part, factor), 1) <= most)
        for name, factors in plans.items()
    }
    if part.dimension > 1:
        plans[PERTURBED] = plans[RATIO_2]
    return {name: factors for name, factors in plans.items() if len(factors) > 2}


def _counts(case: MappedCase, part: AnyPart, factor: float) -> dict[int, int]:
    assert not isinstance(part, GivenPart)
    return finer(part.divisions(size=None, divisions=case.divisions), factor, 1)


def _meshes(
    case: MappedCase, part: AnyPart, factors: tuple[float, ...], shape: Shape, degree: int, moved: bool
) -> list[Mesh]:
    found, random = [], np.random.default_rng(7)
    for factor in factors:
        level = mesh(part, _counts(case, part, factor), shape=shape, degree=degree)
        if moved:
            try:
                level = perturbed(level, SHIFT, random)
            except SolvingError:
                continue
        found.append(level)
    return found


def _measured(problem: Problem, level: Mesh, readings: list[MappedReading]) -> list[float]:
    solution = solve(problem, level)
    return [_value(solution, reading) for reading in readings]


def _value(solution: Solution, reading: MappedReading) -> float:
    """Return what is read, NaN where a mesh is too coarse for it."""
    try:
        value = rooms.find("quantities", reading.measure)(solution, **reading.arguments)
    except Unsuitable:
        return float("nan")
    return value.value if isinstance(value, Located) else float(value)


def _ladder(h: np.ndarray, f: np.ndarray) -> tuple[np.ndarray, np.ndarray] | None:
    """Return the levels that have a value, None where fewer than three are left."""
    known = np.isfinite(f)
    return (h[known], f[known]) if known.sum() >= 3 else None


def _limits(
    case: MappedCase, problem: Problem, corners: tuple[Corner, ...]
) -> dict[str, tuple[float, float]]:
    """Return limit and bound of every reading of use, NaN for those without a limit."""
    found: dict[str, tuple[float, float]] = {}
    open_readings = []
    for reading in case.readings:
        if _is_singular(problem, corners, reading):
            found[reading.label] = (np.nan, np.nan)
        elif reading.limit is not None:
            found[reading.label] = (reading.limit, 1e-9 * abs(reading.limit))
        elif (exact := exact_value(problem, reading.measure, reading.arguments)) is not None:
            found[reading.label] = exact
        else:
            open_readings.append(reading)
    if open_readings:
        rows = [_reference(case, problem, corners, open_readings, COARSER**step) for step in range(3)]
        for number, reading in enumerate(open_readings):
            best, second, third = (row[number] for row in rows)
            bound = 2.0 * max(abs(best - second), EARLIER * abs(second - third))
            if bound <= USEFUL * abs(best):
                found[reading.label] = (best, bound)
    return found


def _is_singular(problem: Problem, corners: tuple[Corner, ...], reading: MappedReading) -> bool:
    covers: Any = rooms.beside("quantities", reading.measure, "covers")
    return covers is not None and any(covers(problem.part, one, reading.arguments) for one in corners)


def _reference(
    case: MappedCase,
    problem: Problem,
    corners: tuple[Corner, ...],
    readings: list[MappedReading],
    coarser: float,
) -> list[float]:
    """Return the readings on a quadratic mesh of squares or bricks, small at the singular points."""
    part = problem.part
    names = {name for corner in corners for name in corner.points} | set(case.corners)
    nodes = REFERENCE[part.dimension] * (NARROW if names else 1.0)
    factor = (nodes / count_nodes(part, _counts(case, part, 1.0), 1)) ** (1.0 / part.dimension)
    counts = _counts(case, part, factor / coarser)
    if names and isinstance(part, Part):
        part = concentrated(part, names, counts)
    elif names and isinstance(part, SolidPart):
        planes = [plane for plane, _ in part.planes]
        flat = [name for name in part.plan.points if any(f"{name}_{plane}" in names for plane in planes)]
        part = replace(part, plan=concentrated(part.plan, flat, counts))
    finest = replace(problem, part=part)
    level = mesh(part, counts, shape=SHAPES[part.dimension][1], degree=2)
    return _measured(finest, level, [_recovered(reading) for reading in readings])


def _recovered(reading: MappedReading) -> MappedReading:
    """Return the reading of the recovered stress: it has the same limit."""
    if "recovery" not in reading.arguments:
        return reading
    return replace(reading, arguments={**reading.arguments, "recovery": "recovered"})
