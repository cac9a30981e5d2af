"""The singular corners of a problem: openings, conditions on both sides, exponents.

Where no table of corners is at hand, theory alone says which ones are singular (Williams 1952,
J. Appl. Mech. 19:526). A support that ends on a straight or curved edge is a corner of 180°. Where the exact
field of the problem is known and stays bounded, as when its own displacements are prescribed, the corner is
not excited and left out.
"""

import numpy as np

from convergence.fem.part import EdgeName, Part
from convergence.fem.problem import Problem
from convergence.fem.williams import weakest_exponent
from convergence.results import Corner

REGULAR = 0.999
STEP = 1e-6
GROWTH = 1.1


def singular_corners(problem: Problem) -> tuple[Corner, ...]:
    """Return the corners whose weakest exponent is below one, weakest first."""
    part = problem.part
    found = []
    for name, edges in _boundary_points(part).items():
        opening = _opening(part, name)
        sides = (_condition(problem, edges[0]), _condition(problem, edges[1]))
        index = part.outline[edges[0]]
        kappa = problem.materials[_region(part, index)].kappa(problem.kind)
        exponent = weakest_exponent(opening, sides, kappa=kappa)
        if exponent is not None and exponent < REGULAR and _excited(problem, name):
            x, y = part.points[name]
            found.append(Corner(name, float(x), float(y), opening, sides, exponent))
    return tuple(sorted(found, key=lambda corner: corner.exponent))


def _excited(problem: Problem, name: str) -> bool:
    """Return whether the exact stress, where it is known, grows towards the corner along its bisector."""
    if problem.exact is None:
        return True
    part = problem.part
    block = next(block for block in part.blocks if name in block)
    place = block.index(name)
    ahead, behind = (_unit(_tangent(part, name, block[(place + step) % 4])) for step in (1, -1))
    inward = ahead + behind
    x, y = np.array(part.points[name])[:, None] + part.size * inward[:, None] * np.array([1e-3, 1e-6])
    outer, inner = np.linalg.norm(problem.exact.stress(x, y), axis=0)
    return bool(inner > outer * GROWTH)


def _unit(vector: np.ndarray) -> np.ndarray:
    return np.asarray(vector / np.hypot(*vector))


def _boundary_points(part: Part) -> dict[str, tuple[EdgeName, EdgeName]]:
    """Return the two outline edges that meet at each point of the outline, in no order."""
    meeting: dict[str, list[EdgeName]] = {}
    for edge in part.outline:
        for name in edge:
            meeting.setdefault(name, []).append(edge)
    return {name: (edges[0], edges[1]) for name, edges in meeting.items() if len(edges) == 2}


def _opening(part: Part, name: str) -> float:
    """Return the angle of material at a point in degrees, from the tangents of the blocks' edges."""
    total = 0.0
    for block in part.blocks:
        if name not in block:
            continue
        place = block.index(name)
        ahead, behind = (_tangent(part, name, block[(place + step) % 4]) for step in (1, -1))
        total += float(np.degrees(np.arctan2(behind[1], behind[0]) - np.arctan2(ahead[1], ahead[0])) % 360.0)
    nearest = round(total)
    return float(nearest) if abs(total - nearest) < 1e-2 else total


def _tangent(part: Part, start: str, end: str) -> np.ndarray:
    points = part.edge(start, end, np.array([0.0, STEP]))
    return np.asarray(points[:, 1] - points[:, 0])


def _condition(problem: Problem, edge: EdgeName) -> str:
    """Return free, roller or clamped; a held component that is not the normal one counts as clamped."""
    part = problem.part
    held = set()
    for support in problem.supports:
        if support.boundary is None:
            continue
        named = {frozenset(e) for e in part.boundaries[support.boundary]}
        if frozenset(edge) in named:
            held |= {c for c, value in (("x", support.x), ("y", support.y)) if value is not None}
    if not held:
        return "free"
    if len(held) == 2:
        return "clamped"
    along = part.edge(*edge, np.array([0.0, 0.5, 1.0]))
    spread = np.ptp(along[0] if held == {"x"} else along[1])
    return "roller" if spread < 1e-9 * part.size else "clamped"


def _region(part: Part, block: int) -> str:
    for region, members in part.regions.items():
        if block in members:
            return region
    return "body"
