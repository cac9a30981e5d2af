"""What quantities are in the exact field of a problem: the limits of its ladders.

Peaks by fine sampling, lines by a Gauss rule; None for a quantity that is not read off the field here.
"""

from collections.abc import Mapping
from typing import Any

import numpy as np

from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart
from convergence.fem.stress import component as component_of

RULE = 64
SAMPLES = {"edge": 40_001, "block": 801}
INSIDE = 1e-9  # of an edge: places stay this far inside, so that stresses that jump have one value
STEP = 1e-3  # of the part's size
ROUNDING = 1e-10


def exact_value(problem: Problem, measure: str, arguments: Mapping[str, Any]) -> tuple[float, float] | None:
    """Return the value in the exact field and a bound of its error."""
    exact = problem.exact
    if exact is None:
        return None
    value, slack = None, 0.0
    if measure == "strain_energy" and not arguments:
        value = exact.energy
    elif measure in ("displacement", "stress"):
        value = _at_point(problem, exact, measure, arguments)
    elif measure == "rotation" and "at" in arguments:
        value, slack = _turn(problem, exact, _place(problem, arguments["at"])), 1e-8
    elif measure == "peak_stress":
        value, other = (_peak(problem, exact, arguments, coarser) for coarser in (1, 2))
        slack = 1e-8 + 2.0 * abs(value - other) / abs(value)
    elif problem.part.dimension == 2:
        value = _along(problem, exact, measure, arguments)
    return None if value is None else (value, (ROUNDING + slack) * abs(value))


def _place(problem: Problem, at: Any) -> np.ndarray:
    return np.array(problem.part.points[at] if isinstance(at, str) else at, dtype=float)


def _at_point(problem: Problem, exact: Exact, measure: str, arguments: Mapping[str, Any]) -> float:
    at = _place(problem, arguments["at"])
    if measure == "stress":
        return float(component_of(exact.stress(*at), arguments["component"]))
    u = exact.displacement(*at)
    component = arguments["component"]
    return float(np.linalg.norm(u) if component == "magnitude" else u["xyz".index(component)])


def _turn(problem: Problem, exact: Exact, at: np.ndarray) -> float:
    """Return the rotation at a place of a plane in degrees, by differences of fourth order."""
    step = STEP * problem.part.size
    factors = np.array([1.0, -8.0, 8.0, -1.0]) / (12.0 * step)
    offsets = step * np.array([-2.0, -1.0, 1.0, 2.0])
    along_x = exact.displacement(at[0] + offsets, np.full(4, at[1])) @ factors
    along_y = exact.displacement(np.full(4, at[0]), at[1] + offsets) @ factors
    return float(np.degrees(0.5 * (along_x[1] - along_y[0])))


def _peak(problem: Problem, exact: Exact, arguments: Mapping[str, Any], coarser: int) -> float:
    places = _samples(problem, arguments, coarser)
    if "near" in arguments:
        distance = np.linalg.norm(places - _place(problem, arguments["near"])[:, None], axis=0)
        places = places[:, distance <= arguments["radius"]]
    values = component_of(exact.stress(*places), arguments["component"])
    return float(values.min() if arguments["component"] == "third_principal" else values.max())


def _samples(problem: Problem, arguments: Mapping[str, Any], coarser: int) -> np.ndarray:
    """Return places (D, n). In a solid those of the plan: its exact fields do not change along z."""
    part = problem.part
    line, patch = (
        np.linspace(INSIDE, 1.0 - INSIDE, 1 + (SAMPLES[name] - 1) // coarser) for name in ("edge", "block")
    )
    if isinstance(part, RodPart):
        return np.array([part.stations[0] + (part.stations[-1] - part.stations[0]) * line])
    plan = part.plan if isinstance(part, SolidPart) else part
    assert isinstance(plan, Part)
    if "boundary" in arguments:
        found = [plan.edge(*edge, line) for edge in plan.boundaries[arguments["boundary"]]]
    else:
        every = tuple(range(len(plan.blocks)))
        blocks = plan.regions[arguments["region"]] if "region" in arguments else every
        found = [plan.block(index, patch, patch).reshape(2, -1) for index in blocks]
    places = np.concatenate(found, axis=1)
    return np.vstack([places, np.zeros_like(places[:1])]) if isinstance(part, SolidPart) else places


def _along(problem: Problem, exact: Exact, measure: str, arguments: Mapping[str, Any]) -> float | None:
    """Return what is read along a straight line of a plane part."""
    if measure == "mean_displacement":
        return _mean_displacement(problem, exact, arguments)
    if measure not in ("mean_stress", "linearised_stress", "section_force", "section_moment"):
        return None
    start, end = _place(problem, arguments["start"]), _place(problem, arguments["end"])
    share, weights = _rule()
    places = start[:, None] + share * (end - start)[:, None]
    length = float(np.linalg.norm(end - start))
    stress = exact.stress(*places)
    if measure in ("mean_stress", "linearised_stress"):
        return _linearised(stress, share, weights, arguments)
    along = (end - start) / length
    normal = np.array([along[1], -along[0]])
    xx, yy, _, xy = stress
    traction = np.array([xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]])
    areas = weights * length * problem.depth(places[0])
    if measure == "section_moment":
        return -float((length * (share - 0.5) * (normal @ traction)) @ areas)
    directions = {"normal": normal, "shear": along, "x": np.array([1.0, 0.0]), "y": np.array([0.0, 1.0])}
    return float(directions[arguments["component"]] @ traction @ areas)


def _linearised(
    stress: np.ndarray, share: np.ndarray, weights: np.ndarray, arguments: Mapping[str, Any]
) -> float | None:
    """Return a mean or linearised entry of the stress; across the line, where bending is asked for."""
    component = arguments["component"]
    if component not in ("xx", "yy", "zz", "xy"):
        return None
    one = component_of(stress, component)
    membrane, bending = float(one @ weights), float(6.0 * one @ (weights * (0.5 - share)))
    shares = {"membrane": membrane, "bending": bending, "membrane_plus_bending": membrane + bending}
    return shares[arguments.get("share", "membrane")]


def _mean_displacement(problem: Problem, exact: Exact, arguments: Mapping[str, Any]) -> float | None:
    """Return the mean over a boundary of edges, straight or curved."""
    part = problem.part
    if "boundary" not in arguments or not isinstance(part, Part):
        return None
    share, weights = _rule()
    total, area = 0.0, 0.0
    for edge in part.boundaries[arguments["boundary"]]:
        places = part.edge(*edge, share)
        slope = (part.edge(*edge, share + 1e-5) - part.edge(*edge, share - 1e-5)) / 2e-5
        areas = weights * np.hypot(*slope) * problem.depth(places[0])
        total += float(exact.displacement(*places)["xy".index(arguments["component"])] @ areas)
        area += float(areas.sum())
    return total / area


def _rule() -> tuple[np.ndarray, np.ndarray]:
    """Return places and weights on 0 … 1."""
    at, weights = np.polynomial.legendre.leggauss(RULE)
    return 0.5 * (at + 1.0), 0.5 * weights
