"""Whether the field around a singular corner grows as theory says, and what to report instead of its peak.

On every level the recovered stress is read on a ray from the corner into the body, at distances that halve
from a quarter of the part's size or less, and on straight free surfaces that end at the corner: structural
hot-spot stress (International Institute of Welding: Hobbacher, Recommendations for Fatigue Design of Welded
Joints and Components, from memory; 5/3 s(0.4 t) − 2/3 s(1.0 t) of the stress along the surface), membrane and
bending of that stress through the thickness (ASME Boiler and Pressure Vessel Code VIII-2, Annex 5-A, from
memory). That section starts at the corner: the integrals exist, but converge slowly.
"""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass

import numpy as np

from convergence.checks._corner import STRESS_KINDS
from convergence.checks._field import Field, blamed, field_of
from convergence.checks._growth import growth_words
from convergence.checks._instead import instead
from convergence.checks._ladder import not_applicable
from convergence.corners.rays import Ray, Surface, rays
from convergence.corners.singular_corners import singular_corners
from convergence.fem.location import line_points, locate_many
from convergence.fem.mesh import Mesh
from convergence.fem.recovery import recovered_at
from convergence.fem.solution import Solution
from convergence.fem.stress import COMPONENTS
from convergence.results import Check, Facts, Ladder

MOST, PLACES = 4, 7
HOT_SPOT = {0.4: 5.0 / 3.0, 1.0: -2.0 / 3.0}  # share of the thickness: Lagrange's factor


@dataclass(frozen=True, eq=False)
class Reading:
    """Places (D, n) and what the stress (components, n) there is turned into."""

    places: np.ndarray
    numbers: Callable[[np.ndarray], Mapping[str, float]]


def record(solution: Solution) -> dict[str, float]:
    """Return the stress around the four weakest corners, as CORNER.PLACE.COMPONENT and CORNER.WAY.hot_spot.

    CORNER.reach is the distance of place 0, CORNER.single 1 where one real power leads near the corner.
    """
    problem, mesh = solution.problem, solution.mesh
    found = rays(problem, singular_corners(problem), MOST)
    readings = [reading for ray in found for reading in _readings(mesh, ray)]
    if not readings:
        return {}
    cells, local = locate_many(mesh, np.concatenate([one.places for one in readings], axis=1))
    stress = recovered_at(solution, cells, local)[:, :, 0]
    ends = np.cumsum([one.places.shape[1] for one in readings])[:-1]
    numbers: dict[str, float] = {}
    for reading, own in zip(readings, np.split(stress, ends, axis=1), strict=True):
        numbers |= reading.numbers(own)
    return {name: float(value) for name, value in numbers.items()}


def _readings(mesh: Mesh, ray: Ray) -> Iterator[Reading]:
    name = ray.corner.name
    if ray.reach > 0.0:
        steps = ray.reach * 0.5 ** np.arange(PLACES)
        places = ray.start[:, None] + np.multiply.outer(ray.way, steps)
        known = {f"{name}.reach": ray.reach, f"{name}.single": float(ray.single)}
        yield Reading(places, lambda stress: known | _on_ray(name, ray.across, stress))
    for surface in ray.surfaces:
        yield _on_surface(mesh, f"{name}.{_way_name(surface.way)}", surface)


def _on_ray(name: str, across: np.ndarray, stress: np.ndarray) -> dict[str, float]:
    opening = normal_stress(stress, across)
    return {
        f"{name}.{place}.{component}": value
        for place in range(stress.shape[1])
        for component, value in (
            *zip(COMPONENTS, stress[:, place], strict=False),
            ("across", opening[place]),
        )
    }


def _on_surface(mesh: Mesh, name: str, surface: Surface) -> Reading:
    t, toe = surface.thickness, surface.toe
    distances = t * np.array(list(HOT_SPOT))
    on_surface = toe[:, None] + np.multiply.outer(surface.way, distances)
    section, weights = line_points(mesh, tuple(toe), tuple(toe + t * surface.inward))
    depth = surface.inward @ (section - toe[:, None])

    def numbers(stress: np.ndarray) -> dict[str, float]:
        along = normal_stress(stress, surface.way)
        membrane, bending = linearised(along[len(distances) :], depth, weights, t)
        hot_spot = along[: len(distances)] @ np.array(list(HOT_SPOT.values()))
        found = {"thickness": t, "hot_spot": hot_spot, "membrane": membrane, "bending": bending}
        return {f"{name}.{key}": value for key, value in found.items()}

    return Reading(np.concatenate([on_surface, section], axis=1), numbers)


def linearised(
    stress: np.ndarray, depth: np.ndarray, weights: np.ndarray, thickness: float
) -> tuple[float, float]:
    """Return membrane (1/t) ∫ s dx and bending at the start (6/t²) ∫ s (t/2 − x) dx."""
    membrane = weights @ stress / thickness
    bending = 6.0 / thickness**2 * (weights * (0.5 * thickness - depth)) @ stress
    return float(membrane), float(bending)


def normal_stress(stress: np.ndarray, way: np.ndarray) -> np.ndarray:
    """Return the stress along a unit vector (2 or 3,) of stresses (4 or 6, n)."""
    x, y, z = (*way, 0.0)[:3]
    factors = np.array([x * x, y * y, z * z, 2.0 * x * y, 2.0 * y * z, 2.0 * z * x])
    return np.asarray(factors[: len(stress)] @ stress)


def _way_name(way: np.ndarray) -> str:
    """Return "+x", "-y" and the like, for others the components."""
    axis = int(np.abs(way).argmax())
    if abs(way[axis]) > 1.0 - 1e-9:
        return f"{'+' if way[axis] > 0.0 else '-'}{'xyz'[axis]}"
    return "_".join(f"{round(share, 2) + 0.0:.2f}" for share in way)


def singular_field(ladder: Ladder, facts: Facts) -> Check:
    """Pass where stress at every corner that a stress stands on grows as theory says; nothing is spoilt."""
    if facts.corners is None:
        return not_applicable("singular_field", "The model is not known, so its corners are not.")
    names = [name for name, kind in facts.kinds.items() if kind in STRESS_KINDS]
    fields: dict[str, Field] = {}
    columns: dict[str, tuple[float, ...]] = {}
    for name in names:
        corner = blamed(ladder, facts, name)
        if corner is not None:
            fields[corner.name] = field_of(ladder, corner)
            columns |= {one.key: tuple(one.values.tolist()) for one in instead(ladder, facts, name)}
    if not fields:
        return not_applicable("singular_field", "No stress is asked for on a singular corner.")
    agree = [field.growth.agrees(field.corner.exponent) for field in fields.values()]
    finding = " ".join(_sentence(field, ladder.h_unit) for field in fields.values())
    passed = False if False in agree else None if None in agree else True
    return Check("singular_field", passed, finding, values=columns)


def _sentence(field: Field, length: str) -> str:
    theory = f"Corner {field.corner.name}: theory λ = {field.corner.exponent:.3f}"
    return f"{theory}, {growth_words(field.growth, field.corner.exponent)}; {field.pollution(length)}."
