"""Structural hot-spot stress at a weld toe, extrapolated along the surface.

International Institute of Welding: Hobbacher, Recommendations for Fatigue Design of Welded Joints and
Components (from memory), surface of a plate of thickness t, distances from the toe: fine meshes 1.67 s(0.4 t)
− 0.67 s(1.0 t), steep gradients 2.52 s(0.4 t) − 2.24 s(0.9 t) + 0.72 s(1.4 t), coarse meshes 1.50 s(0.5 t) −
0.50 s(1.5 t). The factors are those of Lagrange, unrounded. Order as the stress, which is read off the toe.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import Direction, PartPoint, PointName, PositiveLength, Stress
from convergence.errors import require
from convergence.fem.problem import AnyPart
from convergence.fem.solution import Solution
from convergence.fem.stress import component as component_of
from convergence.quantities._place import (
    Recovery,
    components,
    line_stress,
    place_of,
    stress_order,
    tensor,
    unit,
)
from convergence.results import Kind

KIND: Kind = "point_stress"

DISTANCES = {"fine": (0.4, 1.0), "coarse": (0.5, 1.5), "quadratic": (0.4, 0.9, 1.4)}


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a stress is read on this corner of the part."""
    toe, along = np.array(place_of(part, arguments["toe"])), np.array(arguments["along"])
    steps = np.array(DISTANCES[arguments.get("rule", "fine")]) * arguments["thickness"]
    places = toe + np.multiply.outer(steps, along / np.linalg.norm(along))
    return any(corner.distance(tuple(place)) <= 1e-9 * part.size for place in places)


def hot_spot_stress(
    solution: Solution,
    *,
    toe: Annotated[PartPoint | PointName, "weld toe"],
    along: Annotated[Direction, "direction along the surface, away from the weld"],
    thickness: Annotated[PositiveLength, "thickness of the plate"],
    rule: Annotated[Literal["fine", "coarse", "quadratic"], "distances from the toe"] = "fine",
    component: Annotated[
        Literal["along", "first_principal"], "stress along the direction, or first principal"
    ] = "along",
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Stress:
    """The tensor is extrapolated, then its component formed. Unsuitable where a place is off the part."""
    mesh = solution.mesh
    require((mesh.dimension > 1, "measure", "hot_spot_stress", "a plane part or a solid"))
    direction, start = unit(along, "along", mesh.dimension), np.array(place_of(mesh.part, toe))
    distances = np.array(DISTANCES[rule])
    places = start + thickness * np.multiply.outer(distances, direction)
    stress = tensor(line_stress(solution, places.T, recovery) @ extrapolation(distances))
    if component == "first_principal":
        return float(component_of(components(stress), component))
    size = len(direction)
    return float(direction @ stress[:size, :size] @ direction)


def extrapolation(distances: np.ndarray) -> np.ndarray:
    """Return the factors of values at distances that give the polynomial through them at 0 (Lagrange)."""
    return np.array([np.prod(others / (others - d)) for d, others in _each(distances)])


def _each(distances: np.ndarray) -> list[tuple[float, np.ndarray]]:
    return [(float(d), np.delete(distances, number)) for number, d in enumerate(distances)]
