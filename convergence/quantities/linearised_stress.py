"""Membrane and bending stress along a straight line through a thickness.

ASME Boiler and Pressure Vessel Code VIII-2, Annex 5-A (from memory): membrane (1/t) ∫ s dx, bending at the
start (6/t²) ∫ s (t/2 − x) dx of each component, then the invariant of the linearised tensor. Bending is
formed of the stresses across the line only, not of the one along it and its shears, unless all are asked for.
The line should meet both surfaces at right angles; around a ring no correction is made for curvature. Order
as the stress.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import PartPoint, PointName, Stress
from convergence.errors import require
from convergence.fem.location import line_points
from convergence.fem.solution import Solution
from convergence.fem.stress import Component
from convergence.fem.stress import component as component_of
from convergence.quantities._place import Recovery, components, line_stress, place_of, stress_order, tensor
from convergence.results import Kind

KIND: Kind = "point_stress"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def linearised_stress(
    solution: Solution,
    *,
    start: Annotated[PartPoint | PointName, "first end of the line, where bending is taken"],
    end: Annotated[PartPoint | PointName, "second end of the line"],
    share: Annotated[
        Literal["membrane", "bending", "membrane_plus_bending"], "share of the stress"
    ] = "membrane_plus_bending",
    component: Annotated[Component, "component, principal or von Mises stress"] = "von_mises",
    bending: Annotated[Literal["across", "all"], "stresses that bending is formed of"] = "across",
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Stress:
    """Exchange start and end for the other surface. Unsuitable where the line leaves the part."""
    mesh = solution.mesh
    require((mesh.dimension > 1, "measure", "linearised_stress", "a plane part or a solid"))
    a, b = np.array(place_of(mesh.part, start)), np.array(place_of(mesh.part, end))
    length = float(np.linalg.norm(b - a))
    require((length > 0.0, "end", end, "another point than `start`"))
    places, weights = line_points(mesh, tuple(a), tuple(b))
    stress, shares = tensor(line_stress(solution, places, recovery)), weights / length
    membrane = stress @ shares
    along = np.zeros(3)
    along[: len(a)] = (b - a) / length
    bent = 6.0 * stress @ (shares * (0.5 - along[: len(a)] @ (places - a[:, None]) / length))
    if bending == "across":
        across = np.eye(3) - np.outer(along, along)
        bent = across @ bent @ across
    total = {"membrane": membrane, "bending": bent, "membrane_plus_bending": membrane + bent}
    return float(component_of(components(total[share]), component))
